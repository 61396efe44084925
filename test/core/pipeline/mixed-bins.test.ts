import { describe, expect, it } from 'vitest'
import { corridorOf } from '../../../src/core/pipeline/corridor.ts'
import { type MixedBins, mixedBins } from '../../../src/core/pipeline/mixed-bins.ts'
import type { RecordInHand } from '../../../src/core/pipeline/prepare-trace.ts'
import { rowOf } from '../../../src/core/pipeline/study-thresholds.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import type { EmitterModel } from '../../../src/core/simulate/emitter-model.ts'
import { countHistogram } from '../../../src/core/states/count-histogram.ts'
import { statesAt } from '../../../src/core/states/states-at.ts'
import { fieldModel, fieldTrace } from './field-record.ts'

const recipe = resolveRecipe(DEFAULT_RECIPE, { baseline: { method: 'constant' } })

function studied(inHand: RecordInHand) {
  const corridor = corridorOf(inHand)
  const { levelled } = corridor.prepared(recipe)
  const { table, byRule } = corridor.thresholds(recipe)
  return { levelled, table, row: rowOf(table, byRule.counts) }
}

function mixedOf(inHand: RecordInHand): MixedBins {
  const { levelled, table, row } = studied(inHand)
  return mixedBins(levelled, table, row)
}

/** Poisson probability by multiplication, no gamma function. */
function poisson(k: number, mean: number): number {
  let p = Math.exp(-mean)
  for (let i = 1; i <= k; i++) p *= mean / i
  return p
}

describe('mixedBins', () => {
  it('equals the slow sum: switches counted in the states, the share integrated by the midpoint rule', () => {
    const { levelled, table, row } = studied(fieldTrace(60, 'mixed'))
    const { offCounts, onCounts } = levelled
    const threshold = table.firstThreshold + row * table.step
    const { starts, states, bins } = statesAt(levelled, threshold)
    // Dwells with both ends seen.
    const switches = starts.length - 2
    const share = [0, 0]
    for (const [run, start] of starts.entries()) share[states[run]] += (starts[run + 1] ?? bins) - start
    const from = Math.ceil(offCounts + 0.3 * (onCounts - offCounts))
    const to = Math.floor(offCounts + 0.7 * (onCounts - offCounts))
    let expected = 0
    let observed = 0
    const { first, counts } = countHistogram(levelled)
    const steps = 2000
    for (let k = from; k <= to; k++) {
      let mixed = 0
      for (let step = 0; step < steps; step++) {
        mixed += poisson(k, offCounts + ((step + 0.5) / steps) * (onCounts - offCounts)) / steps
      }
      expected += switches * mixed + share[0] * poisson(k, offCounts) + share[1] * poisson(k, onCounts)
      observed += counts[k - first] ?? 0
    }
    const fast = mixedBins(levelled, table, row)
    expect(fast.observed).toBe(observed)
    expect(fast.expected).toBeCloseTo(expected, 4)
    expect(fast.ratio).toBeCloseTo(observed / expected, 6)
  })

  // 600 s hold about 2000 switches and 800 such bins, so the ratio scatters by 4 %; 0.8 and 1.2 are five standard
  // deviations away: false alarm below 1e-6, and the seed is fixed.
  it('finds what is expected in a two-level record', () => {
    const { ratio, upperTail } = mixedOf(fieldTrace(600, 'two levels'))
    expect(ratio).toBeGreaterThan(0.8)
    expect(ratio).toBeLessThan(1.2)
    expect(upperTail).toBeGreaterThan(1e-6)
  })

  it('finds far more with a grey level half way', () => {
    const model = fieldModel(120)
    const [off, on] = model.states
    const grey = { ...on, name: 'grey', signalCps: 1900, next: [1, 1, 0] }
    const three: EmitterModel = {
      ...model,
      states: [{ ...off, next: [0, 1, 0.5] }, { ...on, next: [1, 0, 0] }, grey],
    }
    const { ratio, upperTail } = mixedOf(fieldTrace(120, 'grey', three))
    expect(ratio).toBeGreaterThan(1.5)
    expect(upperTail).toBeLessThan(1e-4)
  })

  it('has nothing to say where the levels are not apart', () => {
    const { levelled, table, row } = studied(fieldTrace(20, 'flat'))
    const flat = { ...levelled, onCounts: levelled.offCounts }
    expect(mixedBins(flat, table, row)).toEqual({ observed: 0, expected: 0, ratio: null, upperTail: 1 })
    expect(mixedBins({ ...levelled, onCounts: Number.NaN }, table, row).ratio).toBeNull()
  })
})
