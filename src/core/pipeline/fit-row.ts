import { sampleFromRow } from '../dwells/dwell-sample-of.ts'
import type { DwellSample } from '../dwells/dwell-sample.ts'
import { withWeights } from '../fits/compare-fits.ts'
import { fitLaw } from '../fits/fit-law.ts'
import { shortestFitted } from '../fits/shortest-fitted.ts'
import { lawNamed } from '../laws/all-laws.ts'
import type { LawName } from '../laws/law.ts'
import type { Recipe } from '../recipe/recipe.ts'
import { edgeShare } from '../states/edge-share.ts'
import type { LevelledTrace } from '../states/levels.ts'
import { spuriousSafeBins } from '../states/spurious-runs.ts'
import type { RowFits, StateFits, ThresholdProduct } from './analysis-products.ts'
import { thresholdOf } from './study-thresholds.ts'

const STATE_KEYS = ['off', 'on'] as const

/** Which fits get intervals: none, only the law shown, or every law. */
export type IntervalsFor = 'none' | 'shown' | 'all'

/** Index of the law the recipe shows: its own choice, or the greatest AICc weight; -1 when nothing was fitted. */
export function shownIndex(fits: StateFits['fits'], wanted: LawName | 'best'): number {
  if (wanted !== 'best') return fits.findIndex((fit) => fit.law === wanted && fit.logLikelihood !== null)
  let best = -1
  let weight = -1
  for (const [index, fit] of fits.entries()) {
    if (fit.weight !== null && fit.weight > weight) {
      weight = fit.weight
      best = index
    }
  }
  return best
}

/** All laws of the recipe fitted to one sample, weighted, with intervals where asked. */
export function fitState(
  sample: DwellSample,
  state: 0 | 1,
  spuriousSafe: number,
  recipe: Recipe,
  intervals: IntervalsFor,
): StateFits {
  const key = STATE_KEYS[state]
  const shortest = shortestFitted(recipe.fit.shortest, key, spuriousSafe)
  const { confidence } = recipe.fit
  const rough = withWeights(
    recipe.fit.laws.map((name) =>
      fitLaw(lawNamed(name), sample, shortest.bins, { confidence, intervals: intervals === 'all' }),
    ),
  )
  const shown = shownIndex(rough, recipe.fit.shown[key])
  if (intervals !== 'shown' || shown < 0) return { shortest, fits: rough, shown }
  const fits = rough.map((fit, index) =>
    index === shown
      ? {
          ...fitLaw(lawNamed(fit.law), sample, shortest.bins, {
            confidence,
            intervals: true,
            start: fit.coordinates,
          }),
          weight: fit.weight,
        }
      : fit,
  )
  return { shortest, fits, shown }
}

/** Fits at one row of the threshold table, from its tallies alone: no list of dwells, no bins. */
export function fitRow(
  product: ThresholdProduct,
  levelled: Pick<LevelledTrace, 'offCounts' | 'onCounts'>,
  recipe: Recipe,
  row: number,
  intervals: IntervalsFor,
): RowFits {
  const { table, group } = product
  const threshold = thresholdOf(table, row)
  const errors = { falseOnPerBin: product.falseOnPerBin[row], falseOffPerBin: product.falseOffPerBin[row] }
  const one = (state: 0 | 1): StateFits => {
    const sample = sampleFromRow(table, group, state, row, edgeShare(threshold, levelled, state))
    return fitState(sample, state, spuriousSafeBins(table, group, row, state, errors), recipe, intervals)
  }
  return { row, states: [one(0), one(1)] }
}
