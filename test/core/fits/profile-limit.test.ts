import { describe, expect, it } from 'vitest'
import { profileLimit } from '../../../src/core/fits/profile-limit.ts'

const WIDE = { low: -1e6, high: 1e6 }

function oneDimensional(f: (x: number) => number, top: number, error: number, range = WIDE) {
  return {
    f,
    range,
    otherRange: null,
    best: { value: top, other: 0, height: f(top) },
    error,
    otherError: 1,
    otherSlope: 0,
  }
}

describe('profileLimit', () => {
  it('is top -/+ z errors on a parabola, at the first look', () => {
    let looks = 0
    const f = (x: number): number => {
      looks++
      return -0.5 * ((x - 3) / 0.2) ** 2
    }
    const problem = oneDimensional(f, 3, 0.2)
    looks = 0
    expect(profileLimit(problem, 1.96, 1)).toBeCloseTo(3.392, 9)
    expect(looks).toBe(1)
    expect(profileLimit(problem, 1.96, -1)).toBeCloseTo(2.608, 9)
  })

  it.each([0.02, 0.3, 5])(
    'meets the level on a skewed dome when the error is guessed as %f of a unit',
    (error) => {
      // ln L of an exponential rate from 10 events in unit time each.
      const f = (x: number): number => (x > 0 ? 10 * Math.log(x) - 10 * x : Number.NEGATIVE_INFINITY)
      const problem = oneDimensional(f, 1, error)
      for (const side of [-1, 1] as const) {
        const x = profileLimit(problem, 1.96, side) ?? Number.NaN
        expect(Math.sqrt(2 * (f(1) - f(x)))).toBeCloseTo(1.96, 2)
        expect(Math.sign(x - 1)).toBe(side)
      }
    },
  )

  it('maximises the other coordinate along a curved ridge', () => {
    const f = (x: number, y: number): number => -0.5 * x * x - 50 * (y - x * x) ** 2
    const problem = {
      f,
      range: WIDE,
      otherRange: WIDE,
      best: { value: 0, other: 0, height: 0 },
      error: 1,
      otherError: 0.1,
      otherSlope: 0,
    }
    expect(profileLimit(problem, 1.96, 1)).toBeCloseTo(1.96, 2)
  })

  it('is null where the profile flattens before the level, and at a bound', () => {
    const flat = (x: number): number => -1 + Math.exp(-x * x)
    expect(profileLimit(oneDimensional(flat, 0, 1), 1.96, 1)).toBeNull()
    const steep = (x: number): number => -x * x
    expect(profileLimit(oneDimensional(steep, 0, 1, { low: 0, high: 9 }), 1.96, -1)).toBeNull()
    expect(profileLimit(oneDimensional(steep, 0, 1, { low: -0.5, high: 9 }), 1.96, -1)).toBeNull()
  })

  it('finds the end where the likelihood stops being finite', () => {
    const f = (x: number): number => (x < 1 ? -0.1 * x * x : Number.NaN)
    expect(profileLimit(oneDimensional(f, 0, 1), 1.96, 1)).toBeCloseTo(1, 5)
  })
})
