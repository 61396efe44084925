import { describe, expect, it } from 'vitest'
import { suggestedBin } from '../../../src/core/photons/suggested-bin.ts'

describe('suggestedBin', () => {
  it.each([
    // Narrowest bins of a 600 s record by hand from D = 2 ln(600 / D) / (sqrt l1 - sqrt l0)^2, given with 3 digits: 19.7, 14.0,
    // 5.0, 2.1, 0.84, 0.39 ms; each rounds up to the width beside it.
    [500, 3000, 0.02],
    [1000, 5000, 0.02],
    [1000, 10000, 0.005],
    [1000, 20000, 0.005],
    [2000, 50000, 0.001],
    [2000, 100000, 0.0005],
  ])('gives the rounded width for %d -> %d counts per second', (off, on, expected) => {
    expect(suggestedBin(off, on, 600).seconds).toBe(expected)
  })

  it('leaves one wrong bin at most by the bound it uses, but for the 1 % of rounding', () => {
    for (const [off, on, record] of [
      [100, 900, 60],
      [1000, 4000, 3600],
      [0, 500, 10],
    ]) {
      const { seconds, reason } = suggestedBin(off, on, record)
      const bound = Math.exp((-seconds * (Math.sqrt(on) - Math.sqrt(off)) ** 2) / 2)
      expect((record / seconds) * bound).toBeLessThanOrEqual(1.2)
      expect(reason).toMatch(/kcps/)
    }
  })

  it('says so when there are no two levels, or when too few bins would be left', () => {
    expect(suggestedBin(1000, 1000, 600)).toEqual({
      seconds: 0.01,
      reason: 'No two levels to separate (off 1 kcps, on 1 kcps); 10 ms is the usual starting width.',
    })
    expect(suggestedBin(Number.NaN, 5, 600).seconds).toBe(0.01)
    expect(suggestedBin(1000, 1010, 10).reason).toMatch(/hardly separable/)
  })
})
