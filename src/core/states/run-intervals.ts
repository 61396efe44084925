import { EXACT_COLUMNS } from './duration-grid.ts'

/**
 * A run of bins that is a maximal run of one state at the rows [fromRow, toRow) of the threshold table and at no
 * others: bins [start, end). `startSeen` is false at the start of a usable span, `endSeen` false at its end.
 */
export type TakeRun = (
  state: 0 | 1,
  start: number,
  end: number,
  fromRow: number,
  toRow: number,
  startSeen: boolean,
  endSeen: boolean,
) => void

/** Stretches of one gate class that cover all bins: stretch j is bins [starts[j], starts[j + 1]). */
export interface ClassSpans {
  /** One entry more than there are stretches; the last is the number of bins. */
  readonly starts: Int32Array
  readonly codes: Uint8Array
}

/** Heights above this many rows do not fit the 16-bit levels. */
export const MOST_ROWS = 65535

/**
 * Finds every run of either state at every threshold by one walk over one usable span.
 *
 * Definitions. The level of a bin is the number of rows at which it is on: on at row t when level > t. An on
 * run [s, e) with lowest level y whose higher neighbour has level x < y is a maximal on run exactly at rows x
 * .. y - 1; an off run with highest level y whose lower neighbour has level x > y, exactly at rows y .. x - 1.
 * So the runs of all thresholds are the nodes of two trees over the bins (one by lowest, one by highest level;
 * Cartesian trees, Vuillemin 1980) and two stacks visit them in the order of their last bins, each once: fewer
 * runs than bins per state.
 *
 * Invariants between bins: levels increase strictly up the on stack and decrease up the off stack; the top of both
 * has the level of the last bin; the bottom entries (level 0, level rows) stand for "never on" and "never off".
 *
 * The frequent case, both ends seen, at most 64 bins, inside one class stretch, is tallied here as a difference over
 * rows in `short[code]`, entry (row * 64 + m - 1) of the state's half; every other run goes to `take`.
 *
 * @param levels level per bin, 0..rows
 * @param short per gate code: Int32Array of 2 x (rows + 1) x 64
 */
export function runIntervals(
  levels: Uint16Array,
  rows: number,
  spanStart: number,
  spanEnd: number,
  classes: ClassSpans,
  short: readonly Int32Array[],
  take: TakeRun,
): void {
  const onStart = new Int32Array(rows + 2)
  const onLevel = new Int32Array(rows + 2)
  const offStart = new Int32Array(rows + 2)
  const offLevel = new Int32Array(rows + 2)
  let on = 0
  let off = 0
  onLevel[0] = 0
  offLevel[0] = rows
  let previous = levels[spanStart]
  if (previous > 0) {
    on = 1
    onStart[1] = spanStart
    onLevel[1] = previous
  }
  if (previous < rows) {
    off = 1
    offStart[1] = spanStart
    offLevel[1] = previous
  }
  const onHalf = (rows + 1) * EXACT_COLUMNS
  let stretch = 0
  while (classes.starts[stretch + 1] <= spanStart) stretch++
  let i = spanStart + 1
  for (;;) {
    // Runs that end before bin i lie in this stretch with their last bin as long as i <= its end.
    const stop = Math.min(spanEnd - 1, classes.starts[stretch + 1])
    const tally = short[classes.codes[stretch]]
    const plainFrom = Math.max(spanStart + 1, classes.starts[stretch])
    for (; i <= stop; i++) {
      const level = levels[i]
      if (level === previous) continue
      if (level > previous) {
        for (;;) {
          const start = offStart[off]
          const from = offLevel[off]
          const below = offLevel[off - 1]
          const to = below < level ? below : level
          const m = i - start
          if (m <= EXACT_COLUMNS && start >= plainFrom) {
            tally[(from << 6) + m - 1]++
            tally[(to << 6) + m - 1]--
          } else take(0, start, i, from, to, start !== spanStart, true)
          if (below > level) {
            offLevel[off] = level
            break
          }
          off--
          if (below === level) break
        }
        on++
        onStart[on] = i
        onLevel[on] = level
      } else {
        for (;;) {
          const start = onStart[on]
          const to = onLevel[on]
          const below = onLevel[on - 1]
          const from = below > level ? below : level
          const m = i - start
          if (m <= EXACT_COLUMNS && start >= plainFrom) {
            tally[onHalf + (from << 6) + m - 1]++
            tally[onHalf + (to << 6) + m - 1]--
          } else take(1, start, i, from, to, start !== spanStart, true)
          if (below < level) {
            onLevel[on] = level
            break
          }
          on--
          if (below === level) break
        }
        off++
        offStart[off] = i
        offLevel[off] = level
      }
      previous = level
    }
    if (i >= spanEnd) break
    stretch++
  }
  // The span ends here: what is still open is cut.
  for (; on > 0; on--)
    take(1, onStart[on], spanEnd, onLevel[on - 1], onLevel[on], onStart[on] !== spanStart, false)
  for (; off > 0; off--)
    take(0, offStart[off], spanEnd, offLevel[off], offLevel[off - 1], offStart[off] !== spanStart, false)
}
