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
