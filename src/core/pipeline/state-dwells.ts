import type { DwellTable } from '../dwells/dwell-table.ts'
import { GATE_CLASSES } from '../photons/gate.ts'

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

/**
 * Summary of one state's rows of a dwell table; of a table cut at gate edges only the pieces inside windows of its
 * class, as in `sampleFromDwells`. The last dwell and the time observed are of the whole record in any case.
 */
export function dwellSummary(table: DwellTable, state: 0 | 1): StateDwells {
  const code = table.gate === 'all' ? -1 : GATE_CLASSES.indexOf(table.gate)
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
    const age = bins + table.entryAgeBins[row]
    lastBins = age
    if (code >= 0 && table.gateAtStart[row] !== code) continue
    totalBins += bins
    if (age > longest) longest = age
    const kind = table.censoring[row]
    if (kind === 0) complete++
    else if (kind === 2) censored++
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
