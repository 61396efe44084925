import { changePlaces, comparesInPairs } from './change-places.ts'
import { EXACT_COLUMNS, columnOf, type DurationGrid } from './duration-grid.ts'
import type { LevelledTrace } from './levels.ts'
import { usableSpans } from './usable-spans.ts'

/** Dwells of one state at one threshold, gate edges ignored; columns as in ThresholdBlock, one row. */
export interface RunTally {
  readonly completeCount: Float64Array
  readonly completeSum: Float64Array
  readonly completeSquares: Float64Array
  readonly censoredCount: Float64Array
  readonly censoredSum: Float64Array
  readonly censoredSquares: Float64Array
  unseenStarts: number
  stateBins: number
  longestBins: number
}

const BINS_AT_ONCE = 1 << 15

function emptyTally(columns: number): RunTally {
  const column = (): Float64Array => new Float64Array(columns)
  return {
    completeCount: column(),
    completeSum: column(),
    completeSquares: column(),
    censoredCount: column(),
    censoredSum: column(),
    censoredSquares: column(),
    unseenStarts: 0,
    stateBins: 0,
    longestBins: 0,
  }
}

/** Adds one dwell of m bins whose start was seen. */
function add(tally: RunTally, grid: DurationGrid, m: number, complete: boolean): void {
  const column = columnOf(grid, m)
  const y = m - grid.edges[column]
  if (complete) {
    tally.completeCount[column]++
    tally.completeSum[column] += y
    tally.completeSquares[column] += y * y
  } else {
    tally.censoredCount[column]++
    tally.censoredSum[column] += y
    tally.censoredSquares[column] += y * y
  }
}

/**
 * Dwell tallies [off, on] of one threshold by one pass over the bins: the plain way, which the threshold table must
 * reproduce row by row and beat when all thresholds are wanted.
 *
 * @param threshold integer on the levelled axis: a bin is on when its value is at least this
 * @param grid columns; durations beyond its end fall into its last column
 */
export function singlePassTally(
  levelled: LevelledTrace,
  threshold: number,
  grid: DurationGrid,
): readonly [RunTally, RunTally] {
  const { values, offset, gaps, highest } = levelled
  const level = threshold - offset
  const pairs = comparesInPairs(values, highest - offset)
  const tallies = [emptyTally(grid.edges.length - 1), emptyTally(grid.edges.length - 1)] as const
  const places = new Uint32Array(BINS_AT_ONCE + 1)
  // Complete dwells of up to 64 bins, [state][m - 1]: the common case, kept apart from the rest.
  const short = new Int32Array(2 * EXACT_COLUMNS)
  const longest = [0, 0]
  const bins = [0, 0]
  const spans = usableSpans(values.length, gaps)
  for (let j = 0; j < spans.starts.length; j++) {
    const start = spans.starts[j]
    const end = spans.ends[j]
    let state: 0 | 1 = values[start] >= level ? 1 : 0
    let begun = start
    for (let from = start; from < end; from += BINS_AT_ONCE) {
      const to = Math.min(end, from + BINS_AT_ONCE + 1)
      const found = changePlaces(values, level, from, to, pairs, places, 0)
      for (let p = 0; p < found; p++) {
        const place = places[p]
        const m = place - begun
        bins[state] += m
        if (m > longest[state]) longest[state] = m
        if (begun === start) tallies[state].unseenStarts++
        else if (m <= EXACT_COLUMNS) short[state * EXACT_COLUMNS + m - 1]++
        else add(tallies[state], grid, m, true)
        begun = place
        state = state === 1 ? 0 : 1
      }
    }
    const m = end - begun
    bins[state] += m
    if (m > longest[state]) longest[state] = m
    if (begun === start) tallies[state].unseenStarts++
    else add(tallies[state], grid, m, false)
  }
  for (const state of [0, 1] as const) {
    const tally = tallies[state]
    for (let m = 1; m <= EXACT_COLUMNS; m++)
      tally.completeCount[m - 1] += short[state * EXACT_COLUMNS + m - 1]
    tally.stateBins = bins[state]
    tally.longestBins = longest[state]
  }
  return tallies
}
