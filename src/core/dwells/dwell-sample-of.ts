import { GATE_CLASSES } from '../photons/gate.ts'
import type { ThresholdTable } from '../states/threshold-table.ts'
import type { DwellSample } from './dwell-sample.ts'
import type { DwellTable } from './dwell-table.ts'

/**
 * The dwells of one state for a fit, exactly: one node per distinct duration, ascending. Dwells of unseen start
 * are left out. When the table is cut at gate edges, only pieces inside windows of its class count, at the age
 * of the whole dwell at their end, with an entry at the age at which they were taken up.
 *
 * Fits choose complete and censored nodes at or above the shortest fitted dwell; an entry below it has no effect.
 */
export function sampleFromDwells(table: DwellTable, state: 0 | 1, edgeShare: number): DwellSample {
  const code = table.gate === 'all' ? -1 : GATE_CLASSES.indexOf(table.gate)
  const complete: number[] = []
  const censored: number[] = []
  const entered: number[] = []
  for (let row = 0; row < table.rows; row++) {
    if (table.state[row] !== state || (code >= 0 && table.gateAtStart[row] !== code)) continue
    const kind = table.censoring[row]
    if (kind !== 0 && kind !== 2) continue
    const entry = table.entryAgeBins[row]
    if (entry > 0) entered.push(entry)
    if (kind === 0) complete.push(entry + table.durationBins[row])
    else censored.push(entry + table.durationBins[row])
  }
  const [completeBins, completeWeights] = distinct(complete)
  const [censoredBins, censoredWeights] = distinct(censored)
  const [enteredBins, enteredWeights] = distinct(entered)
  return {
    binSeconds: table.binSeconds,
    edgeShare,
    completeBins,
    completeWeights,
    censoredBins,
    censoredWeights,
    enteredBins,
    enteredWeights,
  }
}

/** Distinct values, ascending, and how often each occurs. */
function distinct(durations: readonly number[]): readonly [Float64Array, Float64Array] {
  const sorted = Float64Array.from(durations).sort()
  const values = new Float64Array(sorted.length)
  const weights = new Float64Array(sorted.length)
  let n = 0
  for (let i = 0; i < sorted.length; i++) {
    if (i === 0 || sorted[i] !== sorted[i - 1]) values[n++] = sorted[i]
    weights[n - 1]++
  }
  return [values.slice(0, n), weights.slice(0, n)]
}

/**
 * The dwells of one state for a fit, from one row of the threshold table: no list of dwells is needed. A column
 * of one duration (all up to 64 bins) gives one node, exactly; a wider column gives two nodes with the number,
 * mean and variance of its dwells, inside the column: at the mean -/+ one standard deviation with equal weights
 * when both lie in it, else moved towards the near edge with weights to match. Sums of smooth functions of
 * duration then agree with the full list to about the third power of the column's relative width (1/16), some
 * 1e-5.
 *
 * Because nodes stay inside their columns, choosing nodes at or above a shortest fitted dwell chooses the same
 * dwells as the full list whenever that dwell is 64 bins or fewer, or begins a column; inside a wide column it
 * is approximate.
 *
 * @param group index into table.groups
 */
export function sampleFromRow(
  table: ThresholdTable,
  group: number,
  state: 0 | 1,
  row: number,
  edgeShare: number,
): DwellSample {
  const block = table.blocks[group][state]
  const { edges } = table.grid
  const nodes = (count: Float64Array, sum: Float64Array, squares: Float64Array) =>
    count.length === 0
      ? ([new Float64Array(0), new Float64Array(0)] as const)
      : rowNodes(edges, row, count, sum, squares)
  const [completeBins, completeWeights] = nodes(block.completeCount, block.completeSum, block.completeSquares)
  const [censoredBins, censoredWeights] = nodes(block.censoredCount, block.censoredSum, block.censoredSquares)
  const [enteredBins, enteredWeights] = nodes(block.enteredCount, block.enteredSum, block.enteredSquares)
  return {
    binSeconds: table.binSeconds,
    edgeShare,
    completeBins,
    completeWeights,
    censoredBins,
    censoredWeights,
    enteredBins,
    enteredWeights,
  }
}

/** Nodes and weights of one row of tallies, ascending. */
function rowNodes(
  edges: Float64Array,
  row: number,
  count: Float64Array,
  sum: Float64Array,
  squares: Float64Array,
): readonly [Float64Array, Float64Array] {
  const columns = edges.length - 1
  const values = new Float64Array(2 * columns)
  const weights = new Float64Array(2 * columns)
  let n = 0
  const put = (value: number, weight: number): void => {
    values[n] = value
    weights[n++] = weight
  }
  for (let c = 0; c < columns; c++) {
    const cell = row * columns + c
    const dwells = count[cell]
    if (dwells === 0) continue
    const mean = sum[cell] / dwells
    // Whole numbers: exactly 0 when all are equal.
    const spread = dwells * squares[cell] - sum[cell] * sum[cell]
    if (!(spread > 0)) {
      put(edges[c] + mean, dwells)
      continue
    }
    const sd = Math.sqrt(spread) / dwells
    const last = edges[c + 1] - 1
    const room = last - edges[c] - mean
    // Nodes at mean - sd r and mean + sd / r; variance <= mean x room (Bhatia & Davis 2000) leaves such an r.
    const r = Math.max(sd / room, Math.min(1, mean / sd))
    const lower = 1 / (1 + r * r)
    put(Math.max(edges[c], edges[c] + mean - sd * r), dwells * lower)
    put(Math.min(last, edges[c] + mean + sd / r), dwells * (1 - lower))
  }
  return [values.slice(0, n), weights.slice(0, n)]
}
