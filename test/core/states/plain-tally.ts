import type { DurationGrid } from '../../../src/core/states/duration-grid.ts'
import { columnOf } from '../../../src/core/states/duration-grid.ts'
import type { LevelledTrace } from '../../../src/core/states/levels.ts'

/** A levelled trace for tests. */
export function levelledOf(
  values: ArrayLike<number>,
  more: Partial<Omit<LevelledTrace, 'values'>> = {},
): LevelledTrace {
  const stored = values instanceof Uint32Array ? values : Uint16Array.from(values)
  const offset = more.offset ?? 0
  let highest = 0
  for (let i = 0; i < stored.length; i++) if (stored[i] > highest) highest = stored[i]
  return {
    values: stored,
    offset,
    highest: offset + highest,
    gaps: null,
    binSeconds: 0.01,
    startSeconds: 0,
    offCounts: 10,
    onCounts: 100,
    ...more,
  }
}

/** Tallies of one state and one group as plain lists of durations. */
export interface PlainGroup {
  complete: number[]
  censored: number[]
  entered: number[]
  unseenStarts: number
  stateBins: number
  longestBins: number
}

const empty = (): PlainGroup => ({
  complete: [],
  censored: [],
  entered: [],
  unseenStarts: 0,
  stateBins: 0,
  longestBins: 0,
})

/**
 * The slow, obvious reference: walks the bins one by one and follows each dwell through gate classes.
 * Returns [off, on] for group -1 (all) or a class code.
 */
export function plainTally(
  levelled: LevelledTrace,
  gateCodes: Uint8Array | null,
  threshold: number,
  group: number,
): [PlainGroup, PlainGroup] {
  const { values, offset, gaps } = levelled
  const out: [PlainGroup, PlainGroup] = [empty(), empty()]
  const n = values.length
  const usable = (i: number): boolean => i >= 0 && i < n && (gaps === null || gaps[i] === 0)
  const stateOf = (i: number): 0 | 1 => (values[i] + offset >= threshold ? 1 : 0)
  const codeOf = (i: number): number => (group < 0 ? -1 : (gateCodes?.[i] ?? 0))
  for (let i = 0; i < n; i++) {
    if (!usable(i) || (usable(i - 1) && stateOf(i - 1) === stateOf(i))) continue
    const state = stateOf(i)
    const seen = usable(i - 1)
    let end = i
    while (usable(end) && stateOf(end) === state) end++
    const tally = out[state]
    for (let at = i; at < end; at++) {
      if (codeOf(at) !== group) continue
      tally.stateBins++
      tally.longestBins = Math.max(tally.longestBins, at + 1 - i)
      const comesIn = at === i || codeOf(at - 1) !== group
      const goesOut = at + 1 === end || codeOf(at + 1) !== group
      if (!seen) {
        if (comesIn) tally.unseenStarts++
        continue
      }
      if (comesIn && at > i) tally.entered.push(at - i)
      if (goesOut) (at + 1 === end && usable(end) ? tally.complete : tally.censored).push(at + 1 - i)
    }
  }
  return out
}

/** Column tallies of a list of durations: number, sum and sum of squares of m - first m of the column. */
export function inColumns(grid: DurationGrid, durations: readonly number[]) {
  const columns = grid.edges.length - 1
  const count = Array.from({ length: columns }, () => 0)
  const sum = Array.from({ length: columns }, () => 0)
  const squares = Array.from({ length: columns }, () => 0)
  for (const m of durations) {
    const column = columnOf(grid, m)
    const y = m - grid.edges[column]
    count[column]++
    sum[column] += y
    squares[column] += y * y
  }
  return { count, sum, squares }
}

/** Levelled values of a telegraph with long dwells and Poisson-like noise, from a plain generator (xorshift32). */
export function telegraphValues(bins: number, seed: number, meanDwell = 60): Uint16Array {
  let x = seed >>> 0 || 1
  const next = (): number => {
    x ^= x << 13
    x ^= x >>> 17
    x ^= x << 5
    return (x >>> 0) / 2 ** 32
  }
  const values = new Uint16Array(bins)
  let on = false
  for (let i = 0; i < bins; i++) {
    if (next() < 1 / meanDwell) on = !on
    const noise = next() + next() + next() + next() - 2
    values[i] = Math.max(0, Math.round(on ? 60 + 13 * noise : 12 + 6 * noise))
  }
  return values
}
