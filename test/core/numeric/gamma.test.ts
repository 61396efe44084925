import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  gammaP,
  gammaQ,
  inverseGammaP,
  lnGamma,
  lnGammaOnePlus,
  lnGammaP,
  lnGammaQ,
  lnPoissonTerm,
} from '../../../src/core/numeric/gamma.ts'
import reference from '../../reference/special-functions.json' with { type: 'json' }

const SEED = 20_110

describe('lnGamma', () => {
  it('agrees with mpmath to 1e-14 of its value, also beside its zeros and poles', () => {
    for (const [x, expected] of reference.lnGamma) {
      expect(Math.abs(lnGamma(x) / expected - 1), `x = ${x}`).toBeLessThan(1e-14)
    }
  })

  it('is exact at factorials, infinite at the poles', () => {
    let factorial = 1
    for (let n = 1; n <= 20; n++) {
      expect(Math.abs(lnGamma(n + 1) - Math.log(factorial * n))).toBeLessThan(1e-13)
      factorial *= n
    }
    expect(Math.abs(lnGamma(1))).toBe(0)
    expect(Math.abs(lnGamma(2))).toBe(0)
    for (const pole of [0, -1, -7]) expect(lnGamma(pole)).toBe(Number.POSITIVE_INFINITY)
    expect(lnGamma(Number.NaN)).toBeNaN()
  })

  it('obeys Gamma(x + 1) = x Gamma(x), across the joints of its three formulas', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-3, max: 60, noNaN: true }), (x) => {
        expect(Math.abs(lnGamma(x + 1) - lnGamma(x) - Math.log(x))).toBeLessThan(2e-13)
      }),
      { seed: SEED, numRuns: 500 },
    )
  })

  it('goes to -gamma s beside 1', () => {
    expect(lnGammaOnePlus(1e-12) / 1e-12).toBeCloseTo(-0.5772156649015329, 11)
    expect(Math.abs(lnGammaOnePlus(0))).toBe(0)
    expect(Math.abs(lnGammaOnePlus(0.00999999999) - lnGammaOnePlus(0.01000000001))).toBeLessThan(1.2e-11)
  })
})

describe('lnGammaP and lnGammaQ', () => {
  it('agree with mpmath in both tails: 3e-14 of the logarithm or absolutely', () => {
    for (const [a, x, lnP, lnQ] of reference.lnGammaPQ) {
      const where = `a = ${a}, x = ${x}`
      expect(Math.abs(lnGammaP(a, x) - lnP), where).toBeLessThan(3e-14 * Math.max(1, Math.abs(lnP)))
      expect(Math.abs(lnGammaQ(a, x) - lnQ), where).toBeLessThan(3e-14 * Math.max(1, Math.abs(lnQ)))
    }
  })

  it('add up to one', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.05, max: 500, noNaN: true }),
        fc.double({ min: 0.01, max: 4, noNaN: true }),
        (a, ratio) => {
          expect(Math.abs(gammaP(a, a * ratio) + gammaQ(a, a * ratio) - 1)).toBeLessThan(1e-13)
        },
      ),
      { seed: SEED, numRuns: 500 },
    )
  })

  it('equal the exponential law at a = 1, far into the tail', () => {
    for (const x of [1e-12, 0.5, 3, 700]) {
      expect(lnGammaQ(1, x)).toBeCloseTo(-x, 10)
      expect(gammaP(1, x) / -Math.expm1(-x)).toBeCloseTo(1, 13)
    }
  })

  it('have plain ends and no number outside', () => {
    expect([gammaP(2, 0), gammaQ(2, 0)]).toEqual([0, 1])
    expect([gammaP(2, Infinity), gammaQ(2, Infinity)]).toEqual([1, 0])
    for (const [a, x] of [
      [0, 1],
      [-1, 1],
      [1, -1],
      [Number.NaN, 1],
      [1, Number.NaN],
    ]) {
      expect(lnGammaP(a, x)).toBeNaN()
      expect(lnGammaQ(a, x)).toBeNaN()
    }
  })
})

describe('lnPoissonTerm', () => {
  it('is the same on both sides of the change of formula at a = 20', () => {
    for (const x of [5, 19, 20, 21, 60]) {
      const direct = 20 * Math.log(x) - x - lnGamma(21)
      expect(Math.abs(lnPoissonTerm(20, x) - direct)).toBeLessThan(1e-13)
    }
  })
})

describe('inverseGammaP', () => {
  it('returns the probability it was asked for, in both tails', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.05, max: 1e4, noNaN: true }),
        fc.double({ min: -40, max: 0, noNaN: true }),
        fc.boolean(),
        (a, ln, upper) => {
          const tail = Math.exp(ln) / 2
          // An upper tail below the spacing of doubles at 1 cannot be asked for.
          if (upper && tail < 1e-12) return
          const x = inverseGammaP(a, upper ? 1 - tail : tail)
          if (x < 1e-290) return
          const got = upper ? gammaQ(a, x) : gammaP(a, x)
          // Asking for 1 - tail rounds the tail by half of 2^-53; ln x rounds the answer by a few eps times the slope.
          expect(Math.abs(got / tail - 1)).toBeLessThan(5e-12 + (upper ? 1.2e-16 / tail : 0))
        },
      ),
      { seed: SEED, numRuns: 500 },
    )
  })

  it('has plain ends and no number outside', () => {
    expect(inverseGammaP(3, 0)).toBe(0)
    expect(inverseGammaP(3, 1)).toBe(Number.POSITIVE_INFINITY)
    for (const [a, p] of [
      [0, 0.5],
      [1, -0.1],
      [1, 1.1],
      [1, Number.NaN],
    ])
      expect(inverseGammaP(a, p)).toBeNaN()
  })
})
