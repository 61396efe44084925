import type { DurationGrid } from './duration-grid.ts'

/** Which dwells a block of the table counts. `all`: gate edges ignored. A gate class: dwells cut at its edges. */
export type TableGroup = 'all' | 'reference' | 'driven' | 'sham'

/**
 * Dwell statistics for every threshold, built in one pass over bins sorted by height.
 * Row t holds threshold `firstThreshold + t * step`. All arrays are row-major [row][column] per state and group.
 *
 * Invariants (tested): for every row, complete + censored + first + cut bins of both states = usable bins;
 * row t equals a plain pass over the trace at that threshold.
 */
export interface ThresholdTable {
  readonly grid: DurationGrid
  readonly binSeconds: number
  readonly firstThreshold: number
  readonly step: number
  readonly rows: number
  readonly groups: readonly TableGroup[]
  /** blocks[group][state], state 0 off, 1 on. */
  readonly blocks: readonly (readonly [ThresholdBlock, ThresholdBlock])[]
  /** Usable bins in all, and per group. */
  readonly usableBins: number
  readonly groupBins: Float64Array
}

/** Tallies of one state in one group. `columns` = grid.edges.length - 1. */
export interface ThresholdBlock {
  /** Dwells with both ends seen: number, sum and sum of squares of (m - column's first m); rows x columns. */
  readonly completeCount: Float64Array
  readonly completeSum: Float64Array
  readonly completeSquares: Float64Array
  /** Dwells whose start was seen and whose end was cut (record end, gap, gate edge), tallied at their age at the cut. */
  readonly censoredCount: Float64Array
  readonly censoredSum: Float64Array
  readonly censoredSquares: Float64Array
  /** Dwells that entered the group at an age > 0 (gate groups only), tallied at that age. Zero-length when group is `all`. */
  readonly enteredCount: Float64Array
  readonly enteredSum: Float64Array
  readonly enteredSquares: Float64Array
  /**
   * Per row: dwells whose start was not seen (first of the record, after a gap): not used in fits. In a gate
   * class: their stays in its windows.
   */
  readonly unseenStarts: Float64Array
  /** Per row: bins in this state, all dwells. */
  readonly stateBins: Float64Array
  /** Per row: longest dwell in this state, bins, complete or not. In a gate class: greatest age reached inside it. */
  readonly longestBins: Float64Array
}
