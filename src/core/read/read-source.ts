import type { ByteSource } from './byte-source.ts'
import { type ImportAnswer, missingAnswers } from './import-answer.ts'
import { firstText } from './import-preview.ts'
import { npzMember } from './npz-members.ts'
import { readArray } from './read-array.ts'
import { failWhole, ReadFailure } from './read-problem.ts'
import type { ReadOutcome } from './read-record.ts'
import { readText } from './read-text.ts'
import type { RowHooks } from './text-rows.ts'
import { commentMark, splitRow } from './text-shape.ts'
import { decimalsOf } from './decimal.ts'

const STOPPED: ReadOutcome = {
  ok: false,
  stopped: true,
  problem: { sentence: 'Reading was stopped; nothing was kept.', file: '', line: null, byte: null },
}

const NEEDED = {
  timeUnit: 'the unit of its times',
  binSeconds: 'its bin width',
  content: 'whether it holds arrival times or counts',
  columns: 'which columns hold counts or arrival times',
} as const

/** Reads a whole file as the answer says. Data never make it throw: a problem names file, line or byte, and what to do. */
export async function readSource(
  source: ByteSource,
  answer: ImportAnswer,
  hooks: RowHooks,
): Promise<ReadOutcome> {
  try {
    const missing = missingAnswers(answer)
    if (missing.length > 0)
      failWhole(
        source.name,
        `it is not said ${missing.map((key) => NEEDED[key]).join(' nor ')}. Answer that before opening the file.`,
      )
    const read = await readByKind(source, answer, hooks)
    return read === null ? STOPPED : { ok: true, ...read }
  } catch (error) {
    if (error instanceof ReadFailure) return { ok: false, problem: error.problem }
    // The engine says this when an array does not fit; data that large are read in parts.
    if (error instanceof RangeError && /alloc|array.*length/i.test(error.message)) {
      const sentence = `“${source.name}”: there is not enough memory for it. Split the file or close other tabs.`
      return { ok: false, problem: { sentence, file: source.name, line: null, byte: null } }
    }
    throw error
  }
}

async function readByKind(source: ByteSource, answer: ImportAnswer, hooks: RowHooks) {
  if (answer.kind === 'text') {
    if (source.size === 0) failWhole(source.name, 'the file is empty. Choose a file with data.')
    return readText(source, answer, hooks, await firstNumbers(source, answer))
  }
  if (answer.kind === 'npy') return readArray(source, answer, hooks)
  const half = (offset: number): RowHooks => ({
    onProgress: (fraction) => hooks.onProgress(offset + fraction / 2),
    shouldStop: () => hooks.shouldStop(),
  })
  const member = await npzMember(source, answer.member ?? '', half(0))
  return member === null ? null : readArray(member, answer, half(0.5))
}

/** Median step (the lower one of two: gaps make steps longer) and decimals of the time column as the answer reads it, from the first rows. */
async function firstNumbers(source: ByteSource, answer: Extract<ImportAnswer, { kind: 'text' }>) {
  const column = answer.columns.findIndex((role) => role === 'time' || role === 'arrival')
  const text = await firstText(source)
  if (column < 0) return { step: null, decimals: 0 }
  const times: number[] = []
  let decimals = 0
  let headers = answer.headerLines
  for (const line of text.split(/\r\n|\n|\r/)) {
    if (line.trim() === '' || commentMark(line, answer.delimiter)) continue
    if (headers > 0) {
      headers--
      continue
    }
    const field = splitRow(line, answer.delimiter)[column]
    if (field === undefined || field === '') continue
    const value = Number(answer.decimalComma ? field.replace(',', '.') : field)
    if (Number.isNaN(value)) continue
    times.push(value)
    decimals = Math.max(decimals, decimalsOf(field))
  }
  const steps = times
    .slice(1)
    .map((time, i) => time - times[i])
    .sort((a, b) => a - b)
  const step = steps.length === 0 ? null : steps[Math.floor((steps.length - 1) / 2)]
  return { step: step !== null && step > 0 ? step : null, decimals: Math.min(decimals, 12) }
}
