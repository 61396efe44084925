import { describe, expect, it } from 'vitest'
import { hurwitzZeta } from '../../../src/core/numeric/zeta.ts'
import reference from '../../reference/hurwitz-zeta.json' with { type: 'json' }

describe('hurwitzZeta', () => {
  it('agrees with mpmath to 5e-15', () => {
    for (const { alpha, kmin, zeta } of reference.hurwitz_zeta) {
      expect(Math.abs(hurwitzZeta(Number(alpha), kmin) / Number(zeta) - 1), `${alpha}, ${kmin}`).toBeLessThan(
        5e-15,
      )
    }
  })

  it('equals pi^2/6 and pi^4/90, and drops its first term with q', () => {
    expect(hurwitzZeta(2, 1)).toBeCloseTo(Math.PI ** 2 / 6, 14)
    expect(hurwitzZeta(4, 1)).toBeCloseTo(Math.PI ** 4 / 90, 14)
    for (const [s, q] of [
      [1.2, 0.3],
      [2.5, 4.7],
      [9, 1.01],
    ]) {
      expect((hurwitzZeta(s, q) - q ** -s) / hurwitzZeta(s, q + 1)).toBeCloseTo(1, 11)
    }
  })

  it('is no number at or below order 1', () => {
    for (const [s, q] of [
      [1, 1],
      [0.5, 1],
      [2, 0],
      [2, -3],
      [Number.NaN, 1],
    ])
      expect(hurwitzZeta(s, q)).toBeNaN()
  })
})
