import type { DurationGrid } from './duration-grid.ts'
import { hostsLonger, overColumns, type ColumnDwells } from './column-dwells.ts'
import type { ThresholdBlock, ThresholdTable } from './threshold-table.ts'

/** Chances of a wrong state per bin at one threshold. */
export interface ErrorRates {
  readonly falseOnPerBin: number
  readonly falseOffPerBin: number
}

/**
 * Expected number of observed runs of m bins that a true dwell of n bins leaves when each of its bins is missed
 * with chance `missed`, independently: (1 - p)^m [2p + (n - m - 1) p^2] for m < n, (1 - p)^n for m = n, 0
 * beyond. Derived here: a run of m < n bins either touches one end of the dwell (two places, one missed
 * neighbour) or neither.
 */
export function splitRuns(n: number, missed: number, m: number): number {
  if (m > n) return 0
  const kept = (1 - missed) ** m
  return m === n ? kept : kept * (2 * missed + (n - m - 1) * missed * missed)
}

/**
 * Expected number of false runs of m bins inside a true dwell of n bins whose bins are called wrong with chance
 * `wrong`: (n - m - 1) (1 - p)^2 p^m, which leaves at least one right bin on each side; 0 for m > n - 2.
 */
export function interiorRuns(n: number, wrong: number, m: number): number {
  return m > n - 2 ? 0 : (n - m - 1) * (1 - wrong) ** 2 * wrong ** m
}

/** Expected numbers of observed dwells per column of the duration grid, beside the number observed. */
export interface ExpectedSpurious {
  /** Made by shot noise inside dwells of the other state. */
  readonly spurious: Float64Array
  /** Pieces of longer dwells of this state that shot noise has split. */
  readonly split: Float64Array
  /** Complete dwells seen. */
  readonly observed: Float64Array
}

/** Dwells of one state: all of them, and the complete ones among them. */
export interface StateColumns extends ColumnDwells {
  readonly complete: Float64Array
}

/**
 * Spurious and split dwells of one state to be expected per column, from the observed dwells of both states.
 *
 * The formulas want the true dwells; the observed ones stand in for them after two corrections. The expected
 * spurious dwells are taken away (never more than were seen), and as each of them has cut a dwell of the other
 * state in two, that state's number of dwells is lowered by as many, its bins kept. This is right to first
 * order in (error rate x dwell length); where dwells are mostly noise (threshold inside a level) the numbers
 * say no more than that.
 *
 * @param wrong chance that a bin of the other state is read as this one
 * @param missed chance that a bin of this state is read as the other
 */
export function spuriousAndSplit(
  own: StateColumns,
  other: StateColumns,
  wrong: number,
  missed: number,
  grid: DurationGrid,
): { readonly spurious: Float64Array; readonly split: Float64Array } {
  const removedOwn = lesser(spuriousPerColumn(other, wrong, grid), own.complete)
  const removedOther = lesser(spuriousPerColumn(own, missed, grid), other.complete)
  const hosts = denoised(other, removedOther, removedOwn, grid)
  const whole = denoised(own, removedOwn, removedOther, grid)
  return {
    spurious: spuriousPerColumn(hosts, wrong, grid),
    split: overColumns(grid, hostsLonger(whole, grid), (m, longer, bins) => {
      const interior = Math.max(0, bins - (m + 1) * longer)
      return (1 - missed) ** m * (2 * missed * longer + missed * missed * interior)
    }),
  }
}

/**
 * Spurious and split dwells to be expected in one row of the threshold table, from the tallies alone: cost
 * grows with columns only, cheap enough for every step of a drag. See `spuriousAndSplit`. Dwells with an unseen
 * start are taken at their mean length. In a gate class, the numbers of the whole record are scaled by the
 * class's share of the bins in which such dwells can arise.
 *
 * @param group index into table.groups
 * @param state 0 off, 1 on: the dwells in question
 */
export function expectedSpurious(
  table: ThresholdTable,
  group: number,
  row: number,
  state: 0 | 1,
  errors: ErrorRates,
): ExpectedSpurious {
  const other = state === 0 ? 1 : 0
  const { grid, blocks } = table
  const [wrong, missed] = wrongAndMissed(errors, state)
  const { spurious, split } = spuriousAndSplit(
    dwellsOfRow(blocks[0][state], grid, row),
    dwellsOfRow(blocks[0][other], grid, row),
    wrong,
    missed,
    grid,
  )
  if (group !== 0) {
    scale(spurious, share(blocks[group][other], blocks[0][other], row))
    scale(split, share(blocks[group][state], blocks[0][state], row))
  }
  return { spurious, split, observed: rowOf(blocks[group][state].completeCount, grid, row).slice() }
}

/** The chances that make spurious dwells of a state and that split its dwells. */
export function wrongAndMissed(errors: ErrorRates, state: 0 | 1): readonly [number, number] {
  return state === 1
    ? [errors.falseOnPerBin, errors.falseOffPerBin]
    : [errors.falseOffPerBin, errors.falseOnPerBin]
}

function rowOf(cells: Float64Array, grid: DurationGrid, row: number): Float64Array {
  const columns = grid.edges.length - 1
  return cells.subarray(row * columns, (row + 1) * columns)
}

/** Expected false runs of each duration inside the given dwells of the other state, summed over each column. */
function spuriousPerColumn(hosts: ColumnDwells, wrong: number, grid: DurationGrid): Float64Array {
  return overColumns(
    grid,
    hostsLonger(hosts, grid),
    (m, longer, bins) => Math.max(0, bins - (m + 1) * longer) * (1 - wrong) ** 2 * wrong ** m,
  )
}

/**
 * Chance that an observed dwell is spurious, per column: expected spurious over observed, 0..1. The observed
 * number is pooled over durations within a quarter of each other, so that one dwell more or less does not
 * decide, and the chance never rises with duration.
 */
export function spuriousChance(
  spurious: Float64Array,
  observed: Float64Array,
  grid: DurationGrid,
): Float64Array {
  const { edges } = grid
  const chance = new Float64Array(observed.length)
  let least = 1
  let from = 0
  let to = 0
  let pooled = 0
  for (let c = 0; c < chance.length; c++) {
    const m = edges[c]
    while (to < observed.length && edges[to] <= 1.25 * m) pooled += observed[to++]
    while (1.25 * edges[from] < m) pooled -= observed[from++]
    const perDuration = pooled / (edges[to] - edges[from])
    const expected = spurious[c] / (edges[c + 1] - edges[c])
    if (expected > 0 && perDuration > 0) least = Math.min(least, expected / perDuration)
    else if (expected === 0) least = 0
    chance[c] = least
  }
  return chance
}

/** At most this share of the dwells of any duration may be spurious ... */
const SAFE_SHARE = 0.05

/**
 * Smallest duration, bins, from which on the expected spurious dwells are fewer than 5 % of the observed at
 * every duration. Durations at which nothing was observed count as one observed dwell: fewer than 0.05 expected
 * spurious dwells spoil nothing. One past the end of the grid when no duration is safe.
 */
export function spuriousSafeBins(
  table: ThresholdTable,
  group: number,
  row: number,
  state: 0 | 1,
  errors: ErrorRates,
): number {
  const { spurious, observed } = expectedSpurious(table, group, row, state, errors)
  let safe = table.grid.edges[spurious.length]
  for (let c = spurious.length - 1; c >= 0; c--) {
    if (!(spurious[c] < SAFE_SHARE * Math.max(1, observed[c]))) break
    safe = table.grid.edges[c]
  }
  return safe
}

/** All dwells of one state in a row of the table: complete, censored and, at their mean length, those of unseen start. */
function dwellsOfRow(block: ThresholdBlock, grid: DurationGrid, row: number): StateColumns {
  const columns = grid.edges.length - 1
  const count = new Float64Array(columns)
  const bins = new Float64Array(columns)
  let seen = 0
  for (let c = 0; c < columns; c++) {
    const cell = row * columns + c
    count[c] = block.completeCount[cell] + block.censoredCount[cell]
    bins[c] = count[c] * grid.edges[c] + block.completeSum[cell] + block.censoredSum[cell]
    seen += bins[c]
  }
  const unseen = block.unseenStarts[row]
  if (unseen > 0) {
    const total = block.stateBins[row] - seen
    let c = 0
    while (c < columns - 1 && grid.edges[c + 1] <= total / unseen) c++
    count[c] += unseen
    bins[c] += total
  }
  return { count, bins, complete: rowOf(block.completeCount, grid, row) }
}

function lesser(a: Float64Array, b: Float64Array): Float64Array {
  return a.map((value, c) => Math.min(value, b[c]))
}

function total(values: Float64Array): number {
  return values.reduce((all, value) => all + value, 0)
}

/** Dwells less the spurious ones among them, joined again where spurious dwells of the other state have cut them. */
function denoised(
  dwells: ColumnDwells,
  spurious: Float64Array,
  cuts: Float64Array,
  grid: DurationGrid,
): ColumnDwells {
  const left = dwells.count.map((n, c) => n - spurious[c])
  const number = total(left)
  const joined = number > 0 ? Math.max(0, number - total(cuts)) / number : 0
  const bins = dwells.bins.map((b, c) => Math.max(0, b - spurious[c] * grid.edges[c]))
  return { count: left.map((n) => n * joined), bins }
}

function share(part: ThresholdBlock, whole: ThresholdBlock, row: number): number {
  return whole.stateBins[row] > 0 ? part.stateBins[row] / whole.stateBins[row] : 0
}

function scale(values: Float64Array, by: number): void {
  for (let i = 0; i < values.length; i++) values[i] *= by
}
