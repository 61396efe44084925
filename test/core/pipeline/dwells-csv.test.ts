import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { dwellTableOf } from '../../../src/core/dwells/dwell-table-of.ts'
import { csvText, DWELLS_HEADER, dwellsCsv } from '../../../src/core/pipeline/dwells-csv.ts'
import { hostileText } from '../../session/any-session.ts'

/** A plain reader of RFC 4180 text with the given separator. */
function readCsv(text: string, separator = ','): string[][] {
  const rows: string[][] = [[]]
  let cell = ''
  let quoted = false
  for (let i = 0; i < text.length; i++) {
    const one = text[i]
    if (quoted) {
      if (one !== '"') cell += one
      else if (text[i + 1] === '"') {
        cell += '"'
        i++
      } else quoted = false
    } else if (one === '"' && cell === '') quoted = true
    else if (one === separator || one === '\n') {
      rows[rows.length - 1].push(cell)
      cell = ''
      if (one === '\n') rows.push([])
    } else cell += one
  }
  return rows.slice(0, -1)
}

const errors = { falseOnPerBin: 1e-6, falseOffPerBin: 1e-6 }
const sequence = {
  starts: Uint32Array.of(0, 3, 7),
  states: Uint8Array.of(0, 1, 0),
  bins: 9,
  method: 'threshold' as const,
}
const axis = { binSeconds: 0.1, startSeconds: 0 }
const codes = Uint8Array.of(0, 0, 0, 0, 0, 1, 1, 1, 1)
const whole = dwellTableOf(sequence, axis, codes, 'all', errors)

/** What starts a formula in a spreadsheet. */
const FORMULA = /^[\s\0]*[=+\-@\uff0b\uff0d\uff1d\uff20]/

describe('csvText', () => {
  it.each([
    ['plain', 'plain'],
    ['a,b', '"a,b"'],
    ['say "x"', '"say ""x"""'],
    ['=1+1', "'=1+1"],
    ['-5', "'-5"],
    ['@SUM(A1)', "'@SUM(A1)"],
    [' =1', "' =1"],
    ['a;=1', '"a;=1"'],
    ['', ''],
  ])('%j becomes %j', (text, expected) => {
    expect(csvText(text)).toBe(expected)
  })

  it('is one cell that starts no formula, whatever the name and whether commas, semicolons or tabs separate', () => {
    fc.assert(
      fc.property(
        fc.oneof(
          hostileText,
          fc.string({
            unit: fc.constantFrom('=', '+', '-', '@', '"', ',', ';', '\t', '\r', '\n', ' ', 'a', '\uff1d'),
          }),
        ),
        fc.constantFrom(',', ';', '\t'),
        (text, separator) => {
          const rows = readCsv(`${csvText(text)}${separator}x\n`, separator)
          expect(rows).toHaveLength(1)
          expect(rows[0]).toHaveLength(2)
          expect(rows[0][0]).not.toMatch(FORMULA)
          expect([text, `'${text}`]).toContain(rows[0][0])
        },
      ),
      { seed: 151, numRuns: 3000 },
    )
  })
})

describe('dwellsCsv', () => {
  it('writes each dwell with its units and without artefacts of binary fractions', () => {
    const rows = readCsv(dwellsCsv('a', whole))
    expect(rows[0].join(',')).toBe(DWELLS_HEADER)
    expect(rows.slice(1).map((row) => row.slice(0, 8))).toEqual([
      ['a', '0', '0.3', 'off', 'reference', 'reference', '0', 'start-unseen'],
      ['a', '0.3', '0.4', 'on', 'reference', 'driven', '0', 'complete'],
      ['a', '0.7', '0.2', 'off', 'driven', 'driven', '0', 'end-unseen'],
    ])
  })

  it('pieces of a dwell carry the age at which they are taken up', () => {
    const rows = readCsv(dwellsCsv('a', dwellTableOf(sequence, axis, codes, 'driven', errors), false))
    expect(rows.map((row) => [row[1], row[2], row[6], row[7]])).toEqual([
      ['0', '0.3', '0', 'start-unseen'],
      ['0.3', '0.2', '0', 'end-unseen'],
      ['0.5', '0.2', '0.2', 'complete'],
      ['0.7', '0.2', '0', 'end-unseen'],
    ])
  })

  it('leaves the chance empty where it does not exist', () => {
    const rows = readCsv(dwellsCsv('a', dwellTableOf(sequence, axis, null, 'all'), false))
    expect(rows.map((row) => row[8])).toEqual(['', '', ''])
  })

  it('has as many columns in every row as in the header, whatever the name', () => {
    fc.assert(
      fc.property(hostileText, (name) => {
        for (const row of readCsv(dwellsCsv(name, whole)))
          expect(row).toHaveLength(DWELLS_HEADER.split(',').length)
      }),
      { seed: 152 },
    )
  })
})
