import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { betaRegularised, inverseBetaRegularised } from '../../../src/core/numeric/beta.ts'
import { exactSum } from '../../../src/core/numeric/sum.ts'
import reference from '../../reference/special-functions.json' with { type: 'json' }

const SEED = 20_112

/** P(K >= a) for a binomial count of n = a + b - 1, by multiplying out: what I_x(a, b) is for whole a and b. */
function binomialUpperTail(a: number, n: number, x: number): number {
  const terms: number[] = []
  let choose = 1
  for (let k = 0; k <= n; k++) {
    if (k >= a) terms.push(choose * x ** k * (1 - x) ** (n - k))
    choose *= (n - k) / (k + 1)
  }
  return exactSum(terms)
}

describe('betaRegularised', () => {
  it('agrees with SciPy to 1e-13, up to 60000 trials', () => {
    for (const [a, b, x, expected] of reference.betaIncomplete) {
      expect(Math.abs(betaRegularised(a, b, x) / expected - 1), `${a}, ${b}, ${x}`).toBeLessThan(1e-13)
    }
  })

  it('equals the binomial tail for whole numbers', () => {
    for (const [a, b, x] of [
      [1, 1, 0.3],
      [3, 5, 0.2],
      [10, 4, 0.6],
      [20, 21, 0.45],
      [2, 30, 0.9],
    ]) {
      expect(betaRegularised(a, b, x)).toBeCloseTo(binomialUpperTail(a, a + b - 1, x), 13)
    }
  })

  it('mirrors: I_x(a, b) + I_1-x(b, a) = 1', () => {
    const size = fc.double({ min: 0.1, max: 2000, noNaN: true })
    fc.assert(
      fc.property(size, size, fc.double({ min: 0.001, max: 0.999, noNaN: true }), (a, b, x) => {
        // 1 - x is rounded: the density, at most about sqrt(a + b), turns that into an error of the value.
        expect(Math.abs(betaRegularised(a, b, x) + betaRegularised(b, a, 1 - x) - 1)).toBeLessThan(1e-13)
      }),
      { seed: SEED, numRuns: 300 },
    )
  })

  it('has plain ends and no number outside', () => {
    expect([betaRegularised(2, 3, 0), betaRegularised(2, 3, 1)]).toEqual([0, 1])
    for (const [a, b, x] of [
      [0, 1, 0.5],
      [1, -1, 0.5],
      [1, 1, -0.1],
      [1, 1, 1.1],
      [1, 1, Number.NaN],
    ]) {
      expect(betaRegularised(a, b, x)).toBeNaN()
    }
  })
})

describe('inverseBetaRegularised', () => {
  it('agrees with SciPy to 1e-12', () => {
    for (const [a, b, p, expected] of reference.betaInverse) {
      expect(Math.abs(inverseBetaRegularised(a, b, p) / expected - 1), `${a}, ${b}, ${p}`).toBeLessThan(1e-12)
    }
  })

  it('has the closed form p^(1/a) at b = 1, also for tiny answers', () => {
    for (const [a, p] of [
      [2, 0.3],
      [0.5, 1e-9],
      [0.1, 1e-20],
    ]) {
      expect(inverseBetaRegularised(a, 1, p) / p ** (1 / a)).toBeCloseTo(1, 11)
    }
    expect([inverseBetaRegularised(2, 3, 0), inverseBetaRegularised(2, 3, 1)]).toEqual([0, 1])
    expect(inverseBetaRegularised(2, 3, 1.5)).toBeNaN()
  })
})
