import { GATE_CLASSES } from '../photons/gate.ts'
import { durationGrid } from './duration-grid.ts'
import { GUARD_CODE, gateSegments } from './gate-segments.ts'
import type { LevelledTrace } from './levels.ts'
import { type StateRuns, stateRuns } from './state-runs.ts'
import type { TableGroup, ThresholdBlock, ThresholdTable } from './threshold-table.ts'

export interface ThresholdRange {
  readonly firstThreshold: number
  readonly step: number
  readonly rows: number
}

/** Thresholds further than this many standard deviations outside the two levels are not tabled. */
const MARGIN_DEVIATIONS = 3

/**
 * Thresholds worth tabling: from three standard deviations below the off level to three above the on level, inside
 * the values seen. The step is 1 count unless that needs more than `maxRows` rows; then thresholds lie on that grid.
 */
export function thresholdRange(levelled: LevelledTrace, maxRows = 512): ThresholdRange {
  const { offCounts, onCounts, offset, highest } = levelled
  const on = Math.max(onCounts, offCounts)
  const low = Math.max(offset + 1, Math.ceil(offCounts - MARGIN_DEVIATIONS * Math.sqrt(Math.max(offCounts, 1))))
  const high = Math.min(highest, Math.floor(on + MARGIN_DEVIATIONS * Math.sqrt(Math.max(on, 1))))
  const firstThreshold = Math.min(low, Math.max(highest, offset + 1))
  const span = Math.max(0, high - firstThreshold)
  const step = Math.max(1, Math.ceil((span + 1) / maxRows))
  return { firstThreshold, step, rows: Math.floor(span / step) + 1 }
}

/**
 * The table of all thresholds. Bins are sorted by the row at which they turn on (counting sort); on-runs grow while
 * the threshold falls, off-runs while it rises, and after each row the tallies are copied out. Cost: one sort, two
 * passes over the bins, rows x columns of copying. Works for a trace of no bins (all tallies 0).
 */
export function buildThresholdTable(
  levelled: LevelledTrace,
  gateCodes: Uint8Array | null,
  range: ThresholdRange,
): ThresholdTable {
  const { values, gaps, offset } = levelled
  const bins = values.length
  const { firstThreshold, step, rows } = range
  const grid = durationGrid(Math.max(1, bins))
  const { groups, groupOfCode } = groupsOf(gateCodes)
  const segments = groups.length > 1 && gateCodes !== null ? gateSegments(gateCodes) : null

  // onRows of a bin: it is on in rows 0 .. onRows - 1. Sorted positions of equal onRows stay in time order.
  const rowOfValue = new Uint16Array(levelled.highest - offset + 2)
  for (let value = 0; value < rowOfValue.length; value++) {
    const row = Math.floor((value + offset - firstThreshold) / step) + 1
    rowOfValue[value] = Math.min(rows, Math.max(0, row))
  }
  const bounds = new Uint32Array(rows + 2)
  let usableBins = 0
  for (let i = 0; i < bins; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    bounds[rowOfValue[values[i]] + 1]++
    usableBins++
  }
  for (let row = 0; row <= rows; row++) bounds[row + 1] += bounds[row]
  const sorted = new Uint32Array(usableBins)
  const next = bounds.slice(0, rows + 1)
  for (let i = 0; i < bins; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    sorted[next[rowOfValue[values[i]]]++] = i
  }

  const blocks = groups.map(
    (_, group) =>
      [0, 1].map(() => emptyBlock(rows, grid.edges.length - 1, group > 0)) as [ThresholdBlock, ThresholdBlock],
  )
  const fresh = (): StateRuns => stateRuns(bins, gaps, grid, segments, groupOfCode, groups.length)
  const on = fresh()
  for (let row = rows - 1; row >= 0; row--) {
    joinAll(on, sorted, bounds[row + 1], bounds[row + 2])
    for (const [group, tally] of on.groups.entries()) copyRow(blocks[group][1], tally, row)
  }
  const off = fresh()
  for (let row = 0; row < rows; row++) {
    joinAll(off, sorted, bounds[row], bounds[row + 1])
    for (const [group, tally] of off.groups.entries()) copyRow(blocks[group][0], tally, row)
  }
  return {
    grid,
    binSeconds: levelled.binSeconds,
    firstThreshold,
    step,
    rows,
    groups,
    blocks,
    usableBins,
    groupBins: binsOfGroups(gateCodes, gaps, groups.length, groupOfCode, usableBins),
  }
}

/** Neighbouring positions join as one stretch, so a long run costs one merge per row, not one per bin. */
function joinAll(runs: StateRuns, sorted: Uint32Array, from: number, to: number): void {
  let at = from
  while (at < to) {
    const first = sorted[at]
    let end = first + 1
    at++
    while (at < to && sorted[at] === end) {
      end++
      at++
    }
    runs.join(first, end)
  }
}

function groupsOf(codes: Uint8Array | null): { groups: TableGroup[]; groupOfCode: number[] } {
  const groups: TableGroup[] = ['all']
  const groupOfCode = [0, 0, 0, 0]
  if (codes === null) return { groups, groupOfCode }
  const present = new Set(codes)
  for (const [code, name] of GATE_CLASSES.entries()) {
    if (name === 'guard' || !present.has(code)) continue
    groupOfCode[code] = groups.length
    groups.push(name)
  }
  return { groups, groupOfCode }
}

function binsOfGroups(
  codes: Uint8Array | null,
  gaps: Uint8Array | null,
  groupCount: number,
  groupOfCode: readonly number[],
  usableBins: number,
): Float64Array {
  const groupBins = new Float64Array(groupCount)
  groupBins[0] = usableBins
  if (codes === null) return groupBins
  for (let i = 0; i < codes.length; i++) {
    if (codes[i] !== GUARD_CODE && (gaps === null || gaps[i] === 0)) groupBins[groupOfCode[codes[i]]]++
  }
  return groupBins
}

function emptyBlock(rows: number, columns: number, gated: boolean): ThresholdBlock {
  const cells = (): Float64Array => new Float64Array(rows * columns)
  const none = new Float64Array(0)
  return {
    completeCount: cells(),
    completeSum: cells(),
    completeSquares: cells(),
    censoredCount: cells(),
    censoredSum: cells(),
    censoredSquares: cells(),
    enteredCount: gated ? cells() : none,
    enteredSum: gated ? cells() : none,
    enteredSquares: gated ? cells() : none,
    unseenStarts: new Float64Array(rows),
    stateBins: new Float64Array(rows),
    longestBins: new Float64Array(rows),
  }
}

function copyRow(block: ThresholdBlock, tally: StateRuns['groups'][number], row: number): void {
  const at = row * tally.complete.count.length
  block.completeCount.set(tally.complete.count, at)
  block.completeSum.set(tally.complete.sum, at)
  block.completeSquares.set(tally.complete.squares, at)
  block.censoredCount.set(tally.censored.count, at)
  block.censoredSum.set(tally.censored.sum, at)
  block.censoredSquares.set(tally.censored.squares, at)
  if (block.enteredCount.length > 0) {
    block.enteredCount.set(tally.entered.count, at)
    block.enteredSum.set(tally.entered.sum, at)
    block.enteredSquares.set(tally.entered.squares, at)
  }
  block.unseenStarts[row] = tally.unseenStarts
  block.stateBins[row] = tally.stateBins
  block.longestBins[row] = tally.longestBins
}

