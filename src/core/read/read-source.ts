import type { ByteSource } from './byte-source.ts'
import { type ImportAnswer, missingAnswers } from './import-answer.ts'
import { npzMember } from './npz-members.ts'
import { readArray } from './read-array.ts'
import { failWhole, ReadFailure } from './read-problem.ts'
import type { ReadOutcome } from './read-record.ts'
import { readText } from './read-text.ts'
import type { RowHooks } from './text-rows.ts'

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
    return readText(source, answer, hooks)
  }
  if (answer.kind === 'npy') return readArray(source, answer, hooks)
  const half = (offset: number): RowHooks => ({
    onProgress: (fraction) => hooks.onProgress(offset + fraction / 2),
    shouldStop: () => hooks.shouldStop(),
  })
  const member = await npzMember(source, answer.member ?? '', half(0))
  return member === null ? null : readArray(member, answer, half(0.5))
}
