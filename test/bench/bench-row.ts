/** One measured figure of `npm run bench`. */
export interface BenchRow {
  readonly what: string
  readonly value: number
  readonly unit: string
  /** What it was compared with in the same run, or why there was no rival. */
  readonly rival: string
  /** value / value of the rival; null without a rival. */
  readonly ratio: number | null
  readonly budget: string
  /** null when nothing could be decided. */
  readonly ok: boolean | null
}
