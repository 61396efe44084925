import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { bytesSource } from '../../../src/core/read/byte-source.ts'
import type { TextAnswer } from '../../../src/core/read/import-answer.ts'
import { ReadFailure } from '../../../src/core/read/read-problem.ts'
import { readRows } from '../../../src/core/read/text-rows.ts'
import { QUIET, textSource } from './given-source.ts'

const ANSWER: TextAnswer = {
  kind: 'text',
  delimiter: ',',
  decimalComma: false,
  headerLines: 0,
  columns: ['time', 'counts'],
  names: ['t', 'n'],
  timeUnit: 's',
  tickSeconds: null,
  binSeconds: null,
}

async function rowsOf(text: string, blockBytes?: number, answer: Partial<TextAnswer> = {}) {
  const rows: number[][] = []
  const lines: number[] = []
  await readRows(
    textSource(text),
    { ...ANSWER, ...answer },
    QUIET,
    (values, line) => {
      rows.push(Array.from(values))
      lines.push(line)
    },
    blockBytes,
  )
  return { rows, lines }
}

describe('block borders', () => {
  const TEXT = '\uFEFF# c\r\nt,n\r\n\r\n0.125,12345\r\n% x\r\n-1.5e-3,+7\r3,4\n\n 5 ,\t6 \r\n// end\r7,8'
  it('every block size gives the same rows and lines, whatever it cuts', async () => {
    const whole = await rowsOf(TEXT, undefined, { headerLines: 1 })
    expect(whole.rows).toEqual([
      [0.125, 12345],
      [-0.0015, 7],
      [3, 4],
      [5, 6],
      [7, 8],
    ])
    expect(whole.lines).toEqual([4, 6, 7, 9, 11])
    for (let size = 1; size <= TEXT.length + 3; size++)
      expect(await rowsOf(TEXT, size, { headerLines: 1 })).toEqual(whole)
  })
  it('a file larger than a block of the usual size', async () => {
    const rows = Array.from({ length: 400_000 }, (_, i) => `${i}.5,${i % 1000}`)
    const { rows: read, lines } = await rowsOf(rows.join('\r\n'))
    expect(read.length).toBe(400_000)
    expect(read.every(([t, n], i) => t === i + 0.5 && n === i % 1000 && lines[i] === i + 1)).toBe(true)
  })
})

describe('properties', () => {
  const number = fc.double({ noNaN: true, noDefaultInfinity: true })
  const DIALECTS = [
    { delimiter: ',', decimalComma: false },
    { delimiter: ';', decimalComma: false },
    { delimiter: ';', decimalComma: true },
    { delimiter: '\t', decimalComma: false },
    { delimiter: '\t', decimalComma: true },
    { delimiter: ' ', decimalComma: false },
    { delimiter: ' ', decimalComma: true },
  ] as const
  it('any numbers written come back bit for bit, in any dialect, line end and block size', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.tuple(number, number), { minLength: 1, maxLength: 60, size: 'max' }),
        fc.constantFrom(...DIALECTS),
        fc.constantFrom('\n', '\r\n', '\r'),
        fc.integer({ min: 1, max: 300 }),
        async (table, dialect, end, blockBytes) => {
          const text = table
            .map((row) =>
              row
                .map((value) => (dialect.decimalComma ? String(value).replace('.', ',') : String(value)))
                .join(dialect.delimiter),
            )
            .join(end)
          const { rows } = await rowsOf(text, blockBytes, dialect)
          // Text has no sign of zero.
          expect(rows).toEqual(table.map((row) => row.map((value) => (Object.is(value, -0) ? 0 : value))))
        },
      ),
      { seed: 51, numRuns: 200 },
    )
  })
})

describe('stopping and failing', () => {
  it('stops between blocks and reports progress that never falls and ends at 1', async () => {
    let blocks = 0
    const hooks = { onProgress: () => {}, shouldStop: () => ++blocks > 3 }
    let rows = 0
    expect(await readRows(textSource('1,2\n'.repeat(100)), ANSWER, hooks, () => rows++, 40)).toBe(false)
    expect(rows).toBe(30)
    const seen: number[] = []
    const watch = { onProgress: (f: number) => void seen.push(f), shouldStop: () => false }
    expect(await readRows(textSource('1,2\n'.repeat(100)), ANSWER, watch, () => {}, 40)).toBe(true)
    expect(seen).toEqual([...seen].sort((a, b) => a - b))
    expect(seen.at(-1)).toBe(1)
    expect(seen.length).toBeGreaterThan(8)
  })
  it('a line of more than a megabyte is not a row', async () => {
    const source = bytesSource(new Uint8Array((1 << 20) + 4).fill(49), 'long.txt')
    await expect(readRows(source, ANSWER, QUIET, () => {}, 1 << 18)).rejects.toThrow(
      '“long.txt”, line 1: the line is longer than a megabyte',
    )
  })
  it('control bytes of a value are not repeated in the sentence, long values are cut', async () => {
    const failure = await rowsOf(`1,2\n3,\u0007${'x'.repeat(90)}\n`).catch((error: unknown) => error)
    expect(failure).toBeInstanceOf(ReadFailure)
    expect((failure as ReadFailure).problem).toEqual({
      sentence: `“dots.txt”, line 2: expected a number in column 2, found “·${'x'.repeat(39)}…”. Correct the line or the reading of columns.`,
      file: 'dots.txt',
      line: 2,
      byte: null,
    })
  })
  it('a file that ends before its size says', async () => {
    const bytes = new TextEncoder().encode('1,2\n3,4\n5,6\n')
    const source = { ...bytesSource(bytes, 'short.csv'), size: 2 ** 31 }
    await expect(readRows(source, ANSWER, QUIET, () => {})).rejects.toThrow('ends before its data do')
  })
})
