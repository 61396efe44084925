import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { parseRecipe } from '../../../src/core/recipe/recipe-schema.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import { anyRecipe } from './any-recipe.ts'

/** Every place of a plain value, as paths of keys. */
function paths(value: unknown, at: readonly string[] = []): (readonly string[])[] {
  if (value === null || typeof value !== 'object' || Array.isArray(value)) return [at]
  return [at, ...Object.entries(value).flatMap(([key, one]) => paths(one, [...at, key]))]
}

function put(value: unknown, [key, ...rest]: readonly string[], wanted: unknown): unknown {
  if (key === undefined) return wanted
  const plain = value as Readonly<Record<string, unknown>>
  return { ...plain, [key]: put(plain[key], rest, wanted) }
}

describe('parseRecipe', () => {
  it('takes the default recipe', () => {
    expect(parseRecipe(DEFAULT_RECIPE)).toEqual({ ok: true, recipe: DEFAULT_RECIPE })
  })

  it('takes every recipe the controls can make, also after a way through JSON', () => {
    fc.assert(
      fc.property(anyRecipe, (recipe) => {
        expect(parseRecipe(recipe)).toEqual({ ok: true, recipe })
        const plain: unknown = JSON.parse(JSON.stringify(recipe))
        expect(parseRecipe(plain)).toEqual({ ok: true, recipe: plain })
      }),
      { seed: 11 },
    )
  })

  it('refuses a foreign value at every place, and says where', () => {
    for (const path of paths(DEFAULT_RECIPE)) {
      for (const wanted of [undefined, 'x', Number.NaN, Number.POSITIVE_INFINITY, -1e300, true, [null]]) {
        const parsed = parseRecipe(put(DEFAULT_RECIPE, path, wanted))
        expect(parsed.ok, `${path.join('.')} = ${String(wanted)}`).toBe(false)
        if (!parsed.ok && path.length > 0) expect(parsed.problem).toContain(path[0])
      }
    }
  })

  it('refuses a key it does not know at every object', () => {
    for (const path of paths(DEFAULT_RECIPE)) {
      const there = path.reduce<unknown>(
        (value, key) => (value as Record<string, unknown>)[key],
        DEFAULT_RECIPE,
      )
      if (there === null || typeof there !== 'object' || Array.isArray(there)) continue
      expect(parseRecipe(put(DEFAULT_RECIPE, [...path, 'extra'], 1)).ok, path.join('.')).toBe(false)
    }
  })

  it.each([
    ['a span that ends before it starts', { baseline: { excludedSeconds: [[2, 1]] as const } }],
    ['no law', { fit: { laws: [] } }],
    ['a fractional threshold', { threshold: { handCounts: 1.5 } }],
    ['a bin of no width', { bin: { seconds: 0 } }],
    ['certainty', { fit: { confidence: 1 } }],
  ])('refuses %s', (_, difference) => {
    expect(parseRecipe(resolveRecipe(DEFAULT_RECIPE, difference)).ok).toBe(false)
  })

  it('never throws', () => {
    fc.assert(
      fc.property(fc.anything({ maxDepth: 4 }), (value) => {
        expect(parseRecipe(value).ok).toBe(false)
      }),
      { seed: 12, numRuns: 500 },
    )
  })
})
