import { describe, expect, it } from 'vitest'
import { garwood, lnPoisson, poissonLowerTail, poissonUpperTail } from '../../../src/core/numeric/poisson.ts'
import { exactSum } from '../../../src/core/numeric/sum.ts'
import limits from '../../reference/garwood.json' with { type: 'json' }
import reference from '../../reference/special-functions.json' with { type: 'json' }

/** Share of a normal law within one standard deviation: the level of the rows named 68. */
const ONE_SIGMA = 0.682689492137086

describe('lnPoisson', () => {
  it('agrees with mpmath to 1e-14, up to a million counts', () => {
    for (const [k, mean, expected] of reference.lnPoisson) {
      expect(Math.abs(lnPoisson(k, mean) - expected), `k = ${k}`).toBeLessThan(
        1e-14 * Math.max(1, Math.abs(expected)),
      )
    }
  })

  it('knows what cannot happen', () => {
    expect(lnPoisson(0, 0)).toBe(0)
    expect(lnPoisson(3, 0)).toBe(Number.NEGATIVE_INFINITY)
    expect(lnPoisson(-1, 2)).toBe(Number.NEGATIVE_INFINITY)
  })
})

describe('poissonUpperTail and poissonLowerTail', () => {
  it('equal the sum of the probabilities', () => {
    for (const mean of [0.2, 3.7, 40, 250]) {
      for (const c of [1, 2, 5, 30, 45, 260, 330]) {
        const below = exactSum(Array.from({ length: c }, (_, k) => Math.exp(lnPoisson(k, mean))))
        const above = exactSum(Array.from({ length: 900 }, (_, i) => Math.exp(lnPoisson(c + i, mean))))
        expect(Math.abs(poissonLowerTail(c, mean) - below), `c = ${c}, mean ${mean}`).toBeLessThanOrEqual(
          2e-12 * below,
        )
        expect(Math.abs(poissonUpperTail(c, mean) - above), `c = ${c}, mean ${mean}`).toBeLessThanOrEqual(
          2e-12 * above,
        )
      }
    }
  })

  it('give the false-on and false-off rates of the two-Poisson table', () => {
    // Exact values at the crossing threshold, two digits: off -> on kcps, bin (ms), c, p0, p1.
    const rows = [
      [1, 5, 5, 13, 2.0e-3, 3.1e-3],
      [1, 5, 10, 25, 4.7e-5, 3.5e-5],
      [1, 10, 2, 8, 1.1e-3, 7.8e-4],
      [1, 10, 5, 20, 3.5e-7, 4.8e-7],
      [1, 20, 1, 7, 8.3e-5, 2.6e-4],
      [1, 20, 2, 13, 2.1e-7, 2.1e-7],
      [0.5, 3, 10, 14, 7.0e-4, 4.1e-4],
      [0.5, 3, 20, 28, 2.3e-6, 1.5e-6],
    ]
    for (const [off, on, bin, c, p0, p1] of rows) {
      expect(
        Math.abs(poissonUpperTail(c, off * bin) / p0 - 1),
        `p0, ${off} -> ${on}, ${bin} ms`,
      ).toBeLessThan(0.03)
      expect(Math.abs(poissonLowerTail(c, on * bin) / p1 - 1), `p1, ${off} -> ${on}, ${bin} ms`).toBeLessThan(
        0.03,
      )
    }
  })

  it('have plain ends', () => {
    expect([poissonUpperTail(0, 3), poissonLowerTail(0, 3)]).toEqual([1, 0])
    expect([poissonUpperTail(2, 0), poissonLowerTail(2, 0)]).toEqual([0, 1])
  })
})

describe('garwood', () => {
  it('equals the limits computed with R to 1e-12', () => {
    const close = (got: number, expected: number): void =>
      expect(Math.abs(got - expected)).toBeLessThan(1e-12 * Math.max(1, expected))
    for (const row of limits.rows) {
      const wide = garwood(row.n, 0.95)
      close(wide.low, row.low95)
      close(wide.high, row.high95)
      const narrow = garwood(row.n, ONE_SIGMA)
      close(narrow.low, row.low68)
      close(narrow.high, row.high68)
    }
  })

  it('is defined by its tails', () => {
    for (const n of [0, 1, 4, 37]) {
      const { low, high } = garwood(n, 0.9)
      if (n > 0) expect(poissonUpperTail(n, low)).toBeCloseTo(0.05, 13)
      expect(poissonLowerTail(n + 1, high)).toBeCloseTo(0.05, 13)
    }
  })
})
