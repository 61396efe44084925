import { seededRandom } from '../../src/core/numeric/seeded-random.ts'
import type { RandomSource } from '../../src/core/numeric/random-source.ts'
import { bytesSource } from '../../src/core/read/byte-source.ts'
import { parseImportAnswer } from '../../src/core/read/import-answer-schema.ts'
import type { ImportAnswer } from '../../src/core/read/import-answer.ts'
import { previewSource } from '../../src/core/read/import-preview.ts'
import { readSource } from '../../src/core/read/read-source.ts'
import { below, goodFile, oneOf } from './good-files.ts'
import { mutated } from './mutation.ts'
import { dataFault, refusalFault } from './verdict.ts'

export interface FuzzReport {
  readonly inputs: number
  readonly read: number
  readonly refused: number
  /** Read with gaps, rounding or unused columns said in notes. */
  readonly readWithNotes: number
  /** Of the unharmed tenth. */
  readonly unharmed: number
  readonly unharmedRead: number
  readonly slowestSeconds: number
  readonly faults: readonly { readonly input: number; readonly what: string; readonly base64: string }[]
}

const QUIET = { onProgress: (): void => {}, shouldStop: (): boolean => false }
/** Longer than this for a few kilobytes is a hang. */
const HANG_SECONDS = 2
const CELLS_FREE = 1_100_000
const CELLS_PER_BYTE = 8

function answered(answer: ImportAnswer, random: RandomSource): ImportAnswer {
  const open = {
    timeUnit: answer.timeUnit ?? oneOf(random, ['s', 'ms', 'us', 'ns', 'ticks'] as const),
    tickSeconds: 1e-9,
    binSeconds: answer.binSeconds ?? 0.01,
  }
  if (answer.kind === 'text') return { ...answer, ...open }
  return { ...answer, ...open, content: answer.content ?? oneOf(random, ['arrival', 'counts'] as const) }
}

/** Another way to read the file, as a user or a remembered answer could choose. */
function altered(answer: ImportAnswer, random: RandomSource): ImportAnswer {
  if (answer.kind !== 'text')
    return {
      ...answer,
      emitters: oneOf(random, ['rows', 'columns']),
      content: oneOf(random, ['arrival', 'counts']),
    }
  const roles = ['time', 'arrival', 'counts', 'rate-cps', 'rate-kcps', 'gate', 'ignore'] as const
  const columns = answer.columns.slice()
  columns[below(random, columns.length)] = oneOf(random, roles)
  if (below(random, 4) === 0) return { ...answer, columns, headerLines: below(random, 3) }
  if (below(random, 4) === 0) return { ...answer, columns, delimiter: oneOf(random, [',', ';', '\t', ' ']) }
  return { ...answer, columns, decimalComma: below(random, 4) === 0 }
}

async function judge(bytes: Uint8Array, name: string, remembered: ImportAnswer | null, random: RandomSource) {
  const source = bytesSource(bytes, name)
  const preview = await previewSource(source)
  if ((preview.answer === null) === (preview.problem === null))
    return { fault: 'neither answer nor problem', ok: false, notes: 0 }
  if (preview.problem !== null && remembered === null)
    return { fault: refusalFault(preview.problem, bytes, name), ok: false, notes: 0 }
  if (preview.answer !== null && !parseImportAnswer(preview.answer).ok)
    return { fault: 'an answer that cannot be saved', ok: false, notes: 0 }
  const proposed = remembered ?? answered(preview.answer as ImportAnswer, random)
  const answer = below(random, 5) === 0 ? altered(proposed, random) : proposed
  const outcome = await readSource(source, answer, QUIET)
  if (!outcome.ok) return { fault: refusalFault(outcome.problem, bytes, name), ok: false, notes: 0 }
  const cells = outcome.records.reduce(
    (sum, { record }) => sum + (record.kind === 'trace' ? record.counts.length : record.photons),
    0,
  )
  if (cells > CELLS_FREE + CELLS_PER_BYTE * bytes.length)
    return { fault: `${cells} bins from ${bytes.length} bytes`, ok: true, notes: 0 }
  const notes = outcome.notes.filter((note) => /missing|rounded|not used/.test(note)).length
  return { fault: dataFault(outcome, bytes, answer), ok: true, notes }
}

/** Reads `inputs` damaged files, the same for a seed; every tenth is left unharmed. */
export async function fuzzReaders(inputs: number, seed: number): Promise<FuzzReport> {
  const faults: { input: number; what: string; base64: string }[] = []
  let read = 0
  let readWithNotes = 0
  let slowestSeconds = 0
  let unharmedRead = 0
  for (let input = 0; input < inputs; input++) {
    const random = seededRandom(`${seed} ${input}`)
    const good = goodFile(random)
    const bytes = input % 10 === 0 ? good.bytes : mutated(good.bytes, random, goodFile(random).bytes)
    let fault: string | null
    const began = performance.now()
    try {
      // An answer remembered for the unharmed file meets the damaged one.
      const { answer } =
        below(random, 3) === 0 ? await previewSource(bytesSource(good.bytes, good.name)) : { answer: null }
      const result = await judge(bytes, good.name, answer === null ? null : answered(answer, random), random)
      fault = result.fault
      if (result.ok) read++
      if (result.ok && input % 10 === 0) unharmedRead++
      if (result.notes > 0) readWithNotes++
    } catch (error) {
      fault = `thrown: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`
    }
    const seconds = (performance.now() - began) / 1000
    slowestSeconds = Math.max(slowestSeconds, seconds)
    if (seconds > HANG_SECONDS) fault ??= `took ${seconds.toFixed(1)} s`
    if (fault !== null) faults.push({ input, what: fault, base64: Buffer.from(bytes).toString('base64') })
  }
  const unharmed = Math.ceil(inputs / 10)
  return {
    inputs,
    read,
    refused: inputs - read,
    readWithNotes,
    unharmed,
    unharmedRead,
    slowestSeconds,
    faults,
  }
}
