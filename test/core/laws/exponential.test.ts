import { describe, expect, it } from 'vitest'
import { exponential } from '../../../src/core/laws/exponential.ts'

describe('exponential', () => {
  it('has a constant hazard, whatever the shortest duration', () => {
    for (const shortest of [0.01, 1]) {
      const at = exponential.at([4], shortest)
      for (const t of [1, 2, 9]) expect(Math.exp(at.logDensity(t) - at.logSurvival(t))).toBeCloseTo(4, 12)
    }
  })

  it('starts at the maximum likelihood of continuous dwells, one over the mean excess', () => {
    expect(exponential.start([1.5, 3], [2, 1], 1)).toEqual([1])
    expect(exponential.parametersOf([4])).toEqual([0.25])
    expect(exponential.coordinatesOf([0.25])).toEqual([4])
  })
})
