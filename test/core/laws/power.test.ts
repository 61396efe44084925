import { describe, expect, it } from 'vitest'
import { power } from '../../../src/core/laws/power.ts'

describe('power', () => {
  it('has the closed form of Clauset, Shalizi and Newman 2009', () => {
    const at = power.at([2.5], 3)
    for (const t of [3, 4, 70]) {
      expect(at.logDensity(t)).toBeCloseTo(Math.log((1.5 / 3) * (t / 3) ** -2.5), 13)
      expect(at.logSurvival(t)).toBeCloseTo(Math.log((t / 3) ** -1.5), 13)
    }
  })

  it('gives no duration a chance at or below alpha = 1', () => {
    for (const alpha of [1, 0.4]) {
      const at = power.at([alpha], 1)
      expect(at.logDensity(2)).toBe(Number.NEGATIVE_INFINITY)
      expect(at.logSurvival(2)).toBe(0)
      expect(at.logSurvival(Infinity)).toBe(0)
    }
  })

  it('starts at the maximum likelihood of continuous dwells', () => {
    // 1 + n / sum ln(t/s), Clauset et al. equation 3.1, by hand: ln 2 + 2 ln 4 + ln 8 = 8 ln 2.
    expect(power.start([2, 4, 8], [1, 2, 1], 1)[0]).toBeCloseTo(1 + 4 / (8 * Math.LN2), 13)
  })
})
