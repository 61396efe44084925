import { describe, expect, it } from 'vitest'
import { edgeShare } from '../../../src/core/states/edge-share.ts'
import { statesAt } from '../../../src/core/states/states-at.ts'
import { levelledOf } from './plain-tally.ts'

describe('edgeShare', () => {
  it('is the fractional threshold for on, its complement for off, clipped', () => {
    const levels = { offCounts: 10, onCounts: 60 }
    expect(edgeShare(25, levels, 1)).toBeCloseTo(0.3, 14)
    expect(edgeShare(25, levels, 0)).toBeCloseTo(0.7, 14)
    expect(edgeShare(5, levels, 1)).toBe(0)
    expect(edgeShare(90, levels, 0)).toBe(0)
    expect(edgeShare(9, { offCounts: 9, onCounts: 9 }, 1)).toBe(0.5)
  })

  /** Share detected, and mean number of bins when detected, of an on time of t bins over all phases, without noise. */
  function detected(t: number, threshold: number): { share: number; meanBins: number } {
    const phases = 2000
    let found = 0
    let bins = 0
    for (let j = 0; j < phases; j++) {
      const from = 3 + (j + 0.5) / phases
      const counts = Array.from({ length: 12 }, (_, i) =>
        Math.round(100000 * Math.max(0, Math.min(i + 1, from + t) - Math.max(i, from))),
      )
      const { starts, states } = statesAt(levelledOf(Uint32Array.from(counts)), threshold)
      const run = states.indexOf(1)
      if (run < 0) continue
      found++
      bins += starts[run + 1] - starts[run]
    }
    return { share: found / phases, meanBins: bins / found }
  }

  // Closed forms: min(1, 1 + t - 2 theta) detected below one bin, t + 1 - 2 theta bins on average above.
  it.each([
    [0.3, 0.4, 0.8, 3.7],
    [0.7, 0.8, 0.4, 2.9],
  ])('at a share of %d finds short on times and their lengths as it should', (theta, short, share, mean) => {
    const threshold = 100000 * theta
    expect(edgeShare(threshold, { offCounts: 0, onCounts: 100000 }, 1)).toBeCloseTo(theta, 12)
    // 2000 equally spaced phases: one phase is 5e-4.
    expect(Math.abs(detected(short, threshold).share - share)).toBeLessThan(1e-3)
    expect(Math.abs(detected(3.3, threshold).meanBins - mean)).toBeLessThan(1e-3)
  })
})
