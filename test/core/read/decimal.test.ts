import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { decimalsOf, parseDecimal } from '../../../src/core/read/decimal.ts'

const encoder = new TextEncoder()
function parsed(text: string, comma = false): number {
  const bytes = encoder.encode(`;${comma ? text.replace('.', ',') : text};`)
  return parseDecimal(bytes, 1, bytes.length - 1, comma ? 44 : 46)
}

describe('parseDecimal rounds as Number does', () => {
  it('on numbers that are hard to round', () => {
    const HARD = [
      '0',
      '-0',
      '1',
      '.5',
      '5.',
      '+3',
      '-3.25',
      '0.1',
      '0.30000000000000004',
      '9007199254740993',
      '9007199254740992.9999',
      '123456789012345',
      '1234567890123456',
      '999999999999999e22',
      '1e22',
      '1e23',
      '1e-22',
      '1e-23',
      '8.5e-300',
      '4.9e-324',
      '2.4703282292062327e-324',
      '2.4703282292062328e-324',
      '1.7976931348623157e308',
      '1.7976931348623159e308',
      '1e999',
      '1e-999',
      '2.2250738585072011e-308',
      '0.000000000000000000000000000001',
      '000000000000000000000001.5',
      '1E5',
      '1e+5',
      '7.2057594037927933e16',
      '0.1e1',
      '1.0000000000000002220446049250313080847263336181640625',
      '1.00000000000000011102230246251565404236316680908203125',
      '1.00000000000000011102230246251565404236316680908203124',
    ]
    for (const text of HARD) {
      expect([text, parsed(text)]).toEqual([text, Number(text)])
      expect([text, parsed(text, true)]).toEqual([text, Number(text)])
    }
  })
  it('on any digits, point and exponent', () => {
    fc.assert(
      fc.property(
        fc.stringMatching(/^[+-]?(\d{1,25}\.?\d{0,25}|\.\d{1,25})([eE][+-]?\d{1,3})?$/),
        fc.boolean(),
        (text, comma) => Object.is(parsed(text, comma), Number(text)),
      ),
      { seed: 61, numRuns: 20_000 },
    )
  })
  it('on doubles printed in any precision', () => {
    fc.assert(
      fc.property(
        fc.double({ noNaN: true, noDefaultInfinity: true }),
        fc.integer({ min: 1, max: 30 }),
        (x, digits) => {
          const text = x.toPrecision(digits)
          return Object.is(parsed(text), Number(text))
        },
      ),
      { seed: 62, numRuns: 5_000 },
    )
  })
})

describe('what is not a number', () => {
  it('is NaN', () => {
    for (const text of [
      '',
      '.',
      '+',
      '-',
      'e5',
      '1e',
      '1e+',
      '1.2.3',
      '1,5',
      'nan',
      'NaN',
      'inf',
      'Infinity',
      '0x10',
      '1_0',
      '--1',
      '1-',
      ' 1',
      '1 ',
      '1a',
      '٣',
    ])
      expect([text, parsed(text)]).toEqual([text, Number.NaN])
  })
})

describe('decimalsOf', () => {
  it('counts places of the last digit', () => {
    const CASES = [
      ['1', 0],
      ['1.', 0],
      ['0.25', 2],
      ['0,125', 3],
      ['1.5e-3', 4],
      ['1e-9', 9],
      ['1.25e1', 1],
      ['1e5', 0],
      ['words', 0],
    ] as const
    for (const [text, decimals] of CASES) expect([text, decimalsOf(text)]).toEqual([text, decimals])
  })
})
