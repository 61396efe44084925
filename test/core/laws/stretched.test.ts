import { describe, expect, it } from 'vitest'
import { exponential } from '../../../src/core/laws/exponential.ts'
import { power } from '../../../src/core/laws/power.ts'
import { stretched } from '../../../src/core/laws/stretched.ts'

describe('stretched', () => {
  it('is the exponential law at beta = 1', () => {
    const at = stretched.at([Math.log(0.5), 1], 0.03)
    const rate = exponential.at([2], 0.03)
    for (const t of [0.03, 0.4, 20]) {
      expect(at.logDensity(t)).toBeCloseTo(rate.logDensity(t), 12)
      expect(at.logSurvival(t)).toBeCloseTo(rate.logSurvival(t), 12)
    }
  })

  it('goes to a power law of alpha - 1 = beta (s/tau)^beta as beta goes to 0', () => {
    const beta = 1e-6
    const alpha = 1.6
    // (s/tau)^beta = (alpha - 1)/beta.
    const lnTau = Math.log(0.03) - Math.log((alpha - 1) / beta) / beta
    const at = stretched.at([lnTau, beta], 0.03)
    const pure = power.at([alpha], 0.03)
    for (const t of [0.03, 0.3, 30]) {
      expect(Math.abs(at.logSurvival(t) - pure.logSurvival(t))).toBeLessThan(2e-5)
      expect(Math.abs(at.logDensity(t) - pure.logDensity(t))).toBeLessThan(3e-5)
    }
  })

  it('reports tau in seconds', () => {
    expect(stretched.parametersOf([Math.log(3), 0.4])[0]).toBeCloseTo(3, 14)
    expect(stretched.coordinatesOf([3, 0.4])).toEqual([Math.log(3), 0.4])
  })
})
