import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { type ByteSource, bytesSource } from '../../../src/core/read/byte-source.ts'
import { previewSource } from '../../../src/core/read/import-preview.ts'
import numpyFiles from '../../reference/numpy-files.json' with { type: 'json' }
import { countsIn, problemIn, readGiven, ticksIn } from './given-source.ts'
import { itemBytes, npyFile } from './npy-file.ts'

const COUNTS = { content: 'counts', binSeconds: 0.01 }
const bytesOf = (base64: string): Uint8Array => new Uint8Array(Buffer.from(base64, 'base64'))
const fileOf = (word: string): Uint8Array => {
  const file = numpyFiles.files.find((f) => f.word === word)
  if (file === undefined) throw new Error(`no file ${word}`)
  return bytesOf(file.base64)
}
const transposed = (table: number[][]): number[][] => table[0].map((_, c) => table.map((row) => row[c]))

describe('files written by NumPy', () => {
  for (const { word, base64, values } of numpyFiles.files) {
    if (!Array.isArray(values)) continue
    const flat = !Array.isArray(values[0])
    const source = bytesSource(bytesOf(base64), `${word}.npy`)
    if (/^(ticks|seconds)/.test(word)) {
      it(word, async () => {
        const real = word.startsWith('seconds')
        const outcome = await readGiven(source, {
          content: 'arrival',
          timeUnit: real ? 's' : 'ticks',
          tickSeconds: 1e-12,
        })
        expect(ticksIn(outcome)).toEqual(real ? [100, 250_000_000, 250_000_000, 1_500_000_000] : values)
        expect(outcome.ok && outcome.notes.join(' ')).not.toContain('rounded')
      })
      continue
    }
    it(word, async () => {
      const rows = (flat ? [values] : values) as number[][]
      expect(countsIn(await readGiven(source, { ...COUNTS, emitters: 'rows' }))).toEqual(rows)
      if (!flat)
        expect(countsIn(await readGiven(source, { ...COUNTS, emitters: 'columns' }))).toEqual(
          transposed(rows),
        )
    })
  }
  it('the shorter axis is proposed as emitters', async () => {
    expect((await previewSource(bytesSource(fileOf('<u2 2-D C'), 'a.npy'))).answer).toMatchObject({
      emitters: 'rows',
    })
    const tall = npyFile('<u2', '4, 2', itemBytes('<u2', [1, 2, 3, 4, 5, 6, 7, 8]))
    expect((await previewSource(bytesSource(tall, 'a.npy'))).answer).toMatchObject({ emitters: 'columns' })
  })
  it('one dimension asks what the numbers are; unit and bin are asked for', async () => {
    const preview = await previewSource(bytesSource(fileOf('version 2'), 'a.npy'))
    expect(preview.questions.map((q) => q.key)).toEqual(['content'])
    const rising = await previewSource(bytesSource(fileOf('ticks <i8'), 'a.npy'))
    expect(rising.questions.map((q) => q.key)).toEqual(['content', 'timeUnit'])
    const table = await previewSource(bytesSource(fileOf('<u2 2-D C'), 'a.npy'))
    expect(table.questions.map((q) => q.key)).toEqual(['binSeconds'])
  })
})

it('sizes as Python 2 wrote them', async () => {
  const source = bytesSource(npyFile('<i4', '3L,', itemBytes('<i4', [1, 2, 3])), 'a.npy')
  expect(countsIn(await readGiven(source, COUNTS))).toEqual([[1, 2, 3]])
})

describe('refused with byte and advice', () => {
  const REFUSED: readonly (readonly [string, string])[] = [
    ['structured', 'byte 10: structured arrays are not read. Save one field as a plain array.'],
    ['complex', 'type “<c16” is not read; integers, booleans and real numbers are. Convert with astype().'],
    ['text', 'type “<U2” is not read'],
    ['0-D', 'the array has 0 dimensions; one or two are read. Reshape it before saving.'],
    ['3-D', 'the array has 3 dimensions; one or two are read.'],
    ['empty', 'the array is empty. Save an array with data.'],
  ]
  for (const [word, sentence] of REFUSED) {
    it(word, async () => {
      expect(problemIn(await readGiven(bytesSource(fileOf(word), 'a.npy'), COUNTS))).toContain(sentence)
    })
  }
  const data = itemBytes('<i4', [1, 2, 3])
  const good = npyFile('<i4', '3,', data)
  const CASES: readonly (readonly [string, Uint8Array, string])[] = [
    [
      'a lie of 2 GB',
      npyFile('<i4', '536870912,', data),
      'byte 128: the header promises 536870912 numbers of 4 bytes, the file holds 12 bytes of data. It is cut short or damaged; copy it again.',
    ],
    [
      'a lie beyond all numbers',
      npyFile('<i4', '999999999999999, 999999999999999', data),
      'the header promises',
    ],
    ['cut in the data', good.slice(0, -1), 'the file holds 11 bytes of data. It is cut short'],
    [
      'bytes too many',
      Uint8Array.from([...good, 0]),
      'the file holds 13 bytes of data. It is cut short or damaged',
    ],
    [
      'cut in the header',
      good.slice(0, 40),
      'byte 8: the header claims 118 bytes; the file has 40. The file is damaged',
    ],
    [
      'cut in the magic',
      good.slice(0, 8),
      'byte 0: expected a NumPy array, which begins with \\x93NUMPY. Choose a .npy file.',
    ],
    [
      'version 9',
      good.map((b, i) => (i === 6 ? 9 : b)),
      'byte 6: NumPy format version 9 is not known; save the array again',
    ],
    [
      'negative',
      npyFile('<i4', '3,', itemBytes('<i4', [1, -2, 3])),
      'byte 132: item (0, 1) is -2; counts are whole numbers of 0 or more, below 2^32. If a background was subtracted, use the counts from before.',
    ],
    [
      'NaN',
      npyFile('<f8', '3,', itemBytes('<f8', [1, 2, Number.NaN])),
      'byte 144: item (0, 2) is NaN; counts are whole numbers',
    ],
    [
      'fraction',
      npyFile('>f8', '2, 2', itemBytes('>f8', [1, 2, 3, 4.5])),
      'byte 152: item (1, 1) is 4.5; counts are whole numbers',
    ],
    [
      'too large',
      npyFile('<i8', '1,', itemBytes('<i8', [2 ** 33])),
      'item (0, 0) is 8589934592; counts are whole numbers of 0 or more, below 2^32.',
    ],
    ['no type', npyFile('<f1', '12,', data), 'type “<f1” is not read'],
    [
      'shape of words',
      npyFile('<i4', 'three', data),
      'the shape “(three)” is not a list of whole numbers. The file is damaged',
    ],
    ['negative shape', npyFile('<i4', '-3,', data), 'the shape “(-3,)” is not a list of whole numbers'],
    [
      'two headers run into each other',
      npyFile("<u4', 'fortran_order': False, 's', 'descr': '<i4", '3,', data),
      'the header is not a list of descr, fortran_order and shape. The file is damaged',
    ],
    ['an entry twice', npyFile("<u4', 'descr': '<i4", '3,', data), 'the header is not a list of descr'],
    ['an entry more', npyFile("<i4', 'more': '", '3,', data), 'the header is not a list of descr'],
    ['shape with holes', npyFile('<i4', ',,3', data), 'the shape “(,,3)” is not a list of whole numbers'],
  ]
  for (const [word, bytes, sentence] of CASES) {
    it(word, async () => {
      expect(
        problemIn(await readGiven(bytesSource(bytes, 'a.npy'), { ...COUNTS, emitters: 'rows' })),
      ).toContain(sentence)
    })
  }
  const TIMES: readonly (readonly [string, number[], string])[] = [
    ['backwards', [1, 3, 2], 'byte 144: item 2 (2) is earlier than the one before (3). Sort the array'],
    ['negative', [-1, 3, 4], 'byte 128: item 0 is -1; arrival times start at 0 or later. Shift the times.'],
    ['NaN', [1, Number.NaN, 4], 'byte 136: item 1 is NaN, not a time. Remove it before saving.'],
    ['infinite', [1, 2, Number.POSITIVE_INFINITY], 'byte 144: item 2 is Infinity, not a time.'],
    [
      'too large',
      [1, 2, 1e12],
      'byte 144: item 2 (1000000000000) is too large for a resolution of 1e-9 s. Choose a coarser unit.',
    ],
  ]
  for (const [word, times, sentence] of TIMES) {
    it(`arrival times ${word}`, async () => {
      const source = bytesSource(npyFile('<f8', '3,', itemBytes('<f8', times)), 'a.npy')
      expect(problemIn(await readGiven(source, { content: 'arrival', timeUnit: 's' }))).toContain(sentence)
    })
  }
  it('ticks beyond exact integers and fractional ticks', async () => {
    const ticks = { content: 'arrival', timeUnit: 'ticks', tickSeconds: 1e-9 }
    const view = new DataView(new ArrayBuffer(16))
    view.setBigUint64(8, 2n ** 63n, true)
    const large = bytesSource(npyFile('<u8', '2,', new Uint8Array(view.buffer)), 'a.npy')
    expect(problemIn(await readGiven(large, ticks))).toContain(
      'byte 136: item 1 (9223372036854776000) is too large',
    )
    const half = bytesSource(npyFile('<f8', '2,', itemBytes('<f8', [1, 1.5])), 'a.npy')
    expect(problemIn(await readGiven(half, ticks))).toContain('ticks are whole numbers, item 1 is 1.5')
  })
  it('a file that shrinks while it is read', async () => {
    const bytes = npyFile('<i4', '3,', data)
    const source: ByteSource = {
      name: 'a.npy',
      size: bytes.length,
      read: (start, end) =>
        Promise.resolve(bytes.subarray(start, Math.min(end, start >= 128 ? 132 : bytes.length))),
    }
    expect(problemIn(await readGiven(source, COUNTS))).toContain(
      'byte 132: the file ends before its data do.',
    )
  })
})

describe('write, then read', () => {
  const type = fc.constantFrom(
    '<i1',
    '<u1',
    '<i2',
    '>i2',
    '<u2',
    '>u2',
    '<i4',
    '>i4',
    '<u4',
    '>u4',
    '<i8',
    '>i8',
    '<f4',
    '>f4',
    '<f8',
    '>f8',
  )
  const table = fc
    .tuple(fc.integer({ min: 1, max: 6 }), fc.integer({ min: 1, max: 40 }))
    .chain(([rows, columns]) =>
      fc.array(
        fc.array(fc.integer({ min: 0, max: 127 }), { minLength: columns, maxLength: columns, size: 'max' }),
        {
          minLength: rows,
          maxLength: rows,
          size: 'max',
        },
      ),
    )
  it('tables of every type, order and axis', async () => {
    await fc.assert(
      fc.asyncProperty(table, type, fc.boolean(), async (rows, descr, fortran) => {
        const items = (fortran ? transposed(rows) : rows).flat()
        const file = npyFile(descr, `${rows.length}, ${rows[0].length}`, itemBytes(descr, items), fortran)
        const source = bytesSource(file, 'a.npy')
        expect(countsIn(await readGiven(source, { ...COUNTS, emitters: 'rows' }))).toEqual(rows)
        expect(countsIn(await readGiven(source, { ...COUNTS, emitters: 'columns' }))).toEqual(
          transposed(rows),
        )
      }),
      { seed: 41, numRuns: 150 },
    )
  })
  it('arrival ticks', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.integer({ min: 0, max: 2 ** 45 }), { minLength: 1, maxLength: 300, size: 'max' }),
        fc.constantFrom('<i8', '>i8', '<f8', '>f8'),
        async (gaps, descr) => {
          const ticks = gaps.slice().sort((a, b) => a - b)
          const source = bytesSource(npyFile(descr, `${ticks.length},`, itemBytes(descr, ticks)), 'a.npy')
          const answer = { content: 'arrival', timeUnit: 'ticks', tickSeconds: 1e-9 }
          expect(ticksIn(await readGiven(source, answer))).toEqual(ticks)
        },
      ),
      { seed: 42, numRuns: 100 },
    )
  })
  it('more items than a block, with a border inside a row', async () => {
    const columns = 100_003
    const values = new Uint8Array(3 * columns).map((_, i) => (i * 31) % 251)
    const source = bytesSource(npyFile('|u1', `3, ${columns}`, values), 'a.npy')
    const read = countsIn(await readGiven(source, COUNTS))
    for (let row = 0; row < 3; row++)
      expect(read[row]).toEqual(Array.from(values.subarray(row * columns, (row + 1) * columns)))
    const tall = bytesSource(npyFile('|u1', `${columns}, 3`, values, true), 'a.npy')
    expect(countsIn(await readGiven(tall, COUNTS))).toEqual(read)
  })
})
