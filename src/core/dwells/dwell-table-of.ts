import { GATE_CLASSES } from '../photons/gate.ts'
import { columnOf, durationGrid } from '../states/duration-grid.ts'
import type { LevelledTrace } from '../states/levels.ts'
import { spuriousAndSplit, spuriousChance, wrongAndMissed, type ErrorRates } from '../states/spurious-runs.ts'
import type { StateSequence } from '../states/state-sequence.ts'
import type { TableGroup } from '../states/threshold-table.ts'
import type { DwellTable } from './dwell-table.ts'

const GAP = 255
const COMPLETE = 0
const START_UNSEEN = 1
const END_UNSEEN = 2
const BOTH_UNSEEN = 3

/**
 * Dwells of a record, one row each, in time order; gap runs have no row. Dwells that touch an end of the record
 * or a gap are censored there.
 *
 * With `gate` a class that occurs in the record, every dwell is cut at every change of gate code, guard bins
 * included, so that each usable bin still belongs to one row. A piece that ends at an edge is `end-unseen`, and
 * the next piece carries the age at which it is taken up (delayed entry); the last piece is complete when the
 * dwell's end was seen. Pieces of a dwell of unseen start stay `start-unseen`, with their age counted from the
 * first bin seen. Without such a class the dwells stay whole.
 *
 * @param gateCodes class code of every bin; null without a gate
 * @param errors chances of a wrong state per bin at this threshold, for the spurious probability of each dwell:
 *   expected spurious over observed dwells of about the same length, see `spuriousChance`; a piece has that of
 *   its whole dwell
 */
export function dwellTableOf(
  sequence: StateSequence,
  levelled: Pick<LevelledTrace, 'binSeconds' | 'startSeconds'>,
  gateCodes: Uint8Array | null,
  gate: TableGroup,
  errors?: ErrorRates,
): DwellTable {
  const { starts, states, bins } = sequence
  const code = (GATE_CLASSES as readonly string[]).indexOf(gate)
  const cut = gateCodes !== null && code >= 0 && gateCodes.includes(code)
  const edges = cut ? codeChanges(gateCodes) : []
  const most = starts.length + edges.length
  const startBin = new Float64Array(most)
  const durationBins = new Uint32Array(most)
  const state = new Uint8Array(most)
  const entryAgeBins = new Uint32Array(most)
  const censoring = new Uint8Array(most)
  const wholeBins = new Uint32Array(most)
  let rows = 0
  let edge = 0
  for (let r = 0; r < starts.length; r++) {
    if (states[r] === GAP) continue
    const start = starts[r]
    const end = r + 1 < starts.length ? starts[r + 1] : bins
    const startSeen = r > 0 && states[r - 1] !== GAP
    const endSeen = r + 1 < starts.length && states[r + 1] !== GAP
    while (edge < edges.length && edges[edge] <= start) edge++
    for (let from = start; from < end; rows++) {
      const to = edge < edges.length && edges[edge] < end ? edges[edge++] : end
      const over = to === end && endSeen
      startBin[rows] = from
      durationBins[rows] = to - from
      state[rows] = states[r]
      entryAgeBins[rows] = from - start
      censoring[rows] = startSeen ? (over ? COMPLETE : END_UNSEEN) : over ? START_UNSEEN : BOTH_UNSEEN
      wholeBins[rows] = end - start
      from = to
    }
  }
  const codeAt = (bin: number): number => (gateCodes === null ? 0 : gateCodes[bin])
  return {
    rows,
    binSeconds: levelled.binSeconds,
    gate: cut ? gate : 'all',
    startSeconds: startBin.slice(0, rows).map((bin) => levelled.startSeconds + bin * levelled.binSeconds),
    durationBins: durationBins.slice(0, rows),
    state: state.slice(0, rows),
    gateAtStart: Uint8Array.from({ length: rows }, (_, i) => codeAt(startBin[i])),
    gateAtEnd: Uint8Array.from({ length: rows }, (_, i) => codeAt(startBin[i] + durationBins[i] - 1)),
    entryAgeBins: entryAgeBins.slice(0, rows),
    censoring: censoring.slice(0, rows),
    spuriousProbability:
      errors === undefined
        ? new Float32Array(rows).fill(Number.NaN)
        : spuriousProbabilities(sequence, errors, state.subarray(0, rows), wholeBins.subarray(0, rows)),
  }
}

/** Bins whose gate code differs from that of the bin before. */
function codeChanges(gateCodes: Uint8Array): number[] {
  const changes: number[] = []
  for (let i = 1; i < gateCodes.length; i++) if (gateCodes[i] !== gateCodes[i - 1]) changes.push(i)
  return changes
}

/** Spurious chance of every row from the length of its whole dwell. */
function spuriousProbabilities(
  { starts, states, bins }: StateSequence,
  errors: ErrorRates,
  state: Uint8Array,
  wholeBins: Uint32Array,
): Float32Array {
  const grid = durationGrid(wholeBins.reduce((most, m) => Math.max(most, m), 1))
  const columns = grid.edges.length - 1
  const dwells = [0, 1].map(() => ({
    count: new Float64Array(columns),
    bins: new Float64Array(columns),
    complete: new Float64Array(columns),
  }))
  for (let r = 0; r < starts.length; r++) {
    if (states[r] === GAP) continue
    const m = (r + 1 < starts.length ? starts[r + 1] : bins) - starts[r]
    const column = columnOf(grid, m)
    const tally = dwells[states[r]]
    tally.count[column]++
    tally.bins[column] += m
    const complete = r > 0 && states[r - 1] !== GAP && r + 1 < starts.length && states[r + 1] !== GAP
    if (complete) tally.complete[column]++
  }
  const chances = ([0, 1] as const).map((of) => {
    const [wrong, missed] = wrongAndMissed(errors, of)
    const { spurious } = spuriousAndSplit(dwells[of], dwells[1 - of], wrong, missed, grid)
    return spuriousChance(spurious, dwells[of].complete, grid)
  })
  return Float32Array.from(state, (of, row) => chances[of][columnOf(grid, wholeBins[row])])
}
