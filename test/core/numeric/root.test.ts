import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findRoot } from '../../../src/core/numeric/root.ts'

describe('findRoot', () => {
  it('finds the root of x^3 - 2x - 5 (Wallis 1685) to the last digit', () => {
    const found = findRoot((x) => x ** 3 - 2 * x - 5, 2, 3)
    expect(found.converged).toBe(true)
    expect(found.x).toBeCloseTo(2.0945514815423265, 14)
    expect(found.evaluations).toBeLessThan(15)
  })

  it('settles on flat, steep and stepped functions in fewer steps than the ends allow', () => {
    for (const [f, root] of [
      [(x: number) => (x - 0.3) ** 9, 0.3],
      [(x: number) => Math.tanh(1e4 * (x - 0.7)), 0.7],
      [(x: number) => (x < 0.25 ? -1 : 1), 0.25],
    ] as const) {
      const found = findRoot(f, -1, 2, { tolerance: 1e-6, mostEvaluations: 200 })
      expect(found.converged).toBe(true)
      expect(Math.abs(found.x - root)).toBeLessThan(0.02)
      expect(found.evaluations).toBeLessThan(120)
    }
  })

  it('agrees with plain bisection on random cubics', () => {
    const coefficient = fc.double({ min: -3, max: 3, noNaN: true })
    fc.assert(
      fc.property(coefficient, coefficient, coefficient, (a, b, c) => {
        // Growing on [-9, 9] because of the leading term, so that there is one root.
        const f = (x: number): number => x ** 3 + a * x * x + (b + 40) * x + c
        let [low, high] = [-9, 9]
        for (let i = 0; i < 60; i++) {
          const middle = (low + high) / 2
          if (f(middle) < 0) low = middle
          else high = middle
        }
        expect(Math.abs(findRoot(f, -9, 9).x - low)).toBeLessThan(1e-13)
      }),
      { seed: 20_113, numRuns: 200 },
    )
  })

  it('takes an end that is a root, and says when it cannot work', () => {
    expect(findRoot((x) => x, 0, 1)).toMatchObject({ x: 0, converged: true })
    expect(findRoot((x) => x - 1, 0, 1)).toMatchObject({ x: 1, converged: true })
    expect(findRoot((x) => x * x + 1, -1, 1).converged).toBe(false)
    expect(findRoot((x) => (x > 0.2 && x < 0.9 ? Number.NaN : x - 0.5), 0, 1).converged).toBe(false)
    expect(findRoot((x) => x - 0.123, 0, 1, { mostEvaluations: 2 }).converged).toBe(false)
  })
})
