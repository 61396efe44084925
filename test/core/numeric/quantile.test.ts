import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { median, quantile } from '../../../src/core/numeric/quantile.ts'

describe('quantile', () => {
  it('interpolates as type 7 of Hyndman and Fan (Am. Stat. 50, 361 (1996))', () => {
    // R: quantile(c(1, 3, 4, 10), c(0, .1, .25, .5, .9, 1))
    const values = [10, 1, 4, 3]
    for (const [p, expected] of [
      [0, 1],
      [0.1, 1.6],
      [0.25, 2.5],
      [0.5, 3.5],
      [0.9, 8.2],
      [1, 10],
    ]) {
      expect(quantile(values, p)).toBeCloseTo(expected, 12)
    }
    expect(values).toEqual([10, 1, 4, 3])
  })

  it('of one value is that value; of none there is none', () => {
    expect(quantile([7], 0.3)).toBe(7)
    expect(quantile([], 0.5)).toBeNaN()
    expect(median([])).toBeNaN()
  })

  it('stays between the extremes and grows with p', () => {
    const values = fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 40 })
    fc.assert(
      fc.property(
        values,
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (v, p, q) => {
          const [low, high] = [quantile(v, Math.min(p, q)), quantile(v, Math.max(p, q))]
          expect(low).toBeLessThanOrEqual(high + 1e-9)
          expect(low).toBeGreaterThanOrEqual(Math.min(...v) - 1e-9)
          expect(high).toBeLessThanOrEqual(Math.max(...v) + 1e-9)
        },
      ),
      { seed: 20_115 },
    )
  })
})

describe('median', () => {
  it('is the middle, or half way between the two middles', () => {
    expect(median([5, 1, 9])).toBe(5)
    expect(median(Uint16Array.of(8, 2, 4, 100))).toBe(6)
  })
})
