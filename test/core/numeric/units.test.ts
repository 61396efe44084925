import { describe, expect, it } from 'vitest'
import { formatEstimate, roundTo, siDuration } from '../../../src/core/numeric/units.ts'

describe('roundTo', () => {
  it('ends where the uncertainty ends (rounding rule of the Particle Data Group)', () => {
    const rows: [number, number, string][] = [
      // The rule's own example: 0.827 +- 0.119 becomes 0.83 +- 0.12, 0.827 +- 0.367 becomes 0.8 +- 0.4.
      [0.827, 0.119, '0.83'],
      [0.827, 0.367, '0.8'],
      [1.52345, 0.042, '1.52'],
      [1.52345, 0.012, '1.523'],
      [1.52345, 0.97, '1.5'],
      [0.98765, 2, '1.0'],
      [12345, 800, '12300'],
      [5.301, 12, '5'],
      [-0.0721, 0.011, '−0.072'],
      [30, 8000, '30'],
    ]
    for (const [value, error, text] of rows) expect(roundTo(value, error), `${value} ± ${error}`).toBe(text)
  })

  it('keeps three digits without one, and powers of ten only for the far ends', () => {
    const rows: [number, string][] = [
      [0, '0'],
      [1.5, '1.50'],
      [0.012345, '0.0123'],
      [123.4, '123'],
      [98765, '98800'],
      [2.5e7, '2.50e7'],
      [1.2345e-7, '1.23e-7'.replace('-', '−')],
      [Infinity, '∞'],
      [-Infinity, '−∞'],
      [Number.NaN, 'not available'],
    ]
    for (const [value, text] of rows) expect(roundTo(value, null)).toBe(text)
    expect(roundTo(1.5, null, 2)).toBe('1.5')
    expect(roundTo(1.5, Infinity)).toBe('1.50')
  })
})

describe('siDuration', () => {
  it('picks the unit a reader expects', () => {
    const rows: [number | null, string][] = [
      [0.02, '20 ms'],
      [5.3, '5.3 s'],
      [600, '600 s'],
      [0.9996, '1 s'],
      [0.999, '999 ms'],
      [2.5e-6, '2.5 µs'],
      [1e-9, '1 ns'],
      [0, '0 s'],
      [Infinity, '∞'],
      [null, 'not available'],
      [Number.NaN, 'not available'],
      [-0.003, '−3 ms'],
    ]
    for (const [seconds, text] of rows) expect(siDuration(seconds)).toBe(text)
  })
})

describe('formatEstimate', () => {
  it('writes estimate and interval with the digits the interval allows', () => {
    expect(formatEstimate({ estimate: 1.5234, low: 1.441, high: 1.608, unit: '' })).toEqual({
      text: '1.52',
      interval: '[1.44, 1.61]',
    })
    expect(formatEstimate({ estimate: 5.34, low: 3.9, high: 8.1, unit: 's' })).toEqual({
      text: '5.3 s',
      interval: '[3.9, 8.1]',
    })
  })

  it('writes bounds, open ends and nothing', () => {
    expect(formatEstimate({ estimate: null, low: 3.14, high: null, unit: 's' }).text).toBe('> 3.1 s')
    expect(formatEstimate({ estimate: null, low: null, high: 0.25, unit: '' }).text).toBe('< 0.25')
    expect(formatEstimate({ estimate: 4, low: 2, high: null, unit: 's' }).interval).toBe('[2.0, ∞]')
    expect(formatEstimate({ estimate: 4, low: null, high: null, unit: 's' })).toEqual({
      text: '4.00 s',
      interval: '',
    })
    expect(formatEstimate({ estimate: null, low: null, high: null, unit: 's' }).text).toBe('not available')
  })
})
