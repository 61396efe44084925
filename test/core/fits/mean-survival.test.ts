import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { lnMeanSurvival, referenceSeconds } from '../../../src/core/fits/mean-survival.ts'
import { triangleNodes } from '../../../src/core/fits/triangle-nodes.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { power } from '../../../src/core/laws/power.ts'
import { plainMeanSurvival, TYPICAL } from './plain-likelihood.ts'

describe('lnMeanSurvival', () => {
  it.each(Object.values(LAWS))('agrees with the averaged survival of the $name law', (law) => {
    for (const edgeShare of [0, 0.4, 0.7, 1]) {
      const support = 1 + 2 * edgeShare
      const at = law.at(TYPICAL[law.name], support * 0.01)
      for (const m of [1, 2, 3, 4, 7, 30, 500]) {
        const slow = Math.log(plainMeanSurvival(at, m, edgeShare, 0.01, support))
        expect(Math.abs(lnMeanSurvival(at, m, 1 - 2 * edgeShare, 0.01, support * 0.01) - slow)).toBeLessThan(
          1e-9,
        )
      }
    }
  })

  it('is the closed form for the power law, also where the support begins inside the bin', () => {
    const at = power.at([1.5], 0.02)
    const closed = (m: number): number => 2 * Math.SQRT2 * (Math.sqrt(m) - Math.sqrt(m - 1))
    for (const m of [3, 4, 10, 1e4])
      expect(Math.exp(lnMeanSurvival(at, m, 0, 0.01, 0.02)) / closed(m)).toBeCloseTo(1, 10)
    // Support at 2 bins inside [1.5, 2.5]: half a bin at 1, half a bin of sqrt(2/t).
    const inside = 0.5 + 2 * Math.SQRT2 * (Math.sqrt(2.5) - Math.sqrt(2))
    expect(Math.exp(lnMeanSurvival(at, 2.5, 0, 0.01, 0.02))).toBeCloseTo(inside, 11)
  })

  it('falls from m to m + 1 by the mass of m', () => {
    const law = LAWS['log-normal']
    const at = law.at([-2, 1.5], 0.018)
    const nodes = triangleNodes([5], 0.2, 0.01, 0.018)
    let mass = 0
    for (let n = 0; n < nodes.seconds.length; n++)
      mass += nodes.weights[n] * Math.exp(at.logDensity(nodes.seconds[n]))
    const fall =
      Math.exp(lnMeanSurvival(at, 5, 0.2, 0.01, 0.018)) - Math.exp(lnMeanSurvival(at, 6, 0.2, 0.01, 0.018))
    expect(fall).toBeCloseTo(mass, 12)
  })

  it('never lies above zero and never rises', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1.01, max: 7, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (alpha, edgeShare) => {
          const reference = referenceSeconds({ edgeShare, binSeconds: 0.01 }, 1)
          const at = power.at([alpha], reference)
          let before = 0
          for (let m = 1; m < 40; m++) {
            const now = lnMeanSurvival(at, m, 1 - 2 * edgeShare, 0.01, reference)
            expect(now).toBeLessThanOrEqual(before + 1e-12)
            before = now
          }
        },
      ),
      { seed: 11, numRuns: 60 },
    )
  })
})

describe('referenceSeconds', () => {
  it('is the lowest true duration that can be seen as the shortest', () => {
    expect(referenceSeconds({ edgeShare: 0.5, binSeconds: 0.01 }, 3)).toBeCloseTo(0.02, 12)
    expect(referenceSeconds({ edgeShare: 0, binSeconds: 0.01 }, 3)).toBeCloseTo(0.01, 12)
  })

  it('stays above nothing', () => {
    expect(referenceSeconds({ edgeShare: 0, binSeconds: 0.01 }, 1)).toBeCloseTo(0.0005, 12)
  })
})
