import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { ByteSource } from '../../../src/core/read/byte-source.ts'
import { bytesSource } from '../../../src/core/read/byte-source.ts'
import type { ImportAnswer } from '../../../src/core/read/import-answer.ts'
import { previewSource } from '../../../src/core/read/import-preview.ts'
import { readSource } from '../../../src/core/read/read-source.ts'
import { countsIn, QUIET, readGiven, textSource, ticksIn } from './given-source.ts'
import { itemBytes, npyFile } from './npy-file.ts'

describe('write, then read', () => {
  const DIALECTS = [
    [',', '.'],
    [';', '.'],
    [';', ','],
    ['\t', '.'],
    ['\t', ','],
    [' ', '.'],
    ['  ', ','],
  ] as const
  it('tables of counts with or without header, comments and times', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.integer({ min: 1, max: 5 }).chain((width) =>
          fc.array(
            fc.array(fc.integer({ min: 0, max: 0xffffffff }), {
              minLength: width,
              maxLength: width,
              size: 'max',
            }),
            {
              minLength: 4,
              maxLength: 60,
              size: 'max',
            },
          ),
        ),
        fc.constantFrom(...DIALECTS),
        fc.constantFrom('\n', '\r\n', '\r'),
        fc.record({ header: fc.boolean(), comment: fc.boolean(), bom: fc.boolean() }),
        async (rows, [delimiter, point], end, { header, comment, bom }) => {
          const names = ['time', ...rows[0].map((_, i) => `dot${i + 1}`)].join(delimiter)
          const body = rows.map((row, i) =>
            [(3 + i * 0.005).toFixed(3).replace('.', point), ...row].join(delimiter),
          )
          const lines = [...(comment ? ['# made for a test'] : []), ...(header ? [names] : []), ...body]
          const source = textSource((bom ? '\uFEFF' : '') + lines.join(end) + end)
          const outcome = await readGiven(source, { timeUnit: 's' })
          expect(countsIn(outcome)).toEqual(rows[0].map((_, column) => rows.map((row) => row[column])))
          if (!outcome.ok) return
          const { record } = outcome.records[0]
          expect(record.kind === 'trace' && [record.binSeconds, record.startSeconds]).toEqual([
            expect.closeTo(0.005, 12),
            3,
          ])
        },
      ),
      { seed: 71, numRuns: 200 },
    )
  })
  it('missing rows come back as gaps of the right places', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc
          .array(fc.boolean(), { minLength: 20, maxLength: 80, size: 'max' })
          .filter((kept) => kept.filter(Boolean).length * 4 > kept.length * 3),
        async (kept) => {
          const text = kept.flatMap((keep, i) => (keep ? [`${i * 2},${i + 1}`] : [])).join('\n')
          const first = kept.indexOf(true)
          const last = kept.lastIndexOf(true)
          const outcome = await readGiven(textSource(`time (ms),counts\n${text}\n`))
          const expected = kept.map((keep, i) => (keep ? i + 1 : 0)).slice(first, last + 1)
          expect(countsIn(outcome)).toEqual([expected])
          if (!outcome.ok) return
          const { record } = outcome.records[0]
          const missing = expected.filter((count) => count === 0).length
          const covered = expected.map((count) => (count === 0 ? 0 : 255))
          expect(record.kind === 'trace' && record.coverage && Array.from(record.coverage)).toEqual(
            missing === 0 ? null : covered,
          )
          expect(outcome.notes.join(' ').includes(`${missing} rows are missing`)).toBe(missing > 0)
        },
      ),
      { seed: 72, numRuns: 150 },
    )
  })
  it('arrival times with decimals', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.integer({ min: 0, max: 10 ** 13 }), { minLength: 1, maxLength: 200, size: 'max' }),
        fc.integer({ min: 1, max: 6 }),
        async (some, decimals) => {
          const ticks = some.slice().sort((a, b) => a - b)
          const rows = ticks.map((tick) => {
            const digits = String(tick).padStart(decimals + 1, '0')
            return `${digits.slice(0, -decimals)}.${digits.slice(-decimals)}`
          })
          const outcome = await readGiven(textSource(`arrival (ms)\n${rows.join('\n')}`))
          expect(ticksIn(outcome)).toEqual(ticks)
          expect(outcome.ok && outcome.notes.join(' ')).not.toContain('rounded')
        },
      ),
      { seed: 73, numRuns: 150 },
    )
  })
})

describe('stopping', () => {
  const TEXT = Array.from({ length: 700_000 }, (_, i) => `${i / 1000},${i % 9}`).join('\n')
  it('text in the middle keeps nothing', async () => {
    const source = textSource(`time (s),n\n${TEXT}`)
    expect(source.size).toBeGreaterThan(4 << 20)
    const { answer } = await previewSource(source)
    let calls = 0
    const outcome = await readSource(source, answer as ImportAnswer, {
      onProgress: () => {},
      shouldStop: () => ++calls > 1,
    })
    expect(outcome).toEqual({
      ok: false,
      stopped: true,
      problem: { sentence: 'Reading was stopped; nothing was kept.', file: '', line: null, byte: null },
    })
    expect(countsIn(await readSource(source, answer as ImportAnswer, QUIET))[0].length).toBe(700_000)
  })
  it('an array in the middle keeps nothing', async () => {
    const source = bytesSource(npyFile('|u1', '600000,', new Uint8Array(600_000)), 'a.npy')
    const { answer } = await previewSource(source)
    let calls = 0
    const full = { ...answer, content: 'counts', binSeconds: 1 } as ImportAnswer
    const outcome = await readSource(source, full, { onProgress: () => {}, shouldStop: () => ++calls > 2 })
    expect(outcome).toMatchObject({ ok: false, stopped: true })
  })
})

describe('reading never takes more than the file has', () => {
  it('asks for no byte twice in a row and none beyond the end', async () => {
    const bytes = npyFile(
      '<f8',
      '300000,',
      itemBytes(
        '<f8',
        Array.from({ length: 300_000 }, (_, i) => i),
      ),
    )
    let most = 0
    const source: ByteSource = {
      name: 'a.npy',
      size: bytes.length,
      read: (start, end) => {
        if (start < 0 || end > bytes.length || start > end) throw new Error(`asked for ${start} to ${end}`)
        most = Math.max(most, end - start)
        return Promise.resolve(bytes.subarray(start, end))
      },
    }
    expect(ticksIn(await readGiven(source, { timeUnit: 'ms' })).length).toBe(300_000)
    expect(most).toBeLessThanOrEqual(4 << 20)
  })
  it('errors of the source itself are not taken for errors of the data', async () => {
    const source: ByteSource = { name: 'a', size: 10, read: () => Promise.reject(new Error('disk gone')) }
    await expect(previewSource(source)).rejects.toThrow('disk gone')
  })
  it('memory refused by the engine is said in words', async () => {
    const source: ByteSource = {
      ...bytesSource(npyFile('|u1', '3,', new Uint8Array(3)), 'a.npy'),
      read: () => Promise.reject(new RangeError('Array buffer allocation failed')),
    }
    const answer = {
      kind: 'npy',
      member: null,
      content: 'counts',
      timeUnit: null,
      tickSeconds: null,
      binSeconds: 1,
      emitters: 'rows',
    } as const
    expect(await readSource(source, answer, QUIET)).toMatchObject({
      ok: false,
      problem: {
        sentence: '“a.npy”: there is not enough memory for it. Split the file or close other tabs.',
      },
    })
  })
})
