import { describe, expect, it } from 'vitest'
import { minimise1d, minimiseNelderMead } from '../../../src/core/numeric/minimise.ts'

describe('minimise1d', () => {
  it('finds the minimum of x ln x at 1/e', () => {
    const found = minimise1d((x) => x * Math.log(x), 0.01, 3)
    expect(found.converged).toBe(true)
    expect(found.x).toBeCloseTo(1 / Math.E, 7)
    expect(found.value).toBeCloseTo(-1 / Math.E, 13)
    expect(found.evaluations).toBeLessThan(40)
  })

  it('agrees with a fine grid on a wavy function, and finds an end', () => {
    const wavy = (x: number): number => (x - 0.4) ** 2 + 0.01 * Math.cos(9 * x)
    let best = Infinity
    for (let x = -2; x <= 2; x += 1e-4) best = Math.min(best, wavy(x))
    expect(minimise1d(wavy, -2, 2).value).toBeLessThan(best + 1e-9)
    expect(minimise1d((x) => x, 2, 5, { tolerance: 1e-9 }).x).toBeCloseTo(2, 7)
  })

  it('says when it ran out of evaluations', () => {
    expect(minimise1d((x) => x * x, -1, 3, { mostEvaluations: 4 }).converged).toBe(false)
  })
})

describe('minimiseNelderMead', () => {
  it('finds the minimum of the banana valley (Rosenbrock, Comput. J. 3, 175 (1960))', () => {
    const found = minimiseNelderMead(
      ([x, y]) => 100 * (y - x * x) ** 2 + (1 - x) ** 2,
      [-1.2, 1],
      [0.5, 0.5],
      {
        tolerance: 1e-16,
      },
    )
    expect(found.converged).toBe(true)
    expect(found.x[0]).toBeCloseTo(1, 5)
    expect(found.x[1]).toBeCloseTo(1, 5)
    expect(found.evaluations).toBeLessThan(400)
  })

  it('solves the normal equations of a quadratic in four coordinates', () => {
    const target = [1, -2, 0.5, 3]
    const f = (x: readonly number[]): number =>
      x.reduce((sum, v, i) => sum + (i + 1) * (v - target[i]) ** 2, 0) + 0.3 * (x[0] - 1) * (x[1] + 2)
    const found = minimiseNelderMead(f, [0, 0, 0, 0], [1, 1, 1, 1], {
      tolerance: 1e-15,
      mostEvaluations: 4000,
    })
    for (const [i, v] of target.entries()) expect(found.x[i]).toBeCloseTo(v, 4)
  })

  it('keeps off points that have no value, and says when it ran out of evaluations', () => {
    const walled = (x: readonly number[]): number => (x[0] < 0.5 ? Number.NaN : (x[0] - 0.2) ** 2 + x[1] ** 2)
    const found = minimiseNelderMead(walled, [2, 1], [0.5, 0.5], { mostEvaluations: 2000 })
    expect(found.x[0]).toBeGreaterThanOrEqual(0.5)
    expect(found.x[0]).toBeCloseTo(0.5, 3)
    expect(minimiseNelderMead(([x]) => x * x, [50], [1], { mostEvaluations: 5 }).converged).toBe(false)
  })
})
