import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { canonicalJson, recipeHash } from '../../../src/core/recipe/recipe-hash.ts'
import { differenceOf } from '../../../src/core/recipe/resolve-recipe.ts'
import { anyRecipe } from './any-recipe.ts'

function reversedKeys(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(reversedKeys)
  if (value === null || typeof value !== 'object') return value
  return Object.fromEntries(
    Object.entries(value)
      .toReversed()
      .map(([key, one]) => [key, reversedKeys(one)]),
  )
}

describe('canonicalJson', () => {
  it('sorts keys and leaves arrays in order', () => {
    expect(canonicalJson({ b: [2, 1], a: { d: null, c: 'x' } })).toBe('{"a":{"c":"x","d":null},"b":[2,1]}')
  })

  it('is JSON of the same value, whatever the order of keys', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        expect(canonicalJson(reversedKeys(value))).toBe(canonicalJson(value))
        expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)))
      }),
      { seed: 31 },
    )
  })
})

describe('recipeHash', () => {
  it('is the beginning of the SHA-256 of the canonical JSON (OpenSSL gives the same)', () => {
    const expected = createHash('sha256').update(canonicalJson(DEFAULT_RECIPE)).digest('hex').slice(0, 16)
    expect(recipeHash(DEFAULT_RECIPE)).toBe(expected)
  })

  it('differs when the recipes differ, and only then', () => {
    fc.assert(
      fc.property(anyRecipe, anyRecipe, (one, other) => {
        const equal = Object.keys(differenceOf(one, other)).length === 0
        expect(recipeHash(one) === recipeHash(other)).toBe(equal)
        expect(recipeHash(JSON.parse(JSON.stringify(reversedKeys(one))))).toBe(recipeHash(one))
      }),
      { seed: 32 },
    )
  })
})
