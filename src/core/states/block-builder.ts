import { EXACT_COLUMNS, type DurationGrid } from './duration-grid.ts'
import type { ThresholdBlock } from './threshold-table.ts'

/** Tallies of one kind over rows x columns, as differences over rows until summed. */
interface Tallies {
  readonly count: Float64Array
  readonly sum: Float64Array
  readonly squares: Float64Array
}

/**
 * One state in one group while its table is being built: every tally is a difference over rows (added where a run
 * begins to exist, taken away where it ends), so that a run costs the same however many thresholds it spans. All are
 * whole numbers below 2^53, so `finish` is exact.
 */
export interface BlockBuilder {
  readonly complete: Tallies
  readonly censored: Tallies
  readonly entered: Tallies
  readonly unseen: Float64Array
  /** Longest run that begins to exist at a row: first row for off, last row for on; later made monotonic. */
  readonly longest: Float64Array
}

export function blockBuilder(rows: number, columns: number, withEntries: boolean): BlockBuilder {
  const tallies = (cells: number): Tallies => ({
    count: new Float64Array(cells),
    sum: new Float64Array(cells),
    squares: new Float64Array(cells),
  })
  return {
    complete: tallies(rows * columns),
    censored: tallies(rows * columns),
    entered: tallies(withEntries ? rows * columns : 0),
    unseen: new Float64Array(rows + 1),
    longest: new Float64Array(rows),
  }
}

/** Adds a dwell in column `column`, y bins past its first duration, at rows [from, to). */
export function addRun(
  { count, sum, squares }: Tallies,
  columns: number,
  rows: number,
  column: number,
  y: number,
  from: number,
  to: number,
): void {
  const begin = from * columns + column
  count[begin]++
  sum[begin] += y
  squares[begin] += y * y
  if (to >= rows) return
  const end = to * columns + column
  count[end]--
  sum[end] -= y
  squares[end] -= y * y
}

/** Running sum down each column, from `firstColumn` on. */
function sumDownRows(cells: Float64Array, columns: number, firstColumn: number): void {
  const width = columns - firstColumn
  if (width <= 0) return
  for (let row = columns; row < cells.length; row += columns)
    for (let c = row + firstColumn; c < row + columns; c++) cells[c] += cells[c - columns]
}

/**
 * Sums the differences and returns the block.
 *
 * @param short differences of complete dwells of up to 64 bins in this state, (rows + 1) x 64, one per gate
 *   code counted
 * @param stateBins bins in this state, per row
 */
export function finish(
  builder: BlockBuilder,
  grid: DurationGrid,
  rows: number,
  state: 0 | 1,
  short: readonly Int32Array[],
  stateBins: Float64Array,
): ThresholdBlock {
  const columns = grid.edges.length - 1
  const { complete, censored, entered, unseen, longest } = builder
  const exact = Math.min(EXACT_COLUMNS, columns)
  for (const cells of short)
    for (let row = 0; row < rows; row++)
      for (let c = 0; c < exact; c++) complete.count[row * columns + c] += cells[row * EXACT_COLUMNS + c]
  for (const { count, sum, squares } of [complete, censored, entered]) {
    sumDownRows(count, columns, 0)
    // A column of one duration holds y = 0 only.
    sumDownRows(sum, columns, EXACT_COLUMNS)
    sumDownRows(squares, columns, EXACT_COLUMNS)
  }
  for (let row = 1; row < rows; row++) unseen[row] += unseen[row - 1]
  // A run at one threshold lies inside a run at every easier one.
  if (state === 0)
    for (let row = 1; row < rows; row++) longest[row] = Math.max(longest[row], longest[row - 1])
  else for (let row = rows - 2; row >= 0; row--) longest[row] = Math.max(longest[row], longest[row + 1])
  for (let row = 0; row < rows; row++)
    for (let c = exact - 1; c >= 0 && c + 1 > longest[row]; c--)
      if (complete.count[row * columns + c] > 0) longest[row] = c + 1
  return {
    completeCount: complete.count,
    completeSum: complete.sum,
    completeSquares: complete.squares,
    censoredCount: censored.count,
    censoredSum: censored.sum,
    censoredSquares: censored.squares,
    enteredCount: entered.count,
    enteredSum: entered.sum,
    enteredSquares: entered.squares,
    unseenStarts: unseen.slice(0, rows),
    stateBins,
    longestBins: longest,
  }
}
