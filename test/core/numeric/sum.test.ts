import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { exactSum, log1mexp, logAddExp } from '../../../src/core/numeric/sum.ts'

describe('exactSum', () => {
  it('keeps what plain adding loses', () => {
    expect(exactSum([1, 1e100, 1, -1e100])).toBe(2)
    expect(exactSum(new Float64Array(10).fill(0.1))).toBe(1)
    expect(exactSum([])).toBe(0)
  })

  it('is exact for whole numbers whatever the order', () => {
    const whole = fc.integer({ min: -(2 ** 40), max: 2 ** 40 })
    fc.assert(
      fc.property(fc.array(whole, { maxLength: 60 }), (values) => {
        const exact = Number(values.reduce((sum, v) => sum + BigInt(v), 0n))
        expect(exactSum(values)).toBe(exact)
        expect(exactSum(values.toReversed())).toBe(exact)
      }),
      { seed: 20_114 },
    )
  })
})

describe('log1mexp', () => {
  it('is accurate at both ends and continuous between', () => {
    expect(log1mexp(1e-300)).toBeCloseTo(Math.log(1e-300), 10)
    expect(log1mexp(50) / -Math.exp(-50)).toBeCloseTo(1, 14)
    expect(Math.abs(log1mexp(Math.LN2 - 1e-12) - log1mexp(Math.LN2 + 1e-12))).toBeLessThan(1e-11)
    expect(log1mexp(Math.LN2)).toBeCloseTo(-Math.LN2, 15)
  })
})

describe('logAddExp', () => {
  it('adds where e^a would overflow or vanish', () => {
    expect(logAddExp(1000, 1000)).toBeCloseTo(1000 + Math.LN2, 12)
    expect(logAddExp(-1000, -1001)).toBeCloseTo(-1000 + Math.log1p(Math.exp(-1)), 12)
    expect(logAddExp(-Infinity, 3)).toBe(3)
    expect(logAddExp(3, -Infinity)).toBe(3)
    expect(logAddExp(-Infinity, -Infinity)).toBe(-Infinity)
  })
})
