import type { TableGroup } from '../states/threshold-table.ts'

/** Censoring of a dwell: complete, start unseen, end unseen, or both. */
export const CENSORING = ['complete', 'start-unseen', 'end-unseen', 'both-unseen'] as const

/**
 * One row per dwell (or per piece of a dwell when cut at gate edges), columns of equal length.
 * Every usable bin of the record belongs to exactly one row.
 */
export interface DwellTable {
  readonly rows: number
  readonly binSeconds: number
  /** Which rows fits and the on fraction use: `all`, or the pieces inside windows of one class (`gateAtStart`). */
  readonly gate: TableGroup
  readonly startSeconds: Float64Array
  readonly durationBins: Uint32Array
  /** 0 off, 1 on. */
  readonly state: Uint8Array
  /** Gate class codes at start and end, see GATE_CLASSES. */
  readonly gateAtStart: Uint8Array
  readonly gateAtEnd: Uint8Array
  /** Age at which observation of the piece begins, bins; 0 when the switch itself was seen in the piece. */
  readonly entryAgeBins: Uint32Array
  /** Index into CENSORING. */
  readonly censoring: Uint8Array
  /** Chance that a dwell of this length is made by shot noise, 0..1; NaN when error rates were not given. */
  readonly spuriousProbability: Float32Array
}
