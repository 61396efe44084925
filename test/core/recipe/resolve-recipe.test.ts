import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import type { Recipe } from '../../../src/core/recipe/recipe.ts'
import {
  addDifference,
  differenceOf,
  knownDifference,
  type RecipeDifference,
  resolveRecipe,
} from '../../../src/core/recipe/resolve-recipe.ts'
import { anyRecipe } from './any-recipe.ts'

/** A difference: the one between two recipes has any subset of the entries. */
const anyDifference: fc.Arbitrary<RecipeDifference> = fc
  .tuple(anyRecipe, fc.subarray(['bin', 'baseline', 'threshold', 'dwells', 'fit', 'goodness'] as const))
  .map(([recipe, keys]) => Object.fromEntries(keys.map((key) => [key, recipe[key]])))

describe('resolveRecipe', () => {
  it('changes only what the difference names', () => {
    const resolved = resolveRecipe(DEFAULT_RECIPE, { threshold: { rule: 'hand', handCounts: 28 } })
    expect(resolved).toEqual({
      ...DEFAULT_RECIPE,
      threshold: { rule: 'hand', sigmas: DEFAULT_RECIPE.threshold.sigmas, handCounts: 28 },
    })
  })

  it('replaces arrays whole and sets null', () => {
    const base = resolveRecipe(DEFAULT_RECIPE, {
      baseline: { excludedSeconds: [[1, 2] as const, [3, 4] as const] },
      threshold: { handCounts: 5 },
    })
    const resolved = resolveRecipe(base, {
      baseline: { excludedSeconds: [[7, 8] as const] },
      threshold: { handCounts: null },
    })
    expect(resolved.baseline.excludedSeconds).toEqual([[7, 8]])
    expect(resolved.threshold.handCounts).toBeNull()
  })

  it('leaves its arguments as they are', () => {
    const before = JSON.stringify(DEFAULT_RECIPE)
    resolveRecipe(DEFAULT_RECIPE, { bin: { seconds: 1 } })
    expect(JSON.stringify(DEFAULT_RECIPE)).toBe(before)
  })

  it('one difference on top of another resolves as both in turn', () => {
    fc.assert(
      fc.property(anyRecipe, anyDifference, anyDifference, (base, first, second) => {
        expect(resolveRecipe(base, addDifference(first, second))).toEqual(
          resolveRecipe(resolveRecipe(base, first), second),
        )
      }),
      { seed: 21 },
    )
  })
})

describe('differenceOf', () => {
  it('gives the wanted recipe back, and nothing for equal ones', () => {
    fc.assert(
      fc.property(anyRecipe, anyRecipe, (base, wanted) => {
        expect(resolveRecipe(base, differenceOf(base, wanted))).toEqual(wanted)
        expect(differenceOf(base, base)).toEqual({})
      }),
      { seed: 22 },
    )
  })
})

describe('knownDifference', () => {
  it('keeps a difference that holds only entries of a recipe', () => {
    fc.assert(
      fc.property(anyRecipe, anyDifference, (base, difference) => {
        expect(knownDifference(difference, resolveRecipe(base, difference))).toEqual(difference)
      }),
      { seed: 23 },
    )
  })

  it('drops the version, names that every object inherits, and entries without a value', () => {
    const difference: unknown = JSON.parse(
      '{"version":1,"toString":1,"__proto__":{"polluted":1},"threshold":{"handCounts":3,"constructor":2}}',
    )
    const resolved: Recipe = resolveRecipe(DEFAULT_RECIPE, { threshold: { handCounts: 3 } })
    expect(knownDifference(difference, resolved)).toEqual({ threshold: { handCounts: 3 } })
    expect(knownDifference({ threshold: { handCounts: undefined } }, DEFAULT_RECIPE)).toEqual({
      threshold: {},
    })
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined()
  })
})
