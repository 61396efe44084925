import { addRun, type BlockBuilder } from './block-builder.ts'
import { columnOf, type DurationGrid } from './duration-grid.ts'
import type { ClassSpans, TakeRun } from './run-intervals.ts'

/** Column of every duration up to a length, for speed; longer ones by search. */
function columnFinder(grid: DurationGrid, longest: number): (m: number) => number {
  const known = new Uint16Array(Math.min(longest, 1 << 16) + 1)
  for (let m = 1, column = 0; m < known.length; m++) {
    if (m >= grid.edges[column + 1]) column++
    known[m] = column
  }
  return (m) => (m < known.length ? known[m] : columnOf(grid, m))
}

/**
 * Books runs of any length and kind, group 0 whole, gate classes piece by piece. Must be given the runs of the
 * record in the order of their last bins, as `runIntervals` finds them.
 *
 * @param builders [off, on] per group; changed
 * @param longest no run is longer
 * @param groupOfCode group of each gate code, -1 for none; null without gate classes
 */
export function runTaker(
  builders: readonly (readonly [BlockBuilder, BlockBuilder])[],
  grid: DurationGrid,
  longest: number,
  rows: number,
  classes: ClassSpans,
  groupOfCode: readonly number[] | null,
): TakeRun {
  const columns = grid.edges.length - 1
  const columnAt = columnFinder(grid, longest)
  const groups = groupOfCode ?? []
  const tallyLongest = (builder: BlockBuilder, state: 0 | 1, m: number, from: number, to: number): void => {
    const row = state === 0 ? from : to - 1
    if (m > builder.longest[row]) builder.longest[row] = m
  }
  // Runs come in the order of their last bins, so the stretch of the last bin only moves on (or waits).
  let last = 0
  const takeByClass = (
    state: 0 | 1,
    start: number,
    end: number,
    from: number,
    to: number,
    startSeen: boolean,
    endSeen: boolean,
  ): void => {
    while (classes.starts[last + 1] < end) last++
    let piece = last
    while (classes.starts[piece] > start) piece--
    for (; piece <= last; piece++) {
      const group = groups[classes.codes[piece]]
      if (group < 0) continue
      const builder = builders[group][state]
      const age = Math.min(end, classes.starts[piece + 1]) - start
      tallyLongest(builder, state, age, from, to)
      if (!startSeen) {
        builder.unseen[from]++
        builder.unseen[to]--
        continue
      }
      const entryAge = classes.starts[piece] - start
      if (entryAge > 0) {
        const column = columnAt(entryAge)
        addRun(builder.entered, columns, rows, column, entryAge - grid.edges[column], from, to)
      }
      const column = columnAt(age)
      const kind = piece === last && endSeen ? builder.complete : builder.censored
      addRun(kind, columns, rows, column, age - grid.edges[column], from, to)
    }
  }
  return (state, start, end, from, to, startSeen, endSeen) => {
    if (to <= from) return
    const builder = builders[0][state]
    const m = end - start
    tallyLongest(builder, state, m, from, to)
    if (startSeen) {
      const column = columnAt(m)
      const kind = endSeen ? builder.complete : builder.censored
      addRun(kind, columns, rows, column, m - grid.edges[column], from, to)
    } else {
      builder.unseen[from]++
      builder.unseen[to]--
    }
    if (groupOfCode !== null) takeByClass(state, start, end, from, to, startSeen, endSeen)
  }
}
