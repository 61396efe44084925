import { describe, expect, it } from 'vitest'
import {
  erfc,
  lnErfc,
  lnMills,
  lnNormalUpperTail,
  normalCdf,
  normalQuantile,
  normalUpperQuantile,
} from '../../../src/core/numeric/normal.ts'
import reference from '../../reference/special-functions.json' with { type: 'json' }

describe('erfc', () => {
  it('agrees with mpmath to 5e-14 of its value down to 1e-296', () => {
    for (const [x, expected] of reference.erfc) {
      expect(Math.abs(erfc(x) / expected - 1), `x = ${x}`).toBeLessThan(5e-14)
    }
    expect(erfc(Number.NaN)).toBeNaN()
  })

  it('has a finite logarithm where it underflows', () => {
    // Asymptotic series, DLMF 7.12.1, first two terms: x = 100 leaves a remainder of 7.5e-9.
    const x = 100
    const series = -x * x - Math.log(x * Math.sqrt(Math.PI)) + Math.log1p(-1 / (2 * x * x))
    expect(lnErfc(x)).toBeCloseTo(series, 7)
  })
})

describe('lnMills', () => {
  it('agrees with mpmath to 1e-14, from z = -100 to a million', () => {
    for (const [z, expected] of reference.lnMills) {
      expect(Math.abs(lnMills(z) - expected), `z = ${z}`).toBeLessThan(
        1e-14 * Math.max(1, Math.abs(expected)),
      )
    }
  })

  it('belongs to the upper tail', () => {
    for (const z of [-3, 0, 1.7, 1.8, 6]) {
      const tail = lnMills(z) - 0.5 * z * z - 0.5 * Math.log(2 * Math.PI)
      expect(Math.abs(lnNormalUpperTail(z) - tail)).toBeLessThan(1e-13)
    }
  })
})

describe('normalQuantile', () => {
  it('agrees with mpmath to 2e-15', () => {
    for (const [p, expected] of reference.normalQuantile) {
      expect(Math.abs(normalQuantile(p) - expected), `p = ${p}`).toBeLessThan(
        2e-15 * Math.max(1, Math.abs(expected)),
      )
    }
  })

  it('turns the distribution function back', () => {
    for (let z = -8; z <= 5; z += 0.37) expect(normalQuantile(normalCdf(z))).toBeCloseTo(z, 9)
  })

  it('reaches tails far below the smallest double', () => {
    for (const lnTail of [-1e-20, -0.1, -Math.LN2, -10, -1000, -1e7]) {
      const z = normalUpperQuantile(lnTail)
      expect(Math.abs(lnNormalUpperTail(z) / lnTail - 1), `ln tail ${lnTail}`).toBeLessThan(2e-13)
    }
    expect(normalUpperQuantile(0)).toBe(Number.NEGATIVE_INFINITY)
    expect(normalUpperQuantile(Number.NEGATIVE_INFINITY)).toBe(Number.POSITIVE_INFINITY)
    for (const p of [-0.1, 1.1, Number.NaN]) expect(normalQuantile(p)).toBeNaN()
  })
})
