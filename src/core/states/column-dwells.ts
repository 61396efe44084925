import type { DurationGrid } from './duration-grid.ts'

/** Dwells tallied by column of a duration grid: how many, and how many bins they hold together. */
export interface ColumnDwells {
  readonly count: Float64Array
  readonly bins: Float64Array
}

/** For every column: dwells in later columns, and in the column itself. */
export interface LongerDwells {
  readonly above: ColumnDwells
  readonly own: ColumnDwells
}

/** Sums over all later columns. */
export function hostsLonger(own: ColumnDwells, grid: DurationGrid): LongerDwells {
  const columns = grid.edges.length - 1
  const count = new Float64Array(columns)
  const bins = new Float64Array(columns)
  for (let c = columns - 2; c >= 0; c--) {
    count[c] = count[c + 1] + own.count[c + 1]
    bins[c] = bins[c + 1] + own.bins[c + 1]
  }
  return { above: { count, bins }, own }
}

/**
 * Sum of f(m, dwells longer than m, bins in those dwells) over the durations m of each column. Exact where a
 * column is one duration; in wider columns f is taken at both ends and the middle (Simpson's rule) and the
 * dwells of the column itself count as spread evenly over it.
 */
export function overColumns(
  grid: DurationGrid,
  { above, own }: LongerDwells,
  f: (m: number, longer: number, bins: number) => number,
): Float64Array {
  const { edges } = grid
  return above.count.map((longer, c) => {
    const first = edges[c]
    const width = edges[c + 1] - first
    if (width === 1) return f(first, longer, above.bins[c])
    const at = (m: number): number => {
      const part = (first + width - 1 - m) / width
      return f(m, longer + part * own.count[c], above.bins[c] + part * own.bins[c])
    }
    const last = first + width - 1
    return (width * (at(first) + 4 * at((first + last) / 2) + at(last))) / 6
  })
}
