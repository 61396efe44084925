import type { Gate, GateWindow } from '../photons/gate.ts'
import type { Trace } from '../photons/trace.ts'
import type { ByteSource } from './byte-source.ts'
import { growingCounts } from './growing-counts.ts'
import { type ColumnRole, type TextAnswer, unitSeconds } from './import-answer.ts'
import { failAtLine, failWhole } from './read-problem.ts'
import type { ReadRecord } from './read-record.ts'
import { readRows, type RowHooks } from './text-rows.ts'
import type { TimeGrid } from './time-grid.ts'

/** Counts above this are not photon counts of one bin. */
const MOST_COUNTS = 0xffffffff
/** A rate times the bin may miss a whole number by this much, printed rates being rounded, or by `LARGEST_MISS` where the bin is not known better. */
const RATE_TOLERANCE = 0.02
const LARGEST_MISS = 0.3
/** A miss above this is said. */
const SAID_MISS = 1e-3
/** A time may miss its place after the one before by this share of a step, more only by rounding. */
const STEP_TOLERANCE = 0.3
const LARGEST_STEP_TOLERANCE = 0.49
/** A miss above this share of a step, beyond rounding, is said. */
const SAID_STEP_MISS = 0.05
/** Missing bins, over all columns, that any file may have, and more for each of its bytes: a broken time axis must not cost memory. */
const FREE_MISSING = 1_000_000
const MISSING_PER_BYTE = 4
/** The mean step of the file may differ from that of its first rows by this share. */
const STEP_DRIFT = 0.01

interface CountColumn {
  readonly column: number
  readonly role: ColumnRole
  readonly counts: ReturnType<typeof growingCounts>
}

/**
 * A table with one bin per row, one record per column of counts or rates; null when stopped. Missing rows become bins
 * without exposure.
 * @param grid of the time column, from its first rows; null without a time column or when it does not advance
 */
export async function readCountTable(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  grid: TimeGrid | null,
): Promise<{ records: ReadRecord[]; notes: string[] } | null> {
  const timeColumn = answer.columns.indexOf('time')
  const gateColumn = answer.columns.indexOf('gate')
  const unit = timeColumn < 0 ? 1 : unitSeconds(answer)
  if (unit === null)
    failWhole(source.name, 'the unit of the time column is not known. Choose it before opening the file.')
  const binSeconds = timeColumn < 0 ? answer.binSeconds : grid === null ? null : grid.step * unit
  if (binSeconds === null || !(binSeconds > 0)) {
    failWhole(
      source.name,
      timeColumn < 0
        ? 'the bin width is not known. Give it before opening the file.'
        : 'the time column does not advance in its first rows. Choose another column for the time, or none.',
    )
  }
  const columns = answer.columns.flatMap((role, column): CountColumn[] =>
    role === 'counts' || role === 'rate-cps' || role === 'rate-kcps'
      ? [{ column, role, counts: growingCounts() }]
      : [],
  )
  if (columns.length === 0) failWhole(source.name, 'no column holds counts or rates. Mark at least one.')
  const { step, slack, uncertainty } = grid ?? { step: 1, slack: 0, uncertainty: 0 }
  const stepTolerance = Math.max(STEP_TOLERANCE, Math.min(LARGEST_STEP_TOLERANCE, slack / step))
  const shareTolerance = Math.max(1e-6, uncertainty)
  const gaps: { at: number; bins: number }[] = []
  const gated: { from: number; to: number }[] = []
  let index = -1
  let start = 0
  let before = Number.NaN
  let firstGapLine = 0
  let missingCells = 0
  let gateSince = -1
  let worstStep = 0
  let worstRate = 0

  const whole = await readRows(source, answer, hooks, (values, line) => {
    let missing = 0
    if (timeColumn >= 0) {
      const time = values[timeColumn]
      if (index < 0) start = time
      else {
        if (!(time > before))
          failAtLine(
            source.name,
            line,
            `the time ${time} is not later than the one before (${before}). Sort the file, or take this column for something else.`,
          )
        // Rounded times of neighbours miss a step by less than the slack; a missing row misses it by more.
        const steps = Math.abs(time - before - step) < slack ? 1 : (time - before) / step
        const miss = Math.abs(steps - Math.round(steps))
        if (miss > stepTolerance || steps < 0.5) {
          failAtLine(
            source.name,
            line,
            `the time advances by ${steps.toPrecision(3)} steps of ${Number(step.toPrecision(9))}; bins must be even. If these are arrival times, read the column as such; if the times are printed too coarsely, leave them out and give the bin width.`,
          )
        }
        if (miss > worstStep) worstStep = miss
        missing = Math.round(steps) - 1
        missingCells += missing * columns.length
        if (missingCells > FREE_MISSING + MISSING_PER_BYTE * source.size)
          failAtLine(
            source.name,
            line,
            `the time jumps over ${missing} bins, far more than the file holds. Correct the time or split the file there.`,
          )
      }
      before = time
    }
    if (missing > 0) {
      if (gaps.length === 0) firstGapLine = line
      gaps.push({ at: index + 1, bins: missing })
      for (const { counts } of columns) counts.skip(missing)
      index += missing
    }
    index++
    for (const { column, role, counts } of columns) {
      const value = values[column]
      const raw = role === 'counts' ? value : value * binSeconds * (role === 'rate-kcps' ? 1000 : 1)
      const count = Math.round(raw)
      const miss = Math.abs(raw - count)
      if (miss > (role === 'counts' ? 0 : SAID_MISS) || raw < 0 || count > MOST_COUNTS)
        checkCount(value, raw, role, binSeconds, shareTolerance, source.name, line, column)
      if (miss > worstRate) worstRate = miss
      counts.push(count)
    }
    if (gateColumn >= 0) {
      const gate = values[gateColumn]
      if (gate !== 0 && gate !== 1)
        failAtLine(
          source.name,
          line,
          `a gate column holds 0 and 1, found ${gate}. Correct the line or ignore the column.`,
        )
      if (gate === 1 && gateSince < 0) gateSince = index
      if (gate === 0 && gateSince >= 0) {
        gated.push({ from: gateSince, to: index })
        gateSince = -1
      }
    }
  })
  if (!whole) return null
  if (index < 0) failWhole(source.name, 'the file holds no rows of numbers. Choose a file with data.')
  if (gateSince >= 0) gated.push({ from: gateSince, to: index + 1 })
  // The mean step over the whole file is finer than that of two rounded times.
  const exactBin = timeColumn >= 0 && index > 0 ? ((before - start) * unit) / index : binSeconds
  // Each step may be a little off, all of them together only by the rounding of the printed times.
  const driftAllowed = Math.max(STEP_DRIFT, 2 * uncertainty)
  if (Math.abs(exactBin - binSeconds) > driftAllowed * binSeconds)
    failWhole(
      source.name,
      `the time advances by ${(exactBin / unit).toPrecision(4)} per row on average, by ${(binSeconds / unit).toPrecision(4)} in the first rows; bins must be even. Split the file where the step changes.`,
    )
  const coverage = gaps.length === 0 ? null : new Uint8Array(index + 1).fill(255)
  let missing = 0
  for (const { at, bins } of gaps) {
    coverage?.fill(0, at, at + bins)
    missing += bins
  }
  const gateStart = timeColumn < 0 ? 0 : start * unit
  const gate: Gate | null =
    gateColumn < 0 ? null : { windows: gated.map(({ from, to }) => windowOf(from, to, gateStart, exactBin)) }
  const records = columns.map(({ column, counts }): ReadRecord => {
    const trace: Trace = {
      kind: 'trace',
      counts: counts.finish(),
      binSeconds: exactBin,
      startSeconds: timeColumn < 0 ? 0 : start * unit,
      coverage,
      dropped: {},
    }
    const stem = source.name.replace(/\.[^.]*$/, '')
    const name = columns.length === 1 ? stem : `${stem} ${answer.names[column] ?? `column ${column + 1}`}`
    return { name, column: answer.columns.length > 1 ? column : null, record: trace, gate }
  })
  const notes: string[] = []
  if (missing > 0)
    notes.push(
      `${missing} rows are missing in ${gaps.length} places (first before line ${firstGapLine}); these bins are left empty and are not used.`,
    )
  if (worstStep > SAID_STEP_MISS + slack / step)
    notes.push(
      `The times miss even steps by up to ${Math.round(100 * worstStep)} % of a step; every row is taken as one whole bin.`,
    )
  if (worstRate > SAID_MISS)
    notes.push(
      `Rates times the bin miss whole counts by up to ${worstRate.toPrecision(2)}; they were rounded to whole counts.`,
    )
  const twice = answer.columns.filter(
    (role, i) => (role === 'time' && i !== timeColumn) || (role === 'gate' && i !== gateColumn),
  ).length
  if (twice > 0)
    notes.push(
      `${twice} more ${twice === 1 ? 'column' : 'columns'} of times or gates ${twice === 1 ? 'was' : 'were'} not used.`,
    )
  return { records, notes }
}

function windowOf(from: number, to: number, startSeconds: number, binSeconds: number): GateWindow {
  return {
    startSeconds: startSeconds + from * binSeconds,
    endSeconds: startSeconds + to * binSeconds,
    gateClass: 'driven',
  }
}

/** Fails at a number that is not a count: negative, fractional, or more than a bin holds. */
function checkCount(
  value: number,
  raw: number,
  role: ColumnRole,
  binSeconds: number,
  shareTolerance: number,
  file: string,
  line: number,
  column: number,
): void {
  if (raw < 0)
    failAtLine(
      file,
      line,
      `column ${column + 1} holds ${value}; counts cannot be negative. If a background was subtracted, use the counts from before.`,
    )
  const tolerance =
    role === 'counts' ? 0 : Math.min(LARGEST_MISS, Math.max(RATE_TOLERANCE, shareTolerance * raw))
  if (!(Math.abs(raw - Math.round(raw)) <= tolerance)) {
    failAtLine(
      file,
      line,
      role === 'counts'
        ? `column ${column + 1} holds ${value}; counts are whole numbers. If it is a rate, choose counts per second.`
        : `column ${column + 1}: the rate ${value} times the bin of ${Number(binSeconds.toPrecision(9))} s is ${raw.toPrecision(6)}, not a whole number of counts. Correct the unit of the rate or of the times.`,
    )
  }
  if (raw > MOST_COUNTS)
    failAtLine(
      file,
      line,
      `column ${column + 1} holds ${value}, more than a bin can. Correct the line or the reading of columns.`,
    )
}
