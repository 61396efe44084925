import { halfThreshold } from '../states/half-threshold.ts'
import type { Recipe } from '../recipe/recipe.ts'
import { buildThresholdTable, thresholdRange } from '../states/build-threshold-table.ts'
import { type CountHistogram, countHistogram } from '../states/count-histogram.ts'
import type { LevelledTrace } from '../states/levels.ts'
import { stateErrors } from '../states/state-errors.ts'
import { type RuledThreshold, thresholdByRule } from '../states/threshold-rules.ts'
import type { TableGroup, ThresholdTable } from '../states/threshold-table.ts'
import type { ThresholdProduct } from './analysis-products.ts'
import { baselinePerBin, type PreparedTrace } from './prepare-trace.ts'

/** Index of the group the recipe asks for; `all` when the record has no such gate class. */
export function groupIndex(table: ThresholdTable, wanted: TableGroup): number {
  const index = table.groups.indexOf(wanted)
  return index < 0 ? 0 : index
}

/** Row of the table nearest to a threshold in counts, clipped to the table. */
export function rowOf(
  table: Pick<ThresholdTable, 'firstThreshold' | 'step' | 'rows'>,
  threshold: number,
): number {
  const row = Math.round((threshold - table.firstThreshold) / table.step)
  return Math.min(table.rows - 1, Math.max(0, row))
}

/** Threshold in counts of a row. */
export function thresholdOf(table: Pick<ThresholdTable, 'firstThreshold' | 'step'>, row: number): number {
  return table.firstThreshold + row * table.step
}

/** The table of all thresholds with error rates; one pass over the bins. */
export function studyThresholds(prepared: PreparedTrace, recipe: Recipe): ThresholdProduct {
  const { levelled } = prepared
  const range = thresholdRange(levelled)
  const table = buildThresholdTable(levelled, prepared.gateCodes, range)
  const thresholds = Float64Array.from({ length: table.rows }, (_, row) => thresholdOf(table, row))
  const errors = stateErrors(thresholds, levelled, baselinePerBin(prepared))
  return {
    table,
    group: groupIndex(table, recipe.dwells.gate),
    falseOnPerBin: errors.falseOnPerBin,
    falseOffPerBin: errors.falseOffPerBin,
    artefactCutoffOnSeconds: errors.artefactCutoffOnSeconds,
    artefactCutoffOffSeconds: errors.artefactCutoffOffSeconds,
    byRule: ruledThreshold(recipe, levelled, countHistogram(levelled), table, errors),
  }
}

/** The rule's threshold, given the table and its error rates. */
export function ruledThreshold(
  recipe: Recipe,
  levelled: LevelledTrace,
  histogram: CountHistogram,
  table: ThresholdTable,
  errors: Pick<ThresholdProduct, 'falseOnPerBin' | 'falseOffPerBin'>,
): RuledThreshold {
  const { firstThreshold, step, usableBins } = table
  const { falseOnPerBin, falseOffPerBin } = errors
  const half = halfThreshold({ firstThreshold, step, falseOnPerBin, falseOffPerBin }, levelled, usableBins)
  return thresholdByRule(recipe.threshold, levelled, histogram, half)
}
