import { dwellSummary } from './state-dwells.ts'
import { dwellTableOf } from '../dwells/dwell-table-of.ts'
import type { DwellTable } from '../dwells/dwell-table.ts'
import { sampleFromDwells } from '../dwells/dwell-sample-of.ts'
import { onFraction } from '../dwells/on-fraction.ts'
import type { Recipe } from '../recipe/recipe.ts'
import { edgeShare } from '../states/edge-share.ts'
import { spuriousSafeBins } from '../states/spurious-runs.ts'
import { statesAt } from '../states/states-at.ts'
import type { ThresholdProduct } from './analysis-products.ts'
import { lawComparisons } from './law-comparisons.ts'
import { bleachCheck } from './bleach-check.ts'
import { fitState } from './fit-row.ts'
import { flagsOf } from './flags.ts'
import { mixedBins } from './mixed-bins.ts'
import type { PreparedTrace } from './prepare-trace.ts'
import { scanState } from './scan-state.ts'
import { rowOf, thresholdOf } from './study-thresholds.ts'
import type { BenchNumbers, StateNumbers } from './emitter-numbers.ts'

/** Longer than this many record lengths, an artefact cutoff has no meaning for the record. */
const MEANINGLESS_RECORDS = 1e6

/**
 * The dwells of a prepared trace at the tabled threshold nearest to the one wanted, as in `benchNumbers`; pieces cut at
 * gate edges if the recipe asks for one class.
 */
export function dwellsAt(
  prepared: PreparedTrace,
  product: ThresholdProduct,
  recipe: Recipe,
  wanted: number,
): DwellTable {
  const row = rowOf(product.table, wanted)
  return dwellTableOf(
    statesAt(prepared.levelled, thresholdOf(product.table, row)),
    prepared.levelled,
    prepared.gateCodes,
    recipe.dwells.gate,
    {
      falseOnPerBin: product.falseOnPerBin[row],
      falseOffPerBin: product.falseOffPerBin[row],
    },
  )
}

/** Settled numbers; cost grows with bins (one pass) and dwells. Deterministic: the seed of the recipe is used. */
export function benchNumbers(
  prepared: PreparedTrace,
  product: ThresholdProduct,
  recipe: Recipe,
  wanted: number,
): BenchNumbers {
  const { levelled, baseline } = prepared
  const { table, group } = product
  const row = rowOf(table, wanted)
  const threshold = thresholdOf(table, row)
  const errors = { falseOnPerBin: product.falseOnPerBin[row], falseOffPerBin: product.falseOffPerBin[row] }
  const dwells = dwellsAt(prepared, product, recipe, threshold)
  const recordSeconds = levelled.values.length * levelled.binSeconds
  const meaningful = (seconds: number): number | null =>
    seconds < MEANINGLESS_RECORDS * recordSeconds ? seconds : null

  const one = (state: 0 | 1): StateNumbers => {
    const sample = sampleFromDwells(dwells, state, edgeShare(threshold, levelled, state))
    const fits = fitState(sample, state, spuriousSafeBins(table, group, row, state, errors), recipe, 'all')
    return {
      dwells: dwellSummary(dwells, state),
      fits,
      comparisons: lawComparisons(fits, sample),
      scan: scanState(fits, sample, recipe),
    }
  }
  const states: [StateNumbers, StateNumbers] = [one(0), one(1)]
  const numbers = {
    threshold,
    countsAboveBaseline: threshold - levelled.offCounts,
    ...errors,
    artefactCutoffSeconds: {
      on: meaningful(product.artefactCutoffOnSeconds[row]),
      off: meaningful(product.artefactCutoffOffSeconds[row]),
    },
    levels: {
      offCps: levelled.offCounts / levelled.binSeconds,
      onCps: levelled.onCounts / levelled.binSeconds,
    },
    baseline: {
      method: baseline.method,
      supportedShare: baseline.supportedShare,
      longestUnsupportedSeconds: baseline.longestUnsupportedSeconds,
      status: baseline.status,
      message: baseline.message,
    },
    onFraction: onFraction(dwells, {
      ...errors,
      confidence: recipe.fit.confidence,
      seed: recipe.goodness.seed,
    }),
    mixedBins: mixedBins(levelled, table, row),
    bleach: bleachCheck(
      states[0].dwells,
      states[0].fits,
      sampleFromDwells(dwells, 0, edgeShare(threshold, levelled, 0)),
      recipe.fit.confidence,
    ),
    states,
  }
  const flags = flagsOf(numbers, recordSeconds, levelled.binSeconds)
  const { gate } = recipe.dwells
  if (gate !== dwells.gate) {
    flags.unshift({
      key: 'no-such-gate',
      sentence: `The recipe asks for dwells under the gate class “${gate}”, which this record does not have: all its dwells were used.`,
    })
  }
  return { ...numbers, flags }
}
