import type { DurationGrid } from './duration-grid.ts'
import { GUARD_CODE, type GateSegments } from './gate-segments.ts'
import { type ColumnFinder, type ColumnTally, columnFinder, emptyTally, tally } from './run-tally.ts'

/** Tallies of one group at the threshold reached so far. */
export interface GroupTally {
  readonly complete: ColumnTally
  readonly censored: ColumnTally
  readonly entered: ColumnTally
  unseenStarts: number
  stateBins: number
  longestBins: number
}

/**
 * Runs of one state while bins join it one stretch at a time. A run keeps its length at both of its ends, so
 * a joining stretch finds its neighbours without a search. Runs end at gaps and at the record's ends.
 *
 * Group 0 ignores gate edges. Group g > 0 holds the pieces inside windows of one gate class: a dwell whose start
 * was seen enters a window at its age there (`entered`), is censored at its age where it leaves, and completes in
 * the class of its last bin. Dwells of unseen start are counted and take no part.
 */
export interface StateRuns {
  readonly groups: readonly GroupTally[]
  /** Bins [from, to) join; none of them was in the state before and none is a gap. */
  join(from: number, to: number): void
}

export function stateRuns(
  bins: number,
  gaps: Uint8Array | null,
  grid: DurationGrid,
  segments: GateSegments | null,
  groupOfCode: readonly number[],
  groupCount: number,
): StateRuns {
  const columns = grid.edges.length - 1
  const finder: ColumnFinder = columnFinder(grid)
  const groups: GroupTally[] = Array.from({ length: groupCount }, () => ({
    complete: emptyTally(columns),
    censored: emptyTally(columns),
    entered: emptyTally(columns),
    unseenStarts: 0,
    stateBins: 0,
    longestBins: 0,
  }))
  // Length of the run that starts or ends at a bin; 0 where the bin is not in the state. Inside a run: anything.
  const length = new Uint32Array(bins)
  const whole = groups[0]

  const pieces = (start: number, end: number, endSeen: boolean, sign: number): void => {
    if (segments === null) return
    const last = segments.ofBin[end - 1]
    for (let segment = segments.ofBin[start]; segment <= last; segment++) {
      const code = segments.codes[segment]
      if (code === GUARD_CODE) continue
      const group = groups[groupOfCode[code]]
      const enteredAge = segments.starts[segment] - start
      if (enteredAge > 0) tally(group.entered, finder, enteredAge, sign)
      if (segment < last) tally(group.censored, finder, segments.starts[segment + 1] - start, sign)
      else tally(endSeen ? group.complete : group.censored, finder, end - start, sign)
    }
  }

  const count = (start: number, end: number, sign: number): void => {
    const startSeen = start > 0 && (gaps === null || gaps[start - 1] === 0)
    if (!startSeen) {
      whole.unseenStarts += sign
      return
    }
    const endSeen = end < bins && (gaps === null || gaps[end] === 0)
    tally(endSeen ? whole.complete : whole.censored, finder, end - start, sign)
    if (segments !== null) pieces(start, end, endSeen, sign)
  }

  const stretch = (start: number, end: number): void => {
    if (end - start > whole.longestBins) whole.longestBins = end - start
    if (segments === null) return
    const last = segments.ofBin[end - 1]
    for (let segment = segments.ofBin[start]; segment <= last; segment++) {
      if (segments.codes[segment] === GUARD_CODE) continue
      const group = groups[groupOfCode[segments.codes[segment]]]
      const age = Math.min(end, segments.starts[segment + 1]) - start
      if (age > group.longestBins) group.longestBins = age
    }
  }

  const own = (from: number, to: number): void => {
    whole.stateBins += to - from
    if (segments === null) return
    const last = segments.ofBin[to - 1]
    for (let segment = segments.ofBin[from]; segment <= last; segment++) {
      if (segments.codes[segment] === GUARD_CODE) continue
      groups[groupOfCode[segments.codes[segment]]].stateBins +=
        Math.min(to, segments.starts[segment + 1]) - Math.max(from, segments.starts[segment])
    }
  }

  return {
    groups,
    join(from, to) {
      let start = from
      let end = to
      if (from > 0 && length[from - 1] > 0) {
        start = from - length[from - 1]
        count(start, from, -1)
      }
      if (to < bins && length[to] > 0) {
        end = to + length[to]
        count(to, end, -1)
      }
      length[from] = 1
      length[to - 1] = 1
      length[start] = end - start
      length[end - 1] = end - start
      count(start, end, 1)
      stretch(start, end)
      own(from, to)
    },
  }
}
