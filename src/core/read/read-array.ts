import { photonStreamBuilder } from '../photons/stream-builder.ts'
import type { ByteSource } from './byte-source.ts'
import { recordStart } from './record-start.ts'
import { type ArrayAnswer, unitSeconds } from './import-answer.ts'
import { type NpyHeader, readNpyHeader } from './npy-header.ts'
import { readNpyValues } from './npy-values.ts'
import { failAtByte, failWhole } from './read-problem.ts'
import type { ReadRecord } from './read-record.ts'
import type { RowHooks } from './text-rows.ts'

/** Emitters in one array. */
export const MOST_EMITTERS = 4096
/** Real arrival times are kept to this, s; noted when it rounds. */
const FLOAT_TICK_SECONDS = 1e-9
const MOST_COUNTS = 0xffffffff

export interface ArrayRead {
  readonly records: ReadRecord[]
  readonly notes: string[]
}

/** A NumPy array as records; null when stopped. 2-D arrays hold one emitter per row or column, as the answer says. */
export async function readArray(
  source: ByteSource,
  answer: ArrayAnswer,
  hooks: RowHooks,
): Promise<ArrayRead | null> {
  const header = await readNpyHeader(source)
  if (answer.content === 'arrival') return readArrivals(source, header, answer, hooks)
  if (answer.content === 'counts') return readCounts(source, header, answer, hooks)
  failWhole(
    source.name,
    'it is not known whether the numbers are arrival times or counts. Choose before opening the file.',
  )
}

function stemOf(source: ByteSource): string {
  return source.name.replace(/\.[^.]*$/, '')
}

async function readArrivals(
  source: ByteSource,
  header: NpyHeader,
  answer: ArrayAnswer,
  hooks: RowHooks,
): Promise<ArrayRead | null> {
  if (header.shape.length === 2 && Math.min(...header.shape) > 1) {
    failWhole(
      source.name,
      'a table of arrival times is not read: emitters have different numbers of photons. Save one array per emitter.',
    )
  }
  const unit = unitSeconds(answer)
  if (unit === null)
    failWhole(source.name, 'the unit of the arrival times is not known. Choose it before opening the file.')
  const real = header.kind === 'f' && answer.timeUnit !== 'ticks'
  const tickSeconds = real ? Math.min(unit, FLOAT_TICK_SECONDS) : unit
  const scale = real ? Math.round(unit / tickSeconds) : 1
  const builder = photonStreamBuilder(tickSeconds)
  let ticks = new Float64Array(0)
  let before = Number.NEGATIVE_INFINITY
  let rounded = 0
  let firstTick = -1
  let lastTick = 0
  const whole = await readNpyValues(source, header, hooks, (values, count, firstItem) => {
    if (ticks.length < count) ticks = new Float64Array(count)
    for (let i = 0; i < count; i++) {
      const time = values[i]
      const at = header.dataStart + (firstItem + i) * header.itemBytes
      if (!Number.isFinite(time))
        failAtByte(source.name, at, `item ${firstItem + i} is ${time}, not a time. Remove it before saving.`)
      if (time < 0)
        failAtByte(
          source.name,
          at,
          `item ${firstItem + i} is ${time}; arrival times start at 0 or later. Shift the times.`,
        )
      if (time < before)
        failAtByte(
          source.name,
          at,
          `item ${firstItem + i} (${time}) is earlier than the one before (${before}). Sort the array, or check whether a counter wrapped.`,
        )
      before = time
      const exact = time * scale
      const tick = Math.round(exact)
      if (!Number.isSafeInteger(tick))
        failAtByte(
          source.name,
          at,
          `item ${firstItem + i} (${time}) is too large for a resolution of ${tickSeconds} s. Choose a coarser unit.`,
        )
      if (!real && tick !== time)
        failAtByte(
          source.name,
          at,
          `ticks are whole numbers, item ${firstItem + i} is ${time}. Choose a unit of time instead.`,
        )
      if (Math.abs(exact - tick) > 0.001) rounded++
      if (firstTick < 0) firstTick = tick
      lastTick = tick
      ticks[i] = tick
    }
    builder.push(ticks, null, count)
  })
  if (!whole) return null
  const { startTick, note } = recordStart(firstTick, lastTick)
  const stream = builder.finish({ startTick })
  const notes = [`${note}; ${stream.photons} photons.`]
  if (rounded > 0) notes.push(`${rounded} arrival times were rounded to ${tickSeconds} s.`)
  return { records: [{ name: stemOf(source), column: null, record: stream, gate: null }], notes }
}

async function readCounts(
  source: ByteSource,
  header: NpyHeader,
  answer: ArrayAnswer,
  hooks: RowHooks,
): Promise<ArrayRead | null> {
  const { binSeconds } = answer
  if (binSeconds === null || !(binSeconds > 0) || !Number.isFinite(binSeconds)) {
    failWhole(source.name, 'the bin width is not known. Give it before opening the file.')
  }
  const [rows, columns] = header.shape.length === 1 ? [1, header.shape[0]] : header.shape
  const byRows = header.shape.length === 1 || answer.emitters === 'rows'
  const emitters = byRows ? rows : columns
  const bins = byRows ? columns : rows
  if (emitters > MOST_EMITTERS)
    failWhole(
      source.name,
      `${emitters} emitters in one array; at most ${MOST_EMITTERS} are read. Is the other axis the one of emitters?`,
    )
  const counts = Array.from({ length: emitters }, () => new Uint32Array(bins))
  const highest = new Float64Array(emitters)
  // C order runs along rows, Fortran order along columns.
  const alongColumns = header.shape.length === 2 && header.fortranOrder
  const run = alongColumns ? rows : columns
  const whole = await readNpyValues(source, header, hooks, (values, count, firstItem) => {
    for (let i = 0; i < count; i++) {
      const item = firstItem + i
      const slow = Math.floor(item / run)
      const quick = item - slow * run
      const row = alongColumns ? quick : slow
      const column = alongColumns ? slow : quick
      const value = values[i]
      if (!(value >= 0) || value > MOST_COUNTS || !Number.isInteger(value)) {
        failAtByte(
          source.name,
          header.dataStart + item * header.itemBytes,
          `item (${row}, ${column}) is ${value}; counts are whole numbers of 0 or more, below 2^32. If a background was subtracted, use the counts from before.`,
        )
      }
      const emitter = byRows ? row : column
      counts[emitter][byRows ? column : row] = value
      if (value > highest[emitter]) highest[emitter] = value
    }
  })
  if (!whole) return null
  const digits = String(emitters).length
  return {
    records: counts.map(
      (values, emitter): ReadRecord => ({
        name:
          emitters === 1 ? stemOf(source) : `${stemOf(source)} ${String(emitter + 1).padStart(digits, '0')}`,
        column: emitters === 1 ? null : emitter,
        record: {
          kind: 'trace',
          counts: highest[emitter] < 65536 ? Uint16Array.from(values) : values,
          binSeconds,
          startSeconds: 0,
          coverage: null,
          dropped: {},
        },
        gate: null,
      }),
    ),
    notes: [],
  }
}
