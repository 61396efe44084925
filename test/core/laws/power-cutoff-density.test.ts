import { describe, expect, it } from 'vitest'
import { exponential } from '../../../src/core/laws/exponential.ts'
import { power } from '../../../src/core/laws/power.ts'
import { powerCutoffDensity } from '../../../src/core/laws/power-cutoff-density.ts'
import { gammaQ } from '../../../src/core/numeric/gamma.ts'

describe('powerCutoffDensity', () => {
  it('is the power law at kappa = 0 and the exponential law at alpha = 0', () => {
    const pure = power.at([1.7], 0.03)
    const uncut = powerCutoffDensity.at([1.7, 0], 0.03)
    const rate = exponential.at([2], 0.03)
    const flat = powerCutoffDensity.at([0, 2], 0.03)
    for (const t of [0.03, 0.05, 1, 30]) {
      expect(uncut.logDensity(t)).toBe(pure.logDensity(t))
      expect(uncut.logSurvival(t)).toBe(pure.logSurvival(t))
      expect(flat.logDensity(t)).toBeCloseTo(rate.logDensity(t), 12)
      expect(flat.logSurvival(t)).toBeCloseTo(rate.logSurvival(t), 12)
    }
  })

  it('is a cut gamma law below alpha = 1', () => {
    const at = powerCutoffDensity.at([0.2, 3], 0.1)
    for (const t of [0.1, 0.5, 4]) {
      expect(Math.exp(at.logSurvival(t))).toBeCloseTo(gammaQ(0.8, 3 * t) / gammaQ(0.8, 0.3), 12)
    }
  })

  it('reaches the power law as kappa^(alpha - 1), without a step', () => {
    // ln E_alpha(x) + ln(alpha - 1) goes as (alpha - 1) Gamma(1 - alpha) x^(alpha - 1): 0.5 * Gamma(-0.5) = -sqrt(pi).
    const [alpha, shortest, t] = [1.5, 0.03, 0.03]
    const pure = power.at([alpha], shortest).logDensity(t)
    for (const kappa of [1e-8, 1e-10, 1e-12, 1e-14, 1e-20]) {
      const gain = powerCutoffDensity.at([alpha, kappa], shortest).logDensity(t) - pure
      expect(gain / Math.sqrt(Math.PI * kappa * shortest), `kappa ${kappa}`).toBeCloseTo(1, 3)
    }
  })

  it('needs a cutoff at or below alpha = 1, and is smooth across it with one', () => {
    for (const alpha of [1, 0.5, -1])
      expect(powerCutoffDensity.at([alpha, 0], 1).logDensity(2)).toBe(-Infinity)
    const value = (alpha: number): number => powerCutoffDensity.at([alpha, 0.01], 0.03).logDensity(2)
    const h = 1e-6
    expect(Math.abs(value(1 + h) + value(1 - h) - 2 * value(1))).toBeLessThan(1e-10)
  })
})
