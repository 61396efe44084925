import { photonStreamBuilder } from '../photons/stream-builder.ts'
import type { ByteSource } from './byte-source.ts'
import { type TextAnswer, unitSeconds } from './import-answer.ts'
import { failAtLine, failWhole } from './read-problem.ts'
import type { ReadRecord } from './read-record.ts'
import { recordStart } from './record-start.ts'
import { readRows, type RowHooks } from './text-rows.ts'

const BUFFER = 1 << 16
/** Relative error of a decimal number times a power of ten in double arithmetic, with room. */
const ROUNDING = 2 ** -51
/** Decimals beyond 1 ps are not kept; a unit has this many less than its own power of ten. */
const FINEST_EXPONENT = 12
const EXPONENTS = { s: 0, ms: 3, us: 6, ns: 9 } as const
/** Ticks are exact below 2^53; a resolution made coarser leaves this factor for the rest of the record. */
const HEADROOM = 16

/**
 * A column of arrival times as one record; null when stopped. A tick is the last decimal of the first rows, so that nothing
 * is rounded, but not below 1 ps, and coarser when the record is too long for it; what is rounded then is said.
 * @param decimals most decimals of the first rows
 */
export async function readArrivalTimes(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  decimals: number,
): Promise<{ records: ReadRecord[]; notes: string[] } | null> {
  const unit = unitSeconds(answer)
  if (unit === null)
    failWhole(source.name, 'the unit of the arrival times is not known. Choose it before opening the file.')
  const { timeUnit } = answer
  const whole = timeUnit === null || timeUnit === 'ticks'
  let digits = whole ? 0 : Math.min(decimals, FINEST_EXPONENT - EXPONENTS[timeUnit])
  for (;;) {
    // The decimal literal is exact to rounding, the quotient of unit and power of ten is not.
    const tickSeconds = whole ? unit : Number(`1e-${EXPONENTS[timeUnit] + digits}`)
    const read = await readTicks(source, answer, hooks, tickSeconds, digits)
    if (read === null || typeof read === 'object') return read
    digits = Math.max(
      0,
      Math.min(digits - 1, Math.floor(Math.log10(Number.MAX_SAFE_INTEGER / (HEADROOM * read)))),
    )
  }
}

/** The record, null when stopped, or the first time that is too large for the resolution. */
async function readTicks(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  tickSeconds: number,
  digits: number,
): Promise<{ records: ReadRecord[]; notes: string[] } | number | null> {
  const column = answer.columns.indexOf('arrival')
  const scale = 10 ** digits
  const builder = photonStreamBuilder(tickSeconds)
  const buffer = new Float64Array(BUFFER)
  let used = 0
  let rounded = 0
  let firstTick = -1
  let lastTick = 0
  let before = Number.NEGATIVE_INFINITY
  let tooLarge = Number.NaN
  const flush = (): void => {
    if (builder.push(buffer, null, used) !== null) throw new Error('Ticks were checked one by one.')
    used = 0
  }
  const stopHooks: RowHooks = {
    onProgress: (fraction) => hooks.onProgress(fraction),
    shouldStop: () => !Number.isNaN(tooLarge) || hooks.shouldStop(),
  }
  const complete = await readRows(source, answer, stopHooks, (values, line) => {
    if (!Number.isNaN(tooLarge)) return
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
    if (!Number.isSafeInteger(tick)) {
      if (digits > 0) {
        tooLarge = time
        return
      }
      failAtLine(
        source.name,
        line,
        `the arrival time ${time} is too large for a resolution of ${tickSeconds} s. Correct the line or choose a coarser unit.`,
      )
    }
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
    buffer[used++] = tick
    if (used === BUFFER) flush()
  })
  if (!Number.isNaN(tooLarge)) return tooLarge
  if (!complete) return null
  flush()
  if (builder.photons === 0)
    failWhole(source.name, 'the file holds no arrival times. Choose a file with data.')
  const { startTick, note } = recordStart(firstTick, lastTick)
  const stream = builder.finish({ startTick })
  const notes = [`${note}; ${builder.photons} photons.`]
  const unused = answer.columns.filter((role, i) => i !== column && role !== 'ignore').length
  if (unused > 0)
    notes.push(
      `Beside the arrival times, ${unused} ${unused === 1 ? 'column was' : 'columns were'} not used.`,
    )
  if (rounded > 0)
    notes.push(
      `${rounded} arrival times have more decimals than are kept and were rounded to ${tickSeconds} s.`,
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
