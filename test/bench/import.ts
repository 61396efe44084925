import { type ByteSource, bytesSource } from '../../src/core/read/byte-source.ts'
import type { ImportAnswer } from '../../src/core/read/import-answer.ts'
import { previewSource } from '../../src/core/read/import-preview.ts'
import { readSource } from '../../src/core/read/read-source.ts'
import type { BenchRow } from './bench-row.ts'

const ROWS = 10_000_000
const BUDGET_SECONDS = 4
const RIVAL = 'String.split and parseFloat'
const QUIET = { onProgress: (): void => {}, shouldStop: (): boolean => false }

/** Bytes of `rows` lines; xorshift numbers (Marsaglia 2003). */
function lines(head: string, write: (row: number, random: number) => string): Uint8Array {
  const encoder = new TextEncoder()
  const parts: Uint8Array[] = [encoder.encode(head)]
  let text: string[] = []
  let x = 2463534242
  for (let row = 0; row < ROWS; row++) {
    x ^= x << 13
    x ^= x >>> 17
    x ^= x << 5
    text.push(write(row, x >>> 0))
    if (text.length === 100_000 || row === ROWS - 1) {
      parts.push(encoder.encode(text.join('')))
      text = []
    }
  }
  const bytes = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0))
  let at = 0
  for (const part of parts) {
    bytes.set(part, at)
    at += part.length
  }
  return bytes
}

/** The obvious reader, in pieces because a string cannot hold the file: split at line ends, split at commas, parseFloat. */
function splitRead(bytes: Uint8Array): { rows: number; sum: number } {
  const decoder = new TextDecoder()
  let carry = ''
  let rows = 0
  let sum = 0
  const last: number[] = []
  for (let at = 0; at < bytes.length; at += 4 << 20) {
    const text = carry + decoder.decode(bytes.subarray(at, at + (4 << 20)), { stream: true })
    const parts = text.split('\n')
    carry = parts.pop() ?? ''
    for (const part of parts) {
      const fields = part.split(',')
      const value = Number.parseFloat(fields[fields.length - 1])
      for (let i = 0; i < fields.length - 1; i++) last[i] = Number.parseFloat(fields[i])
      if (Number.isNaN(value)) continue
      rows++
      sum += value
    }
  }
  return { rows, sum }
}

async function ours(source: ByteSource, answers: object): Promise<number> {
  const { answer } = await previewSource(source)
  const outcome = await readSource(source, { ...answer, ...answers } as ImportAnswer, QUIET)
  if (!outcome.ok) throw new Error(outcome.problem.sentence)
  const [{ record }] = outcome.records
  return record.kind === 'photons' ? record.photons : record.counts.length
}

async function compared(what: string, bytes: Uint8Array): Promise<BenchRow> {
  let seconds = Number.POSITIVE_INFINITY
  let rivalSeconds = Number.POSITIVE_INFINITY
  for (let turn = 0; turn < 3; turn++) {
    const began = performance.now()
    const rows = await ours(bytesSource(bytes, 'bench.csv'), {})
    seconds = Math.min(seconds, (performance.now() - began) / 1000)
    if (rows !== ROWS) throw new Error(`read ${rows} of ${ROWS} rows`)
    const rivalBegan = performance.now()
    const rival = splitRead(bytes)
    rivalSeconds = Math.min(rivalSeconds, (performance.now() - rivalBegan) / 1000)
    if (rival.rows !== ROWS) throw new Error(`the rival read ${rival.rows} of ${ROWS} rows`)
  }
  return {
    what: `${what}, 10^7 rows, ${(bytes.length / 1e6).toFixed(0)} MB`,
    value: seconds,
    unit: 's',
    rival: RIVAL,
    ratio: seconds / rivalSeconds,
    budget: `<= ${BUDGET_SECONDS} s and faster`,
    ok: seconds <= BUDGET_SECONDS && seconds < rivalSeconds,
  }
}

/** Import of 10^7 rows, from bytes in memory, best of three turns taken alternately with the rival's. */
export async function run(): Promise<BenchRow[]> {
  const poissonLike = (random: number): number => (random % 7) + ((random >>> 8) % 90)
  let time = 0
  return [
    await compared(
      'text, time and counts',
      lines('time (s),counts\n', (row, random) => `${(row / 1000).toFixed(3)},${poissonLike(random)}\n`),
    ),
    await compared(
      'text, arrival times',
      lines('arrival (us)\n', (_, random) => {
        time += (random % 2000) + 1
        return `${Math.floor(time / 10)}.${time % 10}\n`
      }),
    ),
  ]
}
