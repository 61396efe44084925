import type { Recipe } from './recipe.ts'

/** The part of a recipe in which one emitter differs from its session; arrays are replaced whole. */
export type RecipeDifference = DeepPartial<Omit<Recipe, 'version'>>

type DeepPartial<T> = T extends readonly unknown[]
  ? T
  : T extends object
    ? { readonly [K in keyof T]?: DeepPartial<T[K]> }
    : T

type Plain = Readonly<Record<string, unknown>>

function isPlain(value: unknown): value is Plain {
  return value !== null && typeof value === 'object' && !Array.isArray(value)
}

function merge(base: unknown, over: unknown): unknown {
  if (over === undefined) return base
  if (!isPlain(base) || !isPlain(over)) return over
  const keys = new Set([...Object.keys(base), ...Object.keys(over)])
  return Object.fromEntries([...keys].map((key) => [key, merge(base[key], over[key])]))
}

/** The session's recipe with one emitter's differences on top. */
export function resolveRecipe(base: Recipe, difference: RecipeDifference): Recipe {
  return merge(base, difference) as Recipe
}

/** A difference with more on top of it. */
export function addDifference(difference: RecipeDifference, more: RecipeDifference): RecipeDifference {
  return merge(difference, more) as RecipeDifference
}

/** A difference with only those of its entries that a recipe has, their values taken from `resolved`. */
export function knownDifference(difference: unknown, resolved: Recipe): RecipeDifference {
  const { version: _, ...choices } = resolved
  return known(difference, choices) as RecipeDifference
}

function known(difference: unknown, resolved: unknown): unknown {
  if (!isPlain(difference) || !isPlain(resolved)) return resolved
  const kept = Object.keys(resolved).filter((key) => Object.hasOwn(difference, key))
  return Object.fromEntries(
    kept.flatMap((key) =>
      difference[key] === undefined ? [] : [[key, known(difference[key], resolved[key])] as const],
    ),
  )
}

/** What must be put on top of `base` to get `wanted`; empty when they are equal. */
export function differenceOf(base: Recipe, wanted: Recipe): RecipeDifference {
  return differing(base, wanted) ?? {}
}

function differing(base: unknown, wanted: unknown): unknown {
  if (isPlain(base) && isPlain(wanted)) {
    const entries = Object.keys(wanted).flatMap((key) => {
      const part = differing(base[key], wanted[key])
      return part === undefined ? [] : [[key, part] as const]
    })
    return entries.length === 0 ? undefined : Object.fromEntries(entries)
  }
  return JSON.stringify(base) === JSON.stringify(wanted) ? undefined : wanted
}
