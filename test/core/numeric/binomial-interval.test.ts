import { describe, expect, it } from 'vitest'
import { betaRegularised } from '../../../src/core/numeric/beta.ts'
import { clopperPearson, wilson } from '../../../src/core/numeric/binomial-interval.ts'
import reference from '../../reference/special-functions.json' with { type: 'json' }

describe('clopperPearson and wilson', () => {
  it('agree with SciPy at 95 %', () => {
    for (const [x, n, low, high, scoreLow, scoreHigh] of reference.binomialLimits) {
      const exact = clopperPearson(x, n, 0.95)
      // SciPy finds its exact limits by root finding to about 1e-12.
      expect(Math.abs(exact.low - low), `${x} of ${n}`).toBeLessThan(2e-12)
      expect(Math.abs(exact.high - high), `${x} of ${n}`).toBeLessThan(2e-12)
      const score = wilson(x, n, 0.95)
      expect(Math.abs(score.low - scoreLow), `${x} of ${n}`).toBeLessThan(1e-14)
      expect(Math.abs(score.high - scoreHigh), `${x} of ${n}`).toBeLessThan(1e-14)
    }
  })

  it('gives the exact limits their defining tails, and one-sided ends', () => {
    const { low, high } = clopperPearson(7, 20, 0.9)
    expect(betaRegularised(7, 14, low)).toBeCloseTo(0.05, 12)
    expect(betaRegularised(8, 13, high)).toBeCloseTo(0.95, 12)
    // No success in n: the upper limit is 1 - (tail)^(1/n).
    expect(clopperPearson(0, 20, 0.95)).toEqual({ low: 0, high: expect.closeTo(1 - 0.025 ** (1 / 20), 12) })
    expect(clopperPearson(20, 20, 0.95).high).toBe(1)
    expect(wilson(0, 0, 0.95)).toEqual({ low: 0, high: 1 })
  })

  it('covers at least as often as it says, counted exactly for n = 12', () => {
    const choose = [1, 12, 66, 220, 495, 792, 924, 792, 495, 220, 66, 12, 1]
    for (let p = 0.02; p < 1; p += 0.049) {
      let covered = 0
      for (let x = 0; x <= 12; x++) {
        const { low, high } = clopperPearson(x, 12, 0.9)
        if (low <= p && p <= high) covered += choose[x] * p ** x * (1 - p) ** (12 - x)
      }
      expect(covered, `p = ${p}`).toBeGreaterThanOrEqual(0.9)
    }
  })
})
