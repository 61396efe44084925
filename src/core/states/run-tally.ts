import { columnOf, type DurationGrid } from './duration-grid.ts'

/** Number, sum and sum of squares of (m - first m of the column), per column of a grid. */
export interface ColumnTally {
  readonly count: Float64Array
  readonly sum: Float64Array
  readonly squares: Float64Array
}

/** Durations below this find their column by a look-up. */
const LOOKED_UP = 8192

/** Column and offset in the column of every duration, fast for short ones. */
export interface ColumnFinder {
  column(m: number): number
  readonly edges: Float64Array
}

export function columnFinder(grid: DurationGrid): ColumnFinder {
  const table = new Uint16Array(LOOKED_UP)
  for (let m = 1; m < LOOKED_UP; m++) table[m] = columnOf(grid, m)
  return { column: (m) => (m < LOOKED_UP ? table[m] : columnOf(grid, m)), edges: grid.edges }
}

export function emptyTally(columns: number): ColumnTally {
  return {
    count: new Float64Array(columns),
    sum: new Float64Array(columns),
    squares: new Float64Array(columns),
  }
}

/** Adds (sign 1) or takes away (sign -1) one duration of m bins. All sums stay exact integers. */
export function tally(into: ColumnTally, finder: ColumnFinder, m: number, sign: number): void {
  const column = finder.column(m)
  const y = m - finder.edges[column]
  into.count[column] += sign
  into.sum[column] += sign * y
  into.squares[column] += sign * y * y
}
