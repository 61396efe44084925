import { describe, expect, it } from 'vitest'
import {
  type ArrayAnswer,
  missingAnswers,
  type TextAnswer,
  unitSeconds,
} from '../../../src/core/read/import-answer.ts'
import { parseImportAnswer } from '../../../src/core/read/import-answer-schema.ts'

const TEXT: TextAnswer = {
  kind: 'text',
  delimiter: ',',
  decimalComma: false,
  headerLines: 1,
  columns: ['time', 'counts'],
  names: ['t', 'n'],
  timeUnit: null,
  tickSeconds: null,
  binSeconds: null,
}
const ARRAY: ArrayAnswer = {
  kind: 'npz',
  member: 'dots.npy',
  content: null,
  timeUnit: null,
  tickSeconds: null,
  binSeconds: null,
  emitters: 'rows',
}

describe('missingAnswers', () => {
  it('text', () => {
    expect(missingAnswers(TEXT)).toEqual(['timeUnit'])
    expect(missingAnswers({ ...TEXT, timeUnit: 'ms' })).toEqual([])
    expect(missingAnswers({ ...TEXT, timeUnit: 'ticks' })).toEqual(['timeUnit'])
    expect(missingAnswers({ ...TEXT, timeUnit: 'ticks', tickSeconds: Number.NaN })).toEqual(['timeUnit'])
    expect(missingAnswers({ ...TEXT, columns: ['counts', 'ignore'] })).toEqual(['binSeconds'])
    expect(missingAnswers({ ...TEXT, columns: ['counts'], binSeconds: -1 })).toEqual(['binSeconds'])
    expect(missingAnswers({ ...TEXT, columns: ['arrival', 'counts'] })).toEqual(['timeUnit'])
    expect(missingAnswers({ ...TEXT, columns: ['time', 'ignore'], timeUnit: 's' })).toEqual(['columns'])
  })
  it('arrays', () => {
    expect(missingAnswers(ARRAY)).toEqual(['content'])
    expect(missingAnswers({ ...ARRAY, content: 'arrival' })).toEqual(['timeUnit'])
    expect(missingAnswers({ ...ARRAY, content: 'counts' })).toEqual(['binSeconds'])
    expect(missingAnswers({ ...ARRAY, content: 'counts', binSeconds: 1 })).toEqual([])
  })
})

describe('unitSeconds', () => {
  it('ticks have the length given', () => {
    expect(unitSeconds({ timeUnit: 'ticks', tickSeconds: 4e-12 })).toBe(4e-12)
    expect(unitSeconds({ timeUnit: 'us', tickSeconds: 4e-12 })).toBe(1e-6)
    expect(unitSeconds({ timeUnit: null, tickSeconds: 1 })).toBeNull()
  })
})

describe('parseImportAnswer', () => {
  it('takes what was stored and nothing else', () => {
    for (const answer of [TEXT, ARRAY])
      expect(parseImportAnswer(JSON.parse(JSON.stringify(answer)))).toEqual({ ok: true, answer })
    for (const bad of [
      null,
      5,
      {},
      { ...TEXT, delimiter: '|' },
      { ...TEXT, columns: [] },
      { ...TEXT, binSeconds: 0 },
      { ...ARRAY, more: 1 },
    ]) {
      const parsed = parseImportAnswer(bad)
      expect(parsed.ok ? '' : parsed.problem).toMatch(/^The way to read the file is not valid at “/)
    }
  })
})
