import { describe, expect, it } from 'vitest'
import { exponential } from '../../../src/core/laws/exponential.ts'
import { power } from '../../../src/core/laws/power.ts'
import { powerCutoffSurvival } from '../../../src/core/laws/power-cutoff-survival.ts'

describe('powerCutoffSurvival', () => {
  it('is the power law at kappa = 0 and the exponential law at alpha = 1', () => {
    const pure = power.at([1.7], 0.03)
    const uncut = powerCutoffSurvival.at([1.7, 0], 0.03)
    const rate = exponential.at([2], 0.03)
    const flat = powerCutoffSurvival.at([1, 2], 0.03)
    for (const t of [0.03, 0.05, 1, 300]) {
      expect(uncut.logDensity(t)).toBeCloseTo(pure.logDensity(t), 12)
      expect(uncut.logSurvival(t)).toBe(pure.logSurvival(t))
      expect(flat.logDensity(t)).toBeCloseTo(rate.logDensity(t), 12)
      expect(flat.logSurvival(t)).toBe(rate.logSurvival(t))
    }
  })

  it('has the hazard (alpha - 1)/t + kappa', () => {
    const at = powerCutoffSurvival.at([1.5, 0.2], 0.03)
    for (const t of [0.03, 0.4, 12]) {
      expect(Math.exp(at.logDensity(t) - at.logSurvival(t))).toBeCloseTo(0.5 / t + 0.2, 11)
    }
  })

  it('reports no cutoff as an infinite time, and takes that back', () => {
    expect(powerCutoffSurvival.parametersOf([1.5, 0])).toEqual([1.5, Number.POSITIVE_INFINITY])
    expect(powerCutoffSurvival.coordinatesOf([1.5, Number.POSITIVE_INFINITY])).toEqual([1.5, 0])
    expect(powerCutoffSurvival.parametersOf([1.5, 0.25])).toEqual([1.5, 4])
  })
})
