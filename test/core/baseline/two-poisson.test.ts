import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fitTwoPoisson } from '../../../src/core/baseline/two-poisson.ts'
import { poissonCount, uniformSource } from './telegraph.ts'

const lnFactorial = (k: number): number => {
  let sum = 0
  for (let i = 2; i <= k; i++) sum += Math.log(i)
  return sum
}
const poisson = (k: number, mean: number): number => Math.exp(k * Math.log(mean) - mean - lnFactorial(k))
/** Expected histogram of a mixture: no noise, so the maximum of the likelihood is the mixture itself. */
const expected = (off: number, on: number, share: number, bins: number, length: number): number[] =>
  Array.from({ length }, (_, k) => bins * ((1 - share) * poisson(k, off) + share * poisson(k, on)))

describe('fitTwoPoisson', () => {
  it.each([
    [10, 100, 0.5],
    [10, 30, 0.2],
    [10, 200, 0.02],
    [1, 20, 0.9],
    [0.2, 8, 0.4],
    [50, 90, 0.98],
  ])('returns the mixture it is given: off %d, on %d, share %d', (off, on, share) => {
    const fit = fitTwoPoisson(expected(off, on, share, 60000, 400))
    expect(fit.status).toBe('ok')
    expect(Math.abs(fit.offMean / off - 1)).toBeLessThan(2e-3)
    expect(Math.abs(fit.onMean / on - 1)).toBeLessThan(2e-3)
    expect(Math.abs(fit.onShare - share)).toBeLessThan(1e-3)
  })

  it('states the log-likelihood a direct sum gives, and no nearby mixture is likelier', () => {
    const uniform = uniformSource(3)
    const histogram = new Float64Array(80)
    for (let i = 0; i < 5000; i++) histogram[poissonCount(uniform, uniform() < 0.3 ? 40 : 10)]++
    const fit = fitTwoPoisson(histogram)
    const direct = (off: number, on: number, share: number): number =>
      histogram.reduce(
        (sum, n, k) =>
          n === 0 ? sum : sum + n * Math.log((1 - share) * poisson(k, off) + share * poisson(k, on)),
        0,
      )
    const best = direct(fit.offMean, fit.onMean, fit.onShare)
    expect(fit.logLikelihood).toBeCloseTo(best, 3)
    for (const [a, b, c] of [
      [1.01, 1, 1],
      [0.99, 1, 1],
      [1, 1.01, 1],
      [1, 0.99, 1],
      [1, 1, 1.05],
      [1, 1, 0.95],
    ])
      expect(direct(fit.offMean * a, fit.onMean * b, fit.onShare * c)).toBeLessThan(best)
  })

  it('sees one level in one Poisson distribution', () => {
    // The criterion asks for ln N = 11 of log-likelihood where chance gives a few: false alarm below 1e-3 a record, seeded.
    for (const mean of [0.05, 1, 10, 300]) {
      const uniform = uniformSource(7)
      const histogram = new Float64Array(600)
      for (let i = 0; i < 40000; i++) histogram[poissonCount(uniform, mean)]++
      const fit = fitTwoPoisson(histogram)
      expect(fit.status).toBe('one-level')
      expect(fit.onShare).toBe(0)
      expect(fit.offMean).toBe(fit.onMean)
    }
  })

  it('says when two levels are there but cannot be told apart bin by bin', () => {
    expect(fitTwoPoisson(expected(1, 3, 0.5, 60000, 60)).status).toBe('not-separable')
  })

  it('stays finite for any histogram, keeps the means in order and within the counts', () => {
    fc.assert(
      fc.property(
        fc.array(fc.nat(1000), { maxLength: 60 }),
        fc.integer({ min: -5, max: 50 }),
        (bins, offset) => {
          const fit = fitTwoPoisson(bins, offset)
          for (const value of [fit.offMean, fit.onMean, fit.onShare, fit.logLikelihood])
            expect(Number.isFinite(value)).toBe(true)
          expect(fit.offMean).toBeLessThanOrEqual(fit.onMean)
          expect(fit.onMean).toBeLessThanOrEqual(Math.max(0, offset + bins.length))
          expect(fit.onShare).toBeGreaterThanOrEqual(0)
          expect(fit.onShare).toBeLessThanOrEqual(1)
        },
      ),
      { seed: 51, numRuns: 300 },
    )
  })

  it('takes the value of the first entry into account', () => {
    const all = expected(10, 100, 0.3, 60000, 300)
    const fit = fitTwoPoisson(all.slice(3), 3)
    expect(fit.onMean).toBeCloseTo(fitTwoPoisson(all).onMean, 3)
    expect(fitTwoPoisson([]).status).toBe('one-level')
  })
})
