/**
 * A trace levelled to its own mean baseline: value of bin i is floor(k_i - (b_i - bRef)), k_i the counts,
 * b_i the baseline in counts of that bin, bRef the time mean of b_i. With a constant baseline it is the trace itself.
 * A threshold c is an integer on this axis: bin i is on when its value is >= c.
 */
export interface LevelledTrace {
  /** Levelled value of bin i is `values[i] + offset`. */
  readonly values: Uint16Array | Uint32Array
  readonly offset: number
  readonly highest: number
  /** 1 where the bin cannot be used (not exposed, or excluded); null when all can. Runs are cut there. */
  readonly gaps: Uint8Array | null
  readonly binSeconds: number
  readonly startSeconds: number
  /** Mean baseline (off level, background included), counts per bin. */
  readonly offCounts: number
  /** Off level plus signal: on level, counts per bin. */
  readonly onCounts: number
}
