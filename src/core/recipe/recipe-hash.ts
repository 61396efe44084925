import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js'
import type { Recipe } from './recipe.ts'

/** JSON with keys in alphabetical order, so that equal values give equal text. */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`
  if (value !== null && typeof value === 'object') {
    const entries = Object.entries(value).filter(([, one]) => one !== undefined)
    entries.sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))
    return `{${entries.map(([key, one]) => `${JSON.stringify(key)}:${canonicalJson(one)}`).join(',')}}`
  }
  return JSON.stringify(value)
}

/** First 16 hex digits of the SHA-256 of the canonical JSON. */
export function recipeHash(recipe: Recipe): string {
  return bytesToHex(sha256(utf8ToBytes(canonicalJson(recipe)))).slice(0, 16)
}
