import { describe, expect, it } from 'vitest'
import { logNormal } from '../../../src/core/laws/log-normal.ts'
import { power } from '../../../src/core/laws/power.ts'

describe('logNormal', () => {
  it('is the plain log-normal law when hardly anything is cut', () => {
    const at = logNormal.at([1, 0.5], 1e-4)
    for (const t of [0.5, Math.E, 9]) {
      const z = (Math.log(t) - 1) / 0.5
      const plain = -Math.log(t * 0.5 * Math.sqrt(2 * Math.PI)) - 0.5 * z * z
      expect(at.logDensity(t)).toBeCloseTo(plain, 12)
    }
    expect(at.logSurvival(Math.E)).toBeCloseTo(-Math.LN2, 12)
  })

  it('imitates a power law of alpha - 1 = (ln s - ln median)/sigma^2 when its median runs off', () => {
    // Wide: over a decade the curvature 1/sigma^2 of ln f bends the line by (ln 10)^2/(2 sigma^2) < 0.003.
    const sigma = 30
    const alpha = 1.55
    const lnMedian = Math.log(0.03) - (alpha - 1) * sigma * sigma
    const at = logNormal.at([lnMedian, sigma], 0.03)
    const pure = power.at([alpha], 0.03)
    for (const t of [0.03, 0.1, 0.3])
      expect(Math.abs(at.logDensity(t) - pure.logDensity(t))).toBeLessThan(0.01)
  })

  it('stays smooth far off, where a difference of tails would be rounding noise', () => {
    // Third differences of a quadratic in ln t vanish; with cancelling tails of 1e8 they would be 1e-8.
    const at = logNormal.at([-5e5, 30], 0.03)
    const f = (i: number): number => at.logDensity(0.03 * Math.exp(0.01 + 0.1 * i)) + 0.1 * i
    expect(Math.abs(f(3) - 3 * f(2) + 3 * f(1) - f(0))).toBeLessThan(2e-11)
  })

  it('reports the median in seconds', () => {
    expect(logNormal.parametersOf([Math.log(2), 0.4])[0]).toBeCloseTo(2, 14)
    expect(logNormal.coordinatesOf([2, 0.4])).toEqual([Math.log(2), 0.4])
  })
})
