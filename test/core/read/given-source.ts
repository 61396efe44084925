import { type ByteSource, bytesSource } from '../../../src/core/read/byte-source.ts'
import { previewSource } from '../../../src/core/read/import-preview.ts'
import type { ReadOutcome } from '../../../src/core/read/read-record.ts'
import { readSource } from '../../../src/core/read/read-source.ts'

export const QUIET = { onProgress: () => {}, shouldStop: () => false }

/** Text as the bytes of a file. */
export function textSource(text: string, name = 'dots.txt'): ByteSource {
  return bytesSource(new TextEncoder().encode(text), name)
}

/** Looks at the file, answers what the file leaves open, reads it. */
export async function readGiven(
  source: ByteSource,
  answers: Readonly<Record<string, unknown>> = {},
): Promise<ReadOutcome> {
  const preview = await previewSource(source)
  if (preview.answer === null) {
    if (preview.problem === null) throw new Error('a preview without answer must have a problem')
    return { ok: false, problem: preview.problem }
  }
  return readSource(source, { ...preview.answer, ...answers }, QUIET)
}

/** Counts of every record as plain lists. */
export function countsIn(outcome: ReadOutcome): number[][] {
  if (!outcome.ok) throw new Error(outcome.problem.sentence)
  return outcome.records.map(({ record }) => {
    if (record.kind !== 'trace') throw new Error('expected counts')
    return Array.from(record.counts)
  })
}

/** Arrival ticks of the first record. */
export function ticksIn(outcome: ReadOutcome): number[] {
  if (!outcome.ok) throw new Error(outcome.problem.sentence)
  const [{ record }] = outcome.records
  if (record.kind !== 'photons') throw new Error('expected arrival times')
  return record.chunks.flatMap(({ baseTick, offsets, count }) =>
    Array.from(offsets.subarray(0, count), (offset) => baseTick + offset),
  )
}

/** The sentence of a file that must not be read. */
export function problemIn(outcome: ReadOutcome): string {
  if (outcome.ok) throw new Error(`read ${outcome.records.length} records`)
  return outcome.problem.sentence
}
