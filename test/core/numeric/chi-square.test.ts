import { describe, expect, it } from 'vitest'
import { chiSquareQuantile, chiSquareUpperTail } from '../../../src/core/numeric/chi-square.ts'
import intervals from '../../reference/intervals.json' with { type: 'json' }
import reference from '../../reference/special-functions.json' with { type: 'json' }

describe('chiSquareQuantile', () => {
  it('agrees with SciPy to 1e-13', () => {
    for (const [p, df, expected] of reference.chiSquare) {
      // p next to 1 was rounded before either side saw it: a relative change of 1e-16 / (1 - p) in the tail.
      const tolerance = 1e-13 + 2e-16 / (1 - p)
      expect(Math.abs(chiSquareQuantile(p, df) / expected - 1), `p = ${p}, df ${df}`).toBeLessThan(tolerance)
    }
  })

  it('gives the critical values of the boundary mixture (Self and Liang 1987)', () => {
    for (const { alpha, crit, chi2_1 } of intervals.half_mixture_critical) {
      expect(chiSquareQuantile(1 - alpha, 1)).toBeCloseTo(chi2_1, 11)
      expect(chiSquareQuantile(1 - 2 * alpha, 1)).toBeCloseTo(crit, 11)
    }
  })

  it('gives the exact interval of an exponential mean (Proschan 1963 data, 12 intervals)', () => {
    const { mle, exact } = intervals.aircondit_mean
    expect((2 * 12 * mle) / chiSquareQuantile(0.975, 24)).toBeCloseTo(exact[0], 9)
    expect((2 * 12 * mle) / chiSquareQuantile(0.025, 24)).toBeCloseTo(exact[1], 9)
  })
})

describe('chiSquareUpperTail', () => {
  it('is e^(-x/2) for two degrees of freedom, and 1 at and below 0', () => {
    for (const x of [0.01, 1, 30, 900]) expect(chiSquareUpperTail(x, 2) / Math.exp(-x / 2)).toBeCloseTo(1, 12)
    expect(chiSquareUpperTail(0, 3)).toBe(1)
    expect(chiSquareUpperTail(-1, 3)).toBe(1)
  })
})
