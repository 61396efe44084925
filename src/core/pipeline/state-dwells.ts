import type { DwellTable } from '../dwells/dwell-table.ts'

/** Counts of the dwells of one state and how they were cut. */
export interface StateDwells {
  readonly complete: number
  /** Start seen, end cut by the record, a gap or a gate edge. In the likelihood. */
  readonly censored: number
  /** Start not seen: age unknown, left out of fits. */
  readonly startUnseen: number
  readonly totalSeconds: number
  /** Longest dwell, complete or not; null when there is none. */
  readonly longestSeconds: number | null
  /** Duration of the last dwell of the record if it is of this state, and whether its start was seen. */
  readonly lastSeconds: number | null
  /** Longest dwell's share of all observed time, 0..1. */
  readonly longestShare: number | null
}

/** Summary of one state's rows of a dwell table. */
export function dwellSummary(table: DwellTable, state: 0 | 1): StateDwells {
  let complete = 0
  let censored = 0
  let startUnseen = 0
  let totalBins = 0
  let allBins = 0
  let longest = 0
  let lastBins: number | null = null
  for (let row = 0; row < table.rows; row++) {
    const bins = table.durationBins[row]
    allBins += bins
    if (table.state[row] !== state) {
      lastBins = null
      continue
    }
    totalBins += bins
    const age = bins + table.entryAgeBins[row]
    lastBins = age
    if (age > longest) longest = age
    const code = table.censoring[row]
    if (code === 0) complete++
    else if (code === 2) censored++
    else startUnseen++
  }
  return {
    complete,
    censored,
    startUnseen,
    totalSeconds: totalBins * table.binSeconds,
    longestSeconds: longest === 0 ? null : longest * table.binSeconds,
    lastSeconds: lastBins === null ? null : lastBins * table.binSeconds,
    longestShare: longest === 0 ? null : Math.min(1, longest / allBins),
  }
}
