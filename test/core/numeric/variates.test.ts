import { describe, expect, it } from 'vitest'
import { chiSquareUpperTail } from '../../../src/core/numeric/chi-square.ts'
import { gammaP } from '../../../src/core/numeric/gamma.ts'
import { lnNormalUpperTail, normalCdf } from '../../../src/core/numeric/normal.ts'
import { lnPoisson, poissonLowerTail, poissonUpperTail } from '../../../src/core/numeric/poisson.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import {
  exponentialVariate,
  gammaVariate,
  normalExcessVariate,
  normalVariate,
  poissonVariate,
} from '../../../src/core/numeric/variates.ts'
import { kolmogorovDistance, kolmogorovLimit } from './kolmogorov.ts'

/** Chance that one check here fails although the generator is right. Seeds are fixed, so a pass stays a pass. */
const FALSE_ALARM = 1e-4
const N = 100_000

function draws(seed: string, one: (random: ReturnType<typeof seededRandom>) => number): Float64Array {
  const random = seededRandom(seed)
  return Float64Array.from({ length: N }, () => one(random))
}

describe('continuous variates', () => {
  it('follow their own distribution functions (Kolmogorov distance)', () => {
    const limit = kolmogorovLimit(N, FALSE_ALARM)
    const normal = draws('normal', (random) => normalVariate(random, 3, 2))
    expect(kolmogorovDistance(normal, (x) => normalCdf((x - 3) / 2))).toBeLessThan(limit)
    const exponential = draws('exponential', (random) => exponentialVariate(random, 0.2))
    expect(kolmogorovDistance(exponential, (x) => -Math.expm1(-x / 0.2))).toBeLessThan(limit)
    for (const shape of [0.05, 0.5, 1, 2.7, 40]) {
      const gamma = draws(`gamma ${shape}`, (random) => gammaVariate(random, shape))
      expect(
        kolmogorovDistance(gamma, (x) => gammaP(shape, x)),
        `shape ${shape}`,
      ).toBeLessThan(limit)
    }
    for (const z0 of [-3, 0, 0.99, 1.01, 4, 300]) {
      const excess = draws(`excess ${z0}`, (random) => normalExcessVariate(random, z0))
      const cdf = (d: number): number => -Math.expm1(lnNormalUpperTail(z0 + d) - lnNormalUpperTail(z0))
      expect(kolmogorovDistance(excess, cdf), `z0 ${z0}`).toBeLessThan(limit)
    }
  })
})

describe('poissonVariate', () => {
  it('has the probabilities of the Poisson law, below and above the change of method (chi-square)', () => {
    for (const mean of [0.01, 1, 6.5, 9.999, 10, 14.2, 95, 3000]) {
      const counts = new Map<number, number>()
      for (const k of draws(`poisson ${mean}`, (random) => poissonVariate(random, mean))) {
        counts.set(k, (counts.get(k) ?? 0) + 1)
      }
      // Cells of at least ten expected draws; both tails in one cell each.
      let first = 0
      while (N * poissonLowerTail(first + 1, mean) < 10) first++
      let last = first
      while (N * poissonUpperTail(last + 1, mean) >= 10) last++
      let statistic = 0
      const cell = (from: number, to: number, chance: number): void => {
        let seen = 0
        for (const [k, times] of counts) if (k >= from && k <= to) seen += times
        statistic += (seen - N * chance) ** 2 / (N * chance)
      }
      cell(0, first, poissonLowerTail(first + 1, mean))
      for (let k = first + 1; k < last; k++) cell(k, k, Math.exp(lnPoisson(k, mean)))
      cell(last, Infinity, poissonUpperTail(last, mean))
      if (last === first) continue
      expect(chiSquareUpperTail(statistic, last - first), `mean ${mean}`).toBeGreaterThan(FALSE_ALARM)
    }
  })

  it('is 0 without a mean, and whole at a very large one', () => {
    const random = seededRandom(1)
    expect(poissonVariate(random, 0)).toBe(0)
    expect(poissonVariate(random, -2)).toBe(0)
    expect(poissonVariate(random, Number.NaN)).toBe(0)
    const large = poissonVariate(random, 1e8)
    expect(Number.isInteger(large)).toBe(true)
    // Eight standard deviations.
    expect(Math.abs(large - 1e8)).toBeLessThan(8e4)
  })
})
