import type { Gate, GateWindow } from '../photons/gate.ts'
import { photonStreamBuilder } from '../photons/stream-builder.ts'
import type { Trace } from '../photons/trace.ts'
import type { ByteSource } from './byte-source.ts'
import { growingCounts } from './growing-counts.ts'
import { recordStart } from './record-start.ts'
import { type ColumnRole, type TextAnswer, unitSeconds } from './import-answer.ts'
import { failAtLine, failWhole } from './read-problem.ts'
import type { ReadRecord } from './read-record.ts'
import { readRows, type RowHooks } from './text-rows.ts'

/** Counts above this are not photon counts of one bin. */
const MOST_COUNTS = 0xffffffff
/** A rate times the bin may miss a whole number by this much: printed rates are rounded. */
const RATE_TOLERANCE = 0.02
/** A time may miss its place on the grid by this share of a step. */
const STEP_TOLERANCE = 0.3
/** Missing bins, over all columns, that any file may have, and more for each of its bytes: a broken time axis must not cost memory. */
const FREE_MISSING = 1_000_000
const MISSING_PER_BYTE = 4
/** The mean step of the file may differ from that of its first rows by this share. */
const STEP_DRIFT = 0.01
const BUFFER = 1 << 16
/** Relative error of a decimal number times a power of ten in double arithmetic, with room. */
const ROUNDING = 2 ** -51

export interface TextRead {
  readonly records: ReadRecord[]
  readonly notes: string[]
}

/** A table of numbers as records; null when stopped. `stepSeconds` and `decimals` come from the preview's first rows. */
export async function readText(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  first: { readonly step: number | null; readonly decimals: number },
): Promise<TextRead | null> {
  return answer.columns.includes('arrival')
    ? readArrivals(source, answer, hooks, first.decimals)
    : readCounts(source, answer, hooks, first)
}

async function readArrivals(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  decimals: number,
): Promise<TextRead | null> {
  const unit = unitSeconds(answer)
  if (unit === null)
    failWhole(source.name, 'the unit of the arrival times is not known. Choose it before opening the file.')
  const column = answer.columns.indexOf('arrival')
  const scale = answer.timeUnit === 'ticks' ? 1 : 10 ** decimals
  const builder = photonStreamBuilder(unit / scale)
  const buffer = new Float64Array(BUFFER)
  const lines = new Float64Array(BUFFER)
  let used = 0
  let rounded = 0
  let firstTick = -1
  let lastTick = 0
  let before = Number.NEGATIVE_INFINITY
  const flush = (): void => {
    const bad = builder.push(buffer, null, used)
    if (bad !== null)
      failAtLine(
        source.name,
        lines[bad - builder.photons] ?? 0,
        'the arrival time is too large for its resolution. Choose a coarser unit.',
      )
    used = 0
  }
  const whole = await readRows(source, answer, hooks, (values, line) => {
    const time = values[column]
    if (time < before)
      failAtLine(
        source.name,
        line,
        `the arrival time ${time} is earlier than the one before (${before}). Sort the file, or check whether a counter wrapped.`,
      )
    if (time < 0)
      failAtLine(
        source.name,
        line,
        `the arrival time ${time} is negative. Shift the times so that the record starts at 0 or later.`,
      )
    before = time
    const ticks = time * scale
    const tick = Math.round(ticks)
    if (!Number.isSafeInteger(tick))
      failAtLine(
        source.name,
        line,
        `the arrival time ${time} is too large for a resolution of ${unit / scale} s. Correct the line or choose a coarser unit.`,
      )
    if (Math.abs(ticks - tick) > 1e-6 + ROUNDING * ticks) {
      if (answer.timeUnit === 'ticks')
        failAtLine(
          source.name,
          line,
          `ticks are whole numbers, found ${time}. Choose a unit of time instead.`,
        )
      rounded++
    }
    if (firstTick < 0) firstTick = tick
    lastTick = tick
    buffer[used] = tick
    lines[used++] = line
    if (used === BUFFER) flush()
  })
  if (!whole) return null
  flush()
  if (builder.photons === 0)
    failWhole(source.name, 'the file holds no arrival times. Choose a file with data.')
  const { startTick, note } = recordStart(firstTick, lastTick)
  const stream = builder.finish({ startTick })
  const notes = [`${note}; ${builder.photons} photons.`]
  const unused = answer.columns.filter((role) => role !== 'arrival' && role !== 'ignore').length
  if (unused > 0)
    notes.push(
      `Beside the arrival times, ${unused} ${unused === 1 ? 'column was' : 'columns were'} not used.`,
    )
  if (rounded > 0)
    notes.push(
      `${rounded} arrival times have more decimals than the first rows and were rounded to ${stream.tickSeconds} s.`,
    )
  return {
    records: [
      {
        name: source.name.replace(/\.[^.]*$/, ''),
        column: answer.columns.length > 1 ? column : null,
        record: stream,
        gate: null,
      },
    ],
    notes,
  }
}

interface CountColumn {
  readonly column: number
  readonly role: ColumnRole
  readonly counts: ReturnType<typeof growingCounts>
}

async function readCounts(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  { step: firstStep, decimals }: { readonly step: number | null; readonly decimals: number },
): Promise<TextRead | null> {
  const timeColumn = answer.columns.indexOf('time')
  const gateColumn = answer.columns.indexOf('gate')
  const unit = timeColumn < 0 ? 1 : unitSeconds(answer)
  if (unit === null)
    failWhole(source.name, 'the unit of the time column is not known. Choose it before opening the file.')
  const binSeconds = timeColumn < 0 ? answer.binSeconds : firstStep === null ? null : firstStep * unit
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
  const step = firstStep ?? 1
  const gaps: { at: number; bins: number }[] = []
  const gated: { from: number; to: number }[] = []
  let index = -1
  let start = 0
  let before = Number.NaN
  let firstGapLine = 0
  let missingCells = 0
  let gateSince = -1

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
        const steps = (time - before) / step
        if (Math.abs(steps - Math.round(steps)) > STEP_TOLERANCE || Math.round(steps) < 1) {
          failAtLine(
            source.name,
            line,
            `the time advances by ${steps.toPrecision(3)} steps of ${step}; bins must be even. If these are arrival times, read the column as such.`,
          )
        }
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
    for (const { column, role, counts } of columns)
      counts.push(countOf(values[column], role, binSeconds, source.name, line, column))
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
  const driftAllowed = Math.max(STEP_DRIFT, Math.min(STEP_TOLERANCE, 10 ** -decimals / step))
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
  const notes =
    missing === 0
      ? []
      : [
          `${missing} rows are missing in ${gaps.length} places (first before line ${firstGapLine}); these bins are left empty and are not used.`,
        ]
  return { records, notes }
}

function windowOf(from: number, to: number, startSeconds: number, binSeconds: number): GateWindow {
  return {
    startSeconds: startSeconds + from * binSeconds,
    endSeconds: startSeconds + to * binSeconds,
    gateClass: 'driven',
  }
}

function countOf(
  value: number,
  role: ColumnRole,
  binSeconds: number,
  file: string,
  line: number,
  column: number,
): number {
  const raw = role === 'counts' ? value : value * binSeconds * (role === 'rate-kcps' ? 1000 : 1)
  if (raw < 0)
    failAtLine(
      file,
      line,
      `column ${column + 1} holds ${value}; counts cannot be negative. If a background was subtracted, use the counts from before.`,
    )
  const count = Math.round(raw)
  const tolerance = role === 'counts' ? 0 : Math.max(RATE_TOLERANCE, 1e-6 * raw)
  if (!(Math.abs(raw - count) <= tolerance)) {
    failAtLine(
      file,
      line,
      role === 'counts'
        ? `column ${column + 1} holds ${value}; counts are whole numbers. If it is a rate, choose counts per second.`
        : `column ${column + 1}: the rate ${value} times the bin of ${binSeconds} s is ${raw.toPrecision(6)}, not a whole number of counts. Correct the unit of the rate or of the times.`,
    )
  }
  if (count > MOST_COUNTS)
    failAtLine(
      file,
      line,
      `column ${column + 1} holds ${value}, more than a bin can. Correct the line or the reading of columns.`,
    )
  return count
}
