import type { Baseline } from '../baseline/baseline.ts'
import type { Fit } from '../fits/fit.ts'
import type { DroppedCounts } from '../photons/photon-stream.ts'
import type { Gate } from '../photons/gate.ts'
import type { Pyramid } from '../photons/pyramid.ts'
import type { LevelledTrace } from '../states/levels.ts'
import type { ThresholdTable } from '../states/threshold-table.ts'

/** What the Bench draws of a record before any threshold is chosen: cheap to keep, bounded by bins. */
export interface TraceProduct {
  readonly levelled: LevelledTrace
  readonly bins: number
  readonly usableBins: number
  readonly photons: number
  readonly durationSeconds: number
  readonly dropped: DroppedCounts
  readonly gate: Gate | null
  readonly baseline: Baseline
  /** Bins of each levelled value; entry i is value `histogram.first + i`. */
  readonly histogram: { readonly first: number; readonly counts: Float64Array }
  readonly pyramid: Pyramid
  readonly suggestedBin: { readonly seconds: number; readonly reason: string }
}

/** Everything that depends on the threshold, for every threshold, before fits. */
export interface ThresholdProduct {
  readonly table: ThresholdTable
  /** Index into table.groups that the recipe asks to fit. */
  readonly group: number
  /** Per row. */
  readonly falseOnPerBin: Float64Array
  readonly falseOffPerBin: Float64Array
  /** Infinity where no artefact is expected. */
  readonly artefactCutoffOnSeconds: Float64Array
  readonly artefactCutoffOffSeconds: Float64Array
  /** The rule's threshold, counts per bin on the levelled axis, and why. */
  readonly byRule: { readonly counts: number; readonly rule: string; readonly message: string }
}

/** Fits of one state at one threshold. */
export interface StateFits {
  readonly shortest: { readonly bins: number; readonly rule: string; readonly message: string }
  /** One per law asked for, with weights. */
  readonly fits: readonly Fit[]
  /** Index into fits of the law shown (the recipe's choice, or the one of greatest weight); -1 when none fitted. */
  readonly shown: number
}

/** Fits at one row of the threshold table. */
export interface RowFits {
  readonly row: number
  /** [off, on]. */
  readonly states: readonly [StateFits, StateFits]
}
