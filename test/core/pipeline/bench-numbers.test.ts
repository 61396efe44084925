import { describe, expect, it } from 'vitest'
import { benchNumbers, dwellsAt } from '../../../src/core/pipeline/bench-numbers.ts'
import { corridorOf } from '../../../src/core/pipeline/corridor.ts'
import { fitRow } from '../../../src/core/pipeline/fit-row.ts'
import { dwellSummary } from '../../../src/core/pipeline/state-dwells.ts'
import { rowOf } from '../../../src/core/pipeline/study-thresholds.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'
import { fieldModel, fieldTrace } from './field-record.ts'

const laws = ['power', 'exponential'] as const
const recipeFor = (gate: 'all' | 'reference' | 'driven') =>
  resolveRecipe(DEFAULT_RECIPE, {
    dwells: { gate },
    fit: { laws, shown: { on: 'exponential', off: 'exponential' } },
  })
const corridor = corridorOf(fieldTrace(120, 'numbers'))
const [off, on] = fieldModel(1).states.map(({ dwell }) => dwell)

describe('benchNumbers', () => {
  it.each(['all', 'reference', 'driven'] as const)(
    'agrees with the row of the table for dwells of gate %s',
    (gate) => {
      const recipe = recipeFor(gate)
      const product = corridor.thresholds(recipe)
      const prepared = corridor.prepared(recipe)
      const { counts } = product.byRule
      const numbers = benchNumbers(prepared, product, recipe, counts)
      const row = rowOf(product.table, counts)
      const rough = fitRow(product, prepared.levelled, recipe, row, 'none')
      const columns = product.table.grid.edges.length - 1
      for (const state of [0, 1] as const) {
        const block = product.table.blocks[product.group][state]
        const tallied = (list: Float64Array): number =>
          list.subarray(row * columns, (row + 1) * columns).reduce((a, b) => a + b, 0)
        const { dwells, fits } = numbers.states[state]
        expect(dwells.complete).toBe(tallied(block.completeCount))
        expect(dwells.censored).toBe(tallied(block.censoredCount))
        expect(dwells.startUnseen).toBe(block.unseenStarts[row])
        expect(dwells.totalSeconds).toBeCloseTo(block.stateBins[row] * 0.01, 9)
        for (const [index, fit] of fits.fits.entries()) {
          const other = rough.states[state].fits[index]
          expect(fit.complete).toBe(other.complete)
          // Columns of several durations stand for their dwells to about 1e-5.
          expect(fit.logLikelihood).toBeCloseTo(other.logLikelihood ?? Number.NaN, 1)
        }
      }
    },
  )

  it('covers every usable bin once, and the numbers of both gates add up to less than the record', () => {
    const seconds = (gate: 'all' | 'reference' | 'driven'): number => {
      const recipe = recipeFor(gate)
      const product = corridor.thresholds(recipe)
      const { states } = benchNumbers(corridor.prepared(recipe), product, recipe, product.byRule.counts)
      return states[0].dwells.totalSeconds + states[1].dwells.totalSeconds
    }
    expect(seconds('all')).toBeCloseTo(120, 9)
    const gated = seconds('reference') + seconds('driven')
    // 23 edges inside the record, 50 ms of guard after each.
    expect(gated).toBeLessThan(120)
    expect(gated).toBeGreaterThan(120 - 24 * 0.06)
  })

  it('does not depend on what was asked before: equal questions, equal answers', () => {
    const recipe = recipeFor('driven')
    const fresh = corridorOf(fieldTrace(120, 'numbers'))
    const answer = (from: typeof corridor) =>
      benchNumbers(from.prepared(recipe), from.thresholds(recipe), recipe, 20)
    expect(answer(corridor)).toEqual(answer(fresh))
    expect(answer(corridor)).toEqual(answer(corridor))
  })

  it('lists the dwells it counts, also between steps of the table and beyond its ends', () => {
    const model = {
      ...fieldModel(20),
      ...twoLevelModel({ durationSeconds: 20, offCps: 5e3, onCps: 4e5, off, on }),
    }
    const bright = corridorOf(fieldTrace(20, 'bright', model))
    const recipe = recipeFor('all')
    const product = bright.thresholds(recipe)
    const prepared = bright.prepared(recipe)
    const { firstThreshold, step, rows } = product.table
    expect(step).toBeGreaterThan(1)
    const last = firstThreshold + (rows - 1) * step
    for (const wanted of [firstThreshold - 50, firstThreshold + 1, 100 + step, last - 1, last + 5000]) {
      const numbers = benchNumbers(prepared, product, recipe, wanted)
      const table = dwellsAt(prepared, product, recipe, wanted)
      for (const state of [0, 1] as const) {
        expect(dwellSummary(table, state)).toEqual(numbers.states[state].dwells)
      }
    }
  })
})
