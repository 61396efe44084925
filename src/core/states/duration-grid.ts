/**
 * Columns on which durations (whole numbers of bins, m >= 1) are tallied: one column per m up to 64, then
 * columns of equal ratio, 16 per e-fold, edges at whole numbers. Within a column the tally keeps the number of dwells, the sum and
 * the sum of squares of (m - first m of the column), which is enough to put two nodes in the column that
 * reproduce mean and variance, so that likelihoods of smooth laws need no list of dwells.
 */
export interface DurationGrid {
  /** First duration of each column, bins; length = columns + 1, the last entry closes the last column. */
  readonly edges: Float64Array
}

export const EXACT_COLUMNS = 64
export const COLUMNS_PER_EFOLD = 16

/** A grid that reaches at least `longestBins`. Deterministic: equal inputs share a prefix of edges. */
export function durationGrid(longestBins: number): DurationGrid {
  const edges: number[] = []
  for (let m = 1; m <= EXACT_COLUMNS + 1; m++) edges.push(m)
  const ratio = Math.exp(1 / COLUMNS_PER_EFOLD)
  let exact = EXACT_COLUMNS + 1
  while ((edges.at(-1) as number) <= longestBins) {
    exact *= ratio
    edges.push(Math.max(Math.round(exact), (edges.at(-1) as number) + 1))
  }
  return { edges: Float64Array.from(edges) }
}

/** Column of a duration of m >= 1 bins; the last column also takes anything longer. */
export function columnOf(grid: DurationGrid, m: number): number {
  const { edges } = grid
  if (m <= EXACT_COLUMNS) return m - 1
  let low = EXACT_COLUMNS
  let high = edges.length - 2
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (edges[middle] <= m) low = middle
    else high = middle - 1
  }
  return low
}
