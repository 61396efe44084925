import { blockBuilder, finish, type BlockBuilder } from './block-builder.ts'
import { EXACT_COLUMNS, durationGrid } from './duration-grid.ts'
import type { LevelledTrace } from './levels.ts'
import { MOST_ROWS, runIntervals, type ClassSpans } from './run-intervals.ts'
import { runTaker } from './run-taker.ts'
import type { TableGroup, ThresholdBlock, ThresholdTable } from './threshold-table.ts'
import { usableSpans } from './usable-spans.ts'

/** The thresholds of a table: row t is `firstThreshold + t * step` counts. */
export interface ThresholdRange {
  readonly firstThreshold: number
  readonly step: number
  readonly rows: number
}

const CLASS_GROUPS = ['reference', 'driven', 'sham'] as const
const GUARD = 3

/** How far beyond the levels thresholds are tabled, standard deviations of one bin. */
const BEYOND_DEVIATIONS = 3

/**
 * Thresholds worth tabling: from three standard deviations below the off level to three above the on level, inside
 * the values that occur. Step 1 unless that needs more than `maxRows`; then the step is the smallest that fits, and
 * thresholds lie on the grid firstThreshold + t * step only.
 */
export function thresholdRange(levelled: LevelledTrace, maxRows = 512): ThresholdRange {
  const { values, offset, gaps, offCounts, onCounts } = levelled
  let lowest = Number.POSITIVE_INFINITY
  let highest = 0
  for (let i = 0; i < values.length; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    if (values[i] < lowest) lowest = values[i]
    if (values[i] > highest) highest = values[i]
  }
  if (lowest > highest) return { firstThreshold: offset + 1, step: 1, rows: 1 }
  const sd = (counts: number): number => Math.sqrt(Math.max(0, counts))
  const wantedLow = Math.floor(offCounts - BEYOND_DEVIATIONS * sd(offCounts))
  const wantedHigh = Math.ceil(onCounts + BEYOND_DEVIATIONS * sd(onCounts))
  // Comparisons with a level that is not finite fall back to the values that occur.
  const low = Math.max(lowest + offset + 1, Number.isFinite(wantedLow) ? wantedLow : -Infinity)
  const high = Math.min(highest + offset, Number.isFinite(wantedHigh) ? wantedHigh : Infinity)
  const from = Math.min(low, highest + offset + 1)
  const spread = Math.max(0, high - from)
  const step = Math.max(1, Math.ceil((spread + 1) / Math.max(1, maxRows)))
  return { firstThreshold: from, step, rows: Math.floor(spread / step) + 1 }
}

/** Rows at which each bin is on: row t when its value is at least firstThreshold + t * step. */
function levelsOf(levelled: LevelledTrace, range: ThresholdRange): Uint16Array {
  const { values, offset } = levelled
  const { step, rows } = range
  const first = range.firstThreshold - offset
  const levels = new Uint16Array(values.length)
  if (step === 1) {
    const one = (first - 1) | 0
    for (let i = 0; i < levels.length; i++) {
      const above = values[i] - one
      levels[i] = above < 0 ? 0 : above > rows ? rows : above
    }
  } else
    for (let i = 0; i < levels.length; i++) {
      const above = Math.floor((values[i] - first) / step) + 1
      levels[i] = above < 0 ? 0 : above > rows ? rows : above
    }
  return levels
}

/** Stretches of equal gate code; one stretch of reference without a gate. */
function classSpans(bins: number, gateCodes: Uint8Array | null): ClassSpans {
  if (gateCodes === null) return { starts: Int32Array.of(0, bins), codes: Uint8Array.of(0) }
  if (gateCodes.length !== bins)
    throw new RangeError(
      `Expected one gate code per bin, ${bins}, received ${gateCodes.length}. Compute them for this bin width.`,
    )
  const starts: number[] = []
  const codes: number[] = []
  for (let i = 0; i < bins; i++)
    if (i === 0 || gateCodes[i] !== gateCodes[i - 1]) {
      starts.push(i)
      codes.push(Math.min(gateCodes[i], GUARD))
    }
  starts.push(bins)
  return { starts: Int32Array.from(starts), codes: Uint8Array.from(codes) }
}

/** Usable bins per gate code and level: entry code * (rows + 1) + level. */
function levelCounts(
  levels: Uint16Array,
  rows: number,
  gaps: Uint8Array | null,
  gateCodes: Uint8Array | null,
): Float64Array {
  const counts = new Int32Array((GUARD + 1) * (rows + 1))
  for (let i = 0; i < levels.length; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    counts[(gateCodes === null ? 0 : Math.min(gateCodes[i], GUARD)) * (rows + 1) + levels[i]]++
  }
  return Float64Array.from(counts)
}

/**
 * Dwell tallies for every threshold, both states and every gate class that occurs, by one walk over the bins.
 *
 * Gaps, and both ends of the record, cut runs: a dwell that ends there is censored at its length, one that
 * starts there has an unseen start and counts in `unseenStarts`, `stateBins` and `longestBins` only. In the
 * group of a gate class a dwell whose start was seen is entered at its age when it comes into a window of the
 * class at an age above 0, censored at its age when it leaves one, and complete at its full length in the class
 * of its last bin; guard bins belong to no class. `longestBins` of a class is the greatest age reached inside
 * it, and its `unseenStarts` counts stays in a window.
 *
 * @param gateCodes class code of every bin, as from `gateCodes`; null without a gate, or to ignore it
 */
export function buildThresholdTable(
  levelled: LevelledTrace,
  gateCodes: Uint8Array | null,
  range: ThresholdRange,
): ThresholdTable {
  const { rows } = range
  if (!(Number.isInteger(rows) && rows >= 1 && rows <= MOST_ROWS && range.step >= 1))
    throw new RangeError(`Expected 1 to ${MOST_ROWS} rows of step >= 1, received ${rows} of ${range.step}.`)
  const bins = levelled.values.length
  const spans = usableSpans(bins, levelled.gaps)
  const longestSpan = spans.starts.reduce((most, start, j) => Math.max(most, spans.ends[j] - start), 1)
  const grid = durationGrid(longestSpan)
  const columns = grid.edges.length - 1
  const levels = levelsOf(levelled, range)
  const classes = classSpans(bins, gateCodes)
  const binsAt = levelCounts(levels, rows, levelled.gaps, gateCodes)

  const classGroups = gateCodes === null ? [] : CLASS_GROUPS.filter((_, code) => classes.codes.includes(code))
  const groups: TableGroup[] = ['all', ...classGroups]
  const groupOfCode = [0, 1, 2, GUARD].map((code) =>
    code === GUARD ? -1 : (groups as string[]).indexOf(CLASS_GROUPS[code]),
  )
  const builders = groups.map((_, g): readonly [BlockBuilder, BlockBuilder] => [
    blockBuilder(rows, columns, g > 0),
    blockBuilder(rows, columns, g > 0),
  ])
  const codesInUse =
    gateCodes === null ? [0] : [0, 1, 2, GUARD].filter((code) => classes.codes.includes(code))
  const short = [0, 1, 2, GUARD].map(
    (code) => new Int32Array(codesInUse.includes(code) ? 2 * (rows + 1) * EXACT_COLUMNS : 0),
  )

  const take = runTaker(builders, grid, longestSpan, rows, classes, gateCodes === null ? null : groupOfCode)
  for (let j = 0; j < spans.starts.length; j++)
    runIntervals(levels, rows, spans.starts[j], spans.ends[j], classes, short, take)

  const half = (rows + 1) * EXACT_COLUMNS
  const blockOf = (g: number, state: 0 | 1): ThresholdBlock => {
    const codes = g === 0 ? codesInUse : codesInUse.filter((code) => groupOfCode[code] === g)
    const halves = codes.map((code) => short[code].subarray(state * half, (state + 1) * half))
    return finish(builders[g][state], grid, rows, state, halves, stateBinsOf(binsAt, rows, codes, state))
  }
  const blocks = groups.map((_, g) => [blockOf(g, 0), blockOf(g, 1)] as const)
  const groupBins = Float64Array.from(blocks, ([off, on]) => off.stateBins[0] + on.stateBins[0])
  return {
    grid,
    binSeconds: levelled.binSeconds,
    firstThreshold: range.firstThreshold,
    step: range.step,
    rows,
    groups,
    blocks,
    usableBins: groupBins[0],
    groupBins,
  }
}

/** Bins in a state per row: on at row t are the bins of level above t. */
function stateBinsOf(
  binsAt: Float64Array,
  rows: number,
  codes: readonly number[],
  state: 0 | 1,
): Float64Array {
  const off = new Float64Array(rows)
  let total = 0
  let below = 0
  for (let level = 0; level <= rows; level++)
    for (const code of codes) total += binsAt[code * (rows + 1) + level]
  for (let row = 0; row < rows; row++) {
    for (const code of codes) below += binsAt[code * (rows + 1) + row]
    off[row] = state === 0 ? below : total - below
  }
  return off
}
