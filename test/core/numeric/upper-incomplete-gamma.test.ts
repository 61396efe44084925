import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { integrate } from '../../../src/core/numeric/gauss-legendre.ts'
import {
  lnExpIntegral,
  lnLowerGamma,
  lnUpperGamma,
} from '../../../src/core/numeric/upper-incomplete-gamma.ts'
import special from '../../reference/special-functions.json' with { type: 'json' }
import reference from '../../reference/upper-incomplete-gamma.json' with { type: 'json' }

const SEED = 20_111

/** ln E_p(x) the slow way: integral over u = ln t of e^((1 - p) u - x e^u), panel by panel until nothing is left. */
function slowLnExpIntegral(p: number, x: number): number {
  let sum = 0
  for (let u = 0; u < 60; u += 0.05) {
    const part = integrate((v) => Math.exp((1 - p) * v - x * Math.expm1(v)), u, u + 0.05, 12)
    sum += part
    if (u > 1 && part < 1e-18 * sum) break
  }
  return Math.log(sum) - x
}

describe('lnUpperGamma', () => {
  it('equals the closed forms', () => {
    const orders = [
      [0, 1],
      [0, 0.5],
      [0, 10],
      [-1, 1],
      [0.5, 1],
      [-0.5, 1],
      [-1.5, 1],
    ]
    expect(orders).toHaveLength(reference.closed_forms.length)
    for (const [i, [s, x]] of orders.entries()) {
      const { what, value } = reference.closed_forms[i]
      expect(Math.abs(Math.exp(lnUpperGamma(s, x)) / Number(value) - 1), what).toBeLessThan(2e-14)
    }
  })

  it('agrees with the outside table to 2e-14', () => {
    for (const row of reference.rows) {
      const [alpha, x] = [Number(row.alpha), Number(row.x)]
      const where = `alpha = ${alpha}, x = ${x}`
      const got = Math.exp(lnUpperGamma(1 - alpha, x))
      expect(Math.abs(got / Number(row.Gamma_upper_1_minus_alpha_x) - 1), where).toBeLessThan(2e-14)
      expect(Math.abs(lnExpIntegral(alpha, x) - Number(row.ln_E)), where).toBeLessThan(2e-14 * Math.max(1, x))
    }
  })

  it('has plain ends and no number outside', () => {
    expect(lnUpperGamma(-1, Infinity)).toBe(Number.NEGATIVE_INFINITY)
    for (const [s, x] of [
      [1, 0],
      [1, -1],
      [Number.NaN, 1],
      [Infinity, 1],
      [1, Number.NaN],
    ]) {
      expect(lnUpperGamma(s, x)).toBeNaN()
    }
  })

  it('and the lower function add up to Gamma(s)', () => {
    const whole = Math.exp(lnLowerGamma(2.5, 1.7)) + Math.exp(lnUpperGamma(2.5, 1.7))
    expect(whole).toBeCloseTo(0.75 * Math.sqrt(Math.PI), 13)
  })
})

describe('lnExpIntegral', () => {
  it('agrees with mpmath to 5e-15 of the logarithm or absolutely, from x = 1e-100 to 600', () => {
    for (const [p, x, expected] of special.lnExpIntegral) {
      const error = Math.abs(lnExpIntegral(p, x) - expected)
      expect(error, `p = ${p}, x = ${x}`).toBeLessThan(5e-15 * Math.max(1, Math.abs(expected)))
    }
  })

  it('agrees with slow quadrature, over all joints of its formulas', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -3, max: 9, noNaN: true }),
        fc.double({ min: -9, max: 3, noNaN: true }),
        (p, lnX) => {
          const x = Math.exp(lnX)
          expect(Math.abs(lnExpIntegral(p, x) - slowLnExpIntegral(p, x))).toBeLessThan(1e-13 * Math.max(1, x))
        },
      ),
      { seed: SEED, numRuns: 300 },
    )
  })

  it('is smooth in the order where its formulas meet', () => {
    for (const joint of [0.5, 1, 1.5, 2, 2.5, 6]) {
      for (const x of [1e-9, 0.01, 1.4]) {
        const h = 1e-7
        const bend = lnExpIntegral(joint + h, x) + lnExpIntegral(joint - h, x) - 2 * lnExpIntegral(joint, x)
        // The true second derivative times h^2 is below 1e-12 here (|d2 lnE/dp2| < (ln x)^2 < 450).
        expect(Math.abs(bend), `p = ${joint}, x = ${x}`).toBeLessThan(1e-11)
      }
    }
  })

  it('reaches x = 0 continuously: -ln(p - 1) above order 1, Infinity below', () => {
    expect(lnExpIntegral(1.5, 0)).toBe(-Math.log(0.5))
    expect(Math.abs(lnExpIntegral(1.5, 1e-40) + Math.log(0.5))).toBeLessThan(1e-14)
    expect(lnExpIntegral(1, 0)).toBe(Number.POSITIVE_INFINITY)
    expect(lnExpIntegral(2, -1)).toBeNaN()
    expect(lnExpIntegral(2, Infinity)).toBe(Number.NEGATIVE_INFINITY)
  })
})
