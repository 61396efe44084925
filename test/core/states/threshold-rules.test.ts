import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { lnPoisson, poissonLowerTail, poissonUpperTail } from '../../../src/core/numeric/poisson.ts'
import {
  crossingThreshold,
  leastVarianceThreshold,
  sigmaThreshold,
  thresholdByRule,
} from '../../../src/core/states/threshold-rules.ts'
import reference from '../../reference/threshold-rules.json' with { type: 'json' }

/** Two Poisson levels in rounded expected numbers of bins. */
function mixture(off: number, on: number, onShare: number, bins: number) {
  const counts = Float64Array.from({ length: 130 }, (_, k) =>
    Math.round(bins * ((1 - onShare) * Math.exp(lnPoisson(k, off)) + onShare * Math.exp(lnPoisson(k, on)))),
  )
  return { first: 0, counts }
}

describe('crossingThreshold', () => {
  it('is the first count that is as likely on as off', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 300, noNaN: true }),
        fc.double({ min: 1.01, max: 50, noNaN: true }),
        (off, ratio) => {
          const on = off * ratio
          const c = crossingThreshold(off, on)
          const excess = (k: number): number => lnPoisson(k, on) - lnPoisson(k, off)
          expect(excess(c)).toBeGreaterThanOrEqual(-1e-9 * on)
          expect(excess(c - 1)).toBeLessThan(1e-9 * on)
        },
      ),
      { seed: 6, numRuns: 300 },
    )
  })

  it('sits at its limits', () => {
    expect(crossingThreshold(10, 60)).toBe(28)
    expect(crossingThreshold(0, 12)).toBe(1)
    expect(crossingThreshold(7.5, 7.5)).toBe(8)
    expect(crossingThreshold(5, 4)).toBeNaN()
    expect(crossingThreshold(Number.NaN, 4)).toBeNaN()
  })
})

describe('sigmaThreshold', () => {
  // Chance of "more than mean + k standard deviations" for counts; two digits, checked against SciPy's Poisson tail.
  it.each([
    [0.2, [1.8e-2, 1.8e-2, 1.8e-2, 1.2e-3]],
    [1, [1.9e-2, 3.7e-3, 5.9e-4, 8.3e-5]],
    [5, [3.2e-2, 5.5e-3, 7.0e-4, 2.0e-5]],
    [20, [3.4e-2, 2.7e-3, 2.2e-4, 5.4e-6]],
    [100, [2.3e-2, 1.7e-3, 6.4e-5, 1.2e-6]],
  ])('lets through far more than a normal tail at a mean of %d', (mean, expected) => {
    const chances = [2, 3, 4, 5].map((k) => poissonUpperTail(sigmaThreshold(mean, k), mean))
    // Two digits printed: half a unit of the second, at most 1/20 of the value.
    chances.forEach((p, i) => expect(Math.abs(p / expected[i] - 1)).toBeLessThan(0.05))
  })

  it('is strictly above the level plus the deviations', () => {
    expect(sigmaThreshold(4, 2)).toBe(9)
    expect(sigmaThreshold(4, 1.99)).toBe(8)
    expect(sigmaThreshold(Number.NaN, 3)).toBeNaN()
  })
})

describe('leastVarianceThreshold', () => {
  it('agrees with the definition computed elsewhere and drifts into the rarer level', () => {
    for (const { onFraction, threshold, falseOff } of reference.leastVariance) {
      const found = leastVarianceThreshold(mixture(10, 60, onFraction, 1e9))
      expect(found).toBe(threshold)
      expect(poissonLowerTail(found, 60)).toBeCloseTo(falseOff, 10)
    }
    expect(poissonLowerTail(leastVarianceThreshold(mixture(10, 60, 0.98, 1e9)), 60)).toBeCloseTo(0.38, 2)
  })

  it('takes the middle of an empty stretch', () => {
    const counts = new Float64Array(41)
    counts[10] = 500
    counts[40] = 500
    expect(leastVarianceThreshold({ first: 100, counts })).toBe(125)
  })

  it('equals the slow definition', () => {
    fc.assert(
      fc.property(
        fc.array(fc.nat(20), { minLength: 2, maxLength: 30, size: 'max' }),
        fc.integer({ min: -9, max: 9 }),
        (list, first) => {
          const counts = Float64Array.from(list)
          const between = list.map((_, c) => {
            const side = (from: number, to: number): [number, number] => {
              let n = 0
              let sum = 0
              for (let k = from; k < to; k++) {
                n += list[k]
                sum += k * list[k]
              }
              return [n, sum]
            }
            const [n0, s0] = side(0, c)
            const [n1, s1] = side(c, list.length)
            return n0 === 0 || n1 === 0 ? -1 : n0 * n1 * (s1 / n1 - s0 / n0) ** 2
          })
          const best = Math.max(...between)
          const found = leastVarianceThreshold({ first, counts })
          if (best <= 0) expect(found).toBeNaN()
          else expect(between[found - first]).toBeCloseTo(best, 6)
        },
      ),
      { seed: 7, numRuns: 300 },
    )
  })
})

describe('thresholdByRule', () => {
  const histogram = mixture(10, 60, 0.5, 60000)
  const levels = { offCounts: 10, onCounts: 60 }
  const choices = { rule: 'crossing', sigmas: 3, handCounts: null } as const

  it('follows the rule asked for', () => {
    expect(thresholdByRule(choices, levels, histogram).counts).toBe(28)
    expect(thresholdByRule({ ...choices, rule: 'sigma' }, levels, histogram).counts).toBe(20)
    const split = thresholdByRule({ ...choices, rule: 'least-variance' }, levels, histogram)
    expect(split.counts).toBe(leastVarianceThreshold(histogram))
    expect(thresholdByRule({ ...choices, rule: 'hand', handCounts: 33 }, levels, histogram)).toEqual({
      counts: 33,
      rule: 'hand',
      message: 'Set by hand.',
    })
  })

  it('falls back and says so', () => {
    const unset = thresholdByRule({ ...choices, rule: 'hand' }, levels, histogram)
    expect(unset.rule).toBe('crossing')
    expect(unset.message).toMatch(/^No threshold was set by hand\. .*Check it by eye\.$/)
    const oneLevel = thresholdByRule(choices, { offCounts: 10, onCounts: 10 }, histogram)
    expect(oneLevel.rule).toBe('least-variance')
    expect(oneLevel.message).toMatch(/^Two separate levels were not found\./)
    const flat = thresholdByRule(
      choices,
      { offCounts: 5, onCounts: 5 },
      { first: 5, counts: Float64Array.of(40) },
    )
    expect(flat.counts).toBe(6)
    expect(flat.message).toContain('No threshold divides this record')
  })
})
