import type { ImportAnswer } from '../../src/core/read/import-answer.ts'
import { unitSeconds } from '../../src/core/read/import-answer.ts'
import type { ReadProblem } from '../../src/core/read/read-problem.ts'
import type { ReadOutcome, ReadRecord } from '../../src/core/read/read-record.ts'
import { slowRead } from './slow-read.ts'

type Read = Extract<ReadOutcome, { ok: true }>

/** What is wrong with a refusal; null when its sentence can stand. */
export function refusalFault(problem: ReadProblem, bytes: Uint8Array, name: string): string | null {
  const { sentence, line, byte } = problem
  if (!sentence.startsWith(`“${name}`)) return 'the sentence does not begin with the file'
  if (/\p{Cc}/u.test(sentence)) return 'the sentence holds control characters'
  if (sentence.length > 500) return `the sentence has ${sentence.length} characters`
  if (!/[.,;:?] .+[.?]$/.test(sentence)) return 'the sentence does not say what to do'
  const lines = Buffer.from(bytes)
    .toString('latin1')
    .split(/\r\n|\r|\n/).length
  if (line !== null && !(line >= 1 && line <= lines && sentence.includes(`line ${line}:`)))
    return `line ${line} of ${lines}`
  if (byte !== null && !(byte >= 0 && sentence.includes(`byte ${byte}:`))) return `byte ${byte}`
  return null
}

/** What is wrong with data that were read, against the slow reader; null when every number is accounted for. */
export function dataFault(read: Read, bytes: Uint8Array, answer: ImportAnswer): string | null {
  const slow = slowRead(bytes, answer)
  if (slow === null) return 'read what the slow reader cannot'
  const unused = answer.kind === 'text' ? columnsUnused(answer.columns) : 0
  if (unused > 0 && !read.notes.some((note) => new RegExp(`\\b${unused} (more )?column`).test(note)))
    return 'columns left out in silence'
  if (slow.columns.length !== read.records.length)
    return `${read.records.length} records of ${slow.columns.length}`
  for (const [i, one] of read.records.entries()) {
    const fault =
      one.record.kind === 'photons'
        ? photonFault(one.record, slow.columns[i], answer, read.notes.join(' '))
        : traceFault(one, slow.columns[i], slow.times, slow.gates, answer, i, read.notes.join(' '))
    if (fault !== null) return `record ${i + 1}: ${fault}`
  }
  return null
}

/** Columns that have a part in the answer but none in the records. */
function columnsUnused(columns: readonly string[]): number {
  const arrival = columns.indexOf('arrival')
  if (arrival >= 0) return columns.filter((role, i) => role !== 'ignore' && i !== arrival).length
  return columns.filter((role, i) => (role === 'time' || role === 'gate') && columns.indexOf(role) !== i)
    .length
}

function photonFault(
  record: Extract<ReadRecord['record'], { kind: 'photons' }>,
  times: readonly number[],
  answer: ImportAnswer,
  notes: string,
): string | null {
  const ticks = record.chunks.flatMap(({ baseTick, offsets, count }) =>
    Array.from(offsets.subarray(0, count), (offset) => baseTick + offset),
  )
  if (ticks.length !== times.length || record.photons !== times.length)
    return `${ticks.length} photons of ${times.length}`
  // An array of integers is in whole units already.
  const scale = Math.round((unitSeconds(answer) ?? 0) / record.tickSeconds)
  let rounded = 0
  for (const [i, tick] of ticks.entries()) {
    if (Math.abs(tick - times[i] * scale) > 0.5 + 1e-3)
      return `photon ${i + 1} at ${tick} of ${times[i] * scale}`
    if (Math.abs(tick - times[i] * scale) > 0.01 + times[i] * scale * 1e-15) rounded++
    if (i > 0 && tick < ticks[i - 1]) return `photon ${i + 1} goes back`
  }
  if (rounded > 0 && !notes.includes('rounded')) return `${rounded} rounded in silence`
  if (!(record.startTick <= ticks[0] && record.endTick > ticks[ticks.length - 1]))
    return 'photons outside the exposure'
  return null
}

function traceFault(
  { record, gate }: ReadRecord,
  values: readonly number[],
  times: readonly number[] | null,
  gates: readonly number[] | null,
  answer: ImportAnswer,
  place: number,
  notes: string,
): string | null {
  if (record.kind !== 'trace') return 'not a trace'
  const { counts, coverage, binSeconds, startSeconds } = record
  const kept = Array.from(counts, (_, i) => i).filter((i) => coverage === null || coverage[i] === 255)
  const empty = counts.length - kept.length
  if (kept.length !== values.length) return `${kept.length} bins of ${values.length} rows`
  if (empty > 0 && !notes.includes(`${empty} rows are missing`)) return `${empty} missing bins in silence`
  if (coverage?.some((share, i) => share !== 255 && (share !== 0 || counts[i] !== 0)))
    return 'counts in a gap'
  const roles = answer.kind === 'text' ? answer.columns.filter((role) => /^(counts|rate-)/.test(role)) : []
  const role = roles[place] ?? 'counts'
  const unit = unitSeconds(answer) ?? 1
  for (const [i, bin] of kept.entries()) {
    const raw = role === 'counts' ? values[i] : values[i] * binSeconds * (role === 'rate-kcps' ? 1000 : 1)
    // Rates are made whole with the step of the first rows, which the mean step may differ from.
    const slack = role === 'counts' ? 0 : 0.05 + (times === null ? 1e-5 : 0.31) * raw
    if (!(Math.abs(counts[bin] - raw) <= slack)) return `bin ${bin} holds ${counts[bin]}, the row ${raw}`
    if (times !== null && Math.abs(startSeconds + bin * binSeconds - times[i] * unit) > binSeconds)
      return `bin ${bin} is at ${startSeconds + bin * binSeconds} s, the row at ${times[i] * unit} s`
    if (gates !== null) {
      const middle = startSeconds + (bin + 0.5) * binSeconds
      const inside = gate?.windows.some((w) => w.startSeconds <= middle && middle < w.endSeconds) ?? false
      if (inside !== (gates[i] === 1)) return `bin ${bin} has the wrong gate`
    }
  }
  return null
}
