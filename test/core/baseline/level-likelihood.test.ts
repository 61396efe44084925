import { describe, expect, it } from 'vitest'
import { levelLikelihood } from '../../../src/core/baseline/level-likelihood.ts'
import { poissonCount, uniformSource } from './telegraph.ts'

/** Every sequence of off and on, tried one after the other. */
function bestOfAll(counts: number[], off: number, signal: number): number {
  const charge = Math.log(counts.length)
  let best = Number.NEGATIVE_INFINITY
  for (let states = 0; states < 2 ** counts.length; states++) {
    let sum = 0
    counts.forEach((k, i) => {
      const on = (states >> i) & 1
      const before = i > 0 ? (states >> (i - 1)) & 1 : on
      const mean = off + on * signal
      sum += k * Math.log(mean) - mean - (on === before ? 0 : charge)
    })
    best = Math.max(best, sum)
  }
  return best
}

describe('levelLikelihood', () => {
  it('finds the best of all sequences', () => {
    for (let seed = 1; seed <= 20; seed++) {
      const uniform = uniformSource(seed)
      const counts = Array.from({ length: 11 }, () => poissonCount(uniform, uniform() < 0.5 ? 3 : 9))
      const found = levelLikelihood(Uint16Array.from(counts), null, 11, Float64Array.of(Math.log(3)), 6)
      expect(found.twoLevels).toBeCloseTo(bestOfAll(counts, 3, 6), 9)
      expect(found.oneLevel).toBeCloseTo(
        counts.reduce((sum, k) => sum + k * Math.log(3) - 3, 0),
        9,
      )
    }
  })

  it('adds nothing without signal, and passes over unusable bins', () => {
    const counts = Uint16Array.from([3, 3, 60000, 3])
    const unusable = Uint8Array.from([0, 0, 1, 0])
    const found = levelLikelihood(counts, unusable, 2, Float64Array.of(1, 1), 0)
    expect(found.twoLevels).toBe(found.oneLevel)
    expect(found.oneLevel).toBeCloseTo(9 - 3 * Math.E, 9)
  })
})
