import { isDeepStrictEqual } from 'node:util'
import { describe, expect, it } from 'vitest'
import { corridorOf } from '../../../src/core/pipeline/corridor.ts'
import type { RecordInHand } from '../../../src/core/pipeline/prepare-trace.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import type { Recipe } from '../../../src/core/recipe/recipe.ts'
import { type RecipeDifference, resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import { fieldPhotons, fieldTrace } from './field-record.ts'

const recipeWith = (difference: RecipeDifference): Recipe => resolveRecipe(DEFAULT_RECIPE, difference)
const EXCLUDED = [[5, 9] as const]

/** Which of the stages a choice touches. */
const CHOICES: readonly (readonly [
  string,
  RecipeDifference,
  { readonly bins: boolean; readonly baseline: boolean },
])[] = [
  ['bin', { bin: { seconds: 0.05 } }, { bins: true, baseline: true }],
  ['baseline', { baseline: { method: 'drifting' } }, { bins: false, baseline: true }],
  ['stiffness', { baseline: { method: 'drifting', stiffnessSeconds: 20 } }, { bins: false, baseline: true }],
  ['excluded spans', { baseline: { excludedSeconds: EXCLUDED } }, { bins: false, baseline: true }],
  ['rule', { threshold: { rule: 'least-variance' } }, { bins: false, baseline: false }],
  ['hand', { threshold: { rule: 'hand', handCounts: 9 } }, { bins: false, baseline: false }],
  ['gate', { dwells: { gate: 'driven' } }, { bins: false, baseline: false }],
  ['laws', { fit: { laws: ['power'] } }, { bins: false, baseline: false }],
  ['goodness', { goodness: { seed: 9 } }, { bins: false, baseline: false }],
]

describe.each([
  ['photons', fieldPhotons(12, 'corridor')],
  ['trace', fieldTrace(12, 'corridor')],
] as const)('corridor of %s', (_, inHand) => {
  it.each(CHOICES)('computes for another %s only what it touches', (__, difference, touched) => {
    const corridor = corridorOf(inHand)
    const before = {
      prepared: corridor.prepared(DEFAULT_RECIPE),
      trace: corridor.traceProduct(DEFAULT_RECIPE),
      table: corridor.thresholds(DEFAULT_RECIPE).table,
    }
    const recipe = recipeWith(difference)
    const after = {
      prepared: corridor.prepared(recipe),
      trace: corridor.traceProduct(recipe),
      table: corridor.thresholds(recipe).table,
    }
    expect(after.prepared.trace === before.prepared.trace).toBe(!touched.bins)
    expect(after.prepared === before.prepared).toBe(!touched.baseline)
    expect(after.trace === before.trace).toBe(!touched.baseline)
    expect(after.table === before.table).toBe(!touched.baseline)
  })

  it('gives after any sequence of choices what a fresh one gives', () => {
    const corridor = corridorOf(inHand)
    const recipes = CHOICES.map(([, difference]) => recipeWith(difference))
    // There and back between every two neighbours, each stage asked in another order.
    const walk = [...recipes, DEFAULT_RECIPE, ...recipes.toReversed(), recipes[0], recipes[3], recipes[0]]
    const fresh = new Map(
      [...recipes, DEFAULT_RECIPE].map((recipe) => [recipe, productsOf(inHand, recipe)] as const),
    )
    for (const [step, recipe] of walk.entries()) {
      const thresholds = step % 2 === 0 ? corridor.thresholds(recipe) : null
      const trace = corridor.traceProduct(recipe)
      const products = { thresholds: thresholds ?? corridor.thresholds(recipe), trace }
      // One answer for whole tables: comparing element by element takes long.
      expect(isDeepStrictEqual(products, fresh.get(recipe)), `step ${step}`).toBe(true)
    }
  })
})

function productsOf(inHand: RecordInHand, recipe: Recipe): unknown {
  const corridor = corridorOf(inHand)
  return { thresholds: corridor.thresholds(recipe), trace: corridorOf(inHand).traceProduct(recipe) }
}

describe('corridor', () => {
  it('leaves its record as it is: counts are never altered', () => {
    const inHand = fieldTrace(30, 'untouched')
    const before = structuredClone(inHand)
    const corridor = corridorOf(inHand)
    for (const [, difference] of CHOICES) corridor.thresholds(recipeWith(difference))
    expect(isDeepStrictEqual(inHand, before)).toBe(true)
  })

  it('reads the group and the threshold of the rule anew', () => {
    const corridor = corridorOf(fieldTrace(30, 'group'))
    const all = corridor.thresholds(DEFAULT_RECIPE)
    const driven = corridor.thresholds(recipeWith({ dwells: { gate: 'driven' } }))
    expect(all.table.groups[all.group]).toBe('all')
    expect(driven.table.groups[driven.group]).toBe('driven')
    const hand = corridor.thresholds(recipeWith({ threshold: { rule: 'hand', handCounts: 9 } }))
    expect(hand.byRule.counts).toBe(9)
    expect(all.byRule.counts).not.toBe(9)
  })
})
