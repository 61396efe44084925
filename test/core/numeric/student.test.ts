import { describe, expect, it } from 'vitest'
import { normalQuantile } from '../../../src/core/numeric/normal.ts'
import { tQuantile, tTwoSidedTail } from '../../../src/core/numeric/student.ts'
import reference from '../../reference/special-functions.json' with { type: 'json' }

describe('tQuantile', () => {
  it('agrees with SciPy to 1e-12', () => {
    for (const [p, df, expected] of reference.student) {
      expect(Math.abs(tQuantile(p, df) / expected - 1), `p = ${p}, df ${df}`).toBeLessThan(1e-12)
    }
  })

  it('is Cauchy at one degree of freedom and normal at many', () => {
    for (const p of [0.51, 0.75, 0.999]) {
      expect(tQuantile(p, 1) / Math.tan(Math.PI * (p - 0.5))).toBeCloseTo(1, 10)
      expect(Math.abs(tQuantile(p, 1e7) - normalQuantile(p))).toBeLessThan(1e-5)
    }
    expect(tQuantile(0.5, 4)).toBe(0)
    expect(tQuantile(0.5, 0)).toBeNaN()
    expect(tQuantile(1.2, 3)).toBeNaN()
  })

  it('has the tail it was asked for', () => {
    for (const df of [1, 3, 30]) expect(tTwoSidedTail(tQuantile(0.975, df), df)).toBeCloseTo(0.05, 13)
  })
})
