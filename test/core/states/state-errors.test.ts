import { describe, expect, it } from 'vitest'
import { poissonLowerTail, poissonUpperTail } from '../../../src/core/numeric/poisson.ts'
import { stateErrors } from '../../../src/core/states/state-errors.ts'
import { crossingThreshold } from '../../../src/core/states/threshold-rules.ts'
import reference from '../../reference/threshold-rules.json' with { type: 'json' }
import { levelledOf } from './plain-tally.ts'

const constant = (off: number, on: number, binSeconds = 0.01) => ({
  levelled: levelledOf([0, 1], { offCounts: off, onCounts: on, binSeconds }),
  perBin: Float64Array.of(off, off),
})

describe('stateErrors', () => {
  // Rates in kcps, bin in ms; threshold, p0, p1, spurious on bins in 10 min half off, artefact cutoff (s); two digits.
  it.each([
    [1, 5, 5, 13, 2.0e-3, 3.1e-3, 121, 1.6],
    [1, 5, 10, 25, 4.7e-5, 3.5e-5, 1.4, 289],
    [1, 10, 2, 8, 1.1e-3, 7.8e-4, 165, 2.6],
    [1, 10, 5, 20, 3.5e-7, 4.8e-7, 0.02, 1.0e4],
    [1, 20, 1, 7, 8.3e-5, 2.6e-4, 25, 3.9],
    [1, 20, 2, 13, 2.1e-7, 2.1e-7, 0.03, 9.5e3],
    [0.5, 3, 10, 14, 7.0e-4, 4.1e-4, 21, 25],
    [0.5, 3, 20, 28, 2.3e-6, 1.5e-6, 0.03, 1.4e4],
  ])('off %d on %d kcps, %d ms bins', (off, on, ms, threshold, p0, p1, spurious, cutoff) => {
    expect(crossingThreshold(off * ms, on * ms)).toBe(threshold)
    const { levelled, perBin } = constant(off * ms, on * ms, ms / 1000)
    const errors = stateErrors(Float64Array.of(threshold), levelled, perBin)
    const near = (value: number, printed: number): void =>
      expect(Math.abs(value / printed - 1)).toBeLessThan(0.05)
    near(errors.falseOnPerBin[0], p0)
    near(errors.falseOffPerBin[0], p1)
    near(errors.artefactCutoffOnSeconds[0], cutoff)
    expect(errors.artefactCutoffOffSeconds[0]).toBe(ms / 1000 / errors.falseOnPerBin[0])
    expect(Math.abs((300 / (ms / 1000)) * errors.falseOnPerBin[0] - spurious)).toBeLessThan(
      Math.max(0.05 * spurious, 0.006),
    )
  })

  it('agrees with tails computed elsewhere and with the incomplete gamma function', () => {
    for (const { mean, threshold, atLeast, below } of reference.poissonTails) {
      const { levelled, perBin } = constant(mean, mean)
      const errors = stateErrors(Float64Array.of(threshold), levelled, perBin)
      expect(errors.falseOnPerBin[0] / atLeast).toBeCloseTo(1, 11)
      expect(errors.falseOffPerBin[0] / below).toBeCloseTo(1, 11)
    }
    const thresholds = Float64Array.from({ length: 200 }, (_, t) => t - 3)
    const { levelled, perBin } = constant(9.3, 81.2)
    const errors = stateErrors(thresholds, levelled, perBin)
    thresholds.forEach((c, t) => {
      expect(errors.falseOnPerBin[t]).toBeCloseTo(poissonUpperTail(c, 9.3), 13)
      expect(errors.falseOffPerBin[t]).toBeCloseTo(poissonLowerTail(c, 81.2), 13)
    })
  })

  it('averages over a moving baseline as a sum over all bins does', () => {
    const perBin = Float64Array.from({ length: 5000 }, (_, i) => 20 + 8 * Math.sin(i / 300) + i / 1000)
    const offCounts = perBin.reduce((a, b) => a + b, 0) / perBin.length
    const levelled = levelledOf(perBin, { offCounts, onCounts: offCounts + 80 })
    const thresholds = Float64Array.of(30, 45, 55)
    const errors = stateErrors(thresholds, levelled, perBin)
    thresholds.forEach((c, t) => {
      let p0 = 0
      let p1 = 0
      for (const b of perBin) {
        const k = Math.ceil(c + b - offCounts)
        p0 += poissonUpperTail(k, b) / perBin.length
        p1 += poissonLowerTail(k, b + 80) / perBin.length
      }
      // The threshold jumps by whole counts with the baseline; 64 groups sample these steps to a few per cent.
      expect(Math.abs(errors.falseOnPerBin[t] / p0 - 1)).toBeLessThan(0.05)
      expect(Math.abs(errors.falseOffPerBin[t] / p1 - 1)).toBeLessThan(0.05)
    })
  })

  it('leaves gaps out, and has no cutoff where the chance underflows', () => {
    const perBin = Float64Array.of(10, 10, 500)
    const levelled = levelledOf([0, 0, 0], { gaps: Uint8Array.of(0, 0, 1), offCounts: 10, onCounts: 2000 })
    const errors = stateErrors(Float64Array.of(15, 900), levelled, perBin)
    expect(errors.falseOnPerBin[0]).toBeCloseTo(poissonUpperTail(15, 10), 14)
    expect(errors.falseOnPerBin[1]).toBe(0)
    expect(errors.artefactCutoffOffSeconds[1]).toBe(Number.POSITIVE_INFINITY)
    expect(errors.artefactCutoffOnSeconds[0]).toBe(Number.POSITIVE_INFINITY)
  })
})
