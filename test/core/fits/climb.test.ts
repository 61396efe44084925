import { describe, expect, it } from 'vitest'
import { climb } from '../../../src/core/fits/climb.ts'
import { ridge } from '../../../src/core/fits/ridge.ts'

const BOX = [
  { low: -10, high: 10 },
  { low: -10, high: 10 },
]

describe('climb', () => {
  it('finds the top of a tilted paraboloid', () => {
    const f = ([x, y]: readonly number[]): number => -3 * (x - 1) ** 2 - 2 * (x - 1) * (y + 2) - (y + 2) ** 2
    const top = climb(f, [5, 5], BOX, [0.5, 0.5])
    expect(top.converged).toBe(true)
    expect(top.x[0]).toBeCloseTo(1, 4)
    expect(top.x[1]).toBeCloseTo(-2, 4)
    expect(top.evaluations).toBeLessThan(40)
  })

  it('finds the end of a curved ridge (Rosenbrock, Comput. J. 3, 175 (1960))', () => {
    const f = ([x, y]: readonly number[]): number => -100 * (y - x * x) ** 2 - (1 - x) ** 2
    const top = climb(f, [-1.2, 1], BOX, [0.1, 0.1])
    expect(top.value).toBeGreaterThan(-1e-5)
    expect(top.x[0]).toBeCloseTo(1, 2)
  })

  it('stops on a bound when the top lies beyond it, and goes on along it', () => {
    const f = ([x, y]: readonly number[]): number => -((x - 20) ** 2) - (y - 0.1 * x) ** 2
    const top = climb(f, [0, 0], BOX, [0.3, 0.3])
    expect(top.x[0]).toBe(10)
    expect(top.x[1]).toBeCloseTo(1, 3)
    expect(top.converged).toBe(true)
  })

  it('works in one coordinate, from far away', () => {
    const f = ([x]: readonly number[]): number => -Math.cosh(x - 2)
    expect(climb(f, [9], [BOX[0]], [0.1]).x[0]).toBeCloseTo(2, 3)
  })

  it('walks round a region where the function is not a number', () => {
    const f = ([x, y]: readonly number[]): number => (x < 0 ? Number.NaN : -((x - 0.2) ** 2) - y * y)
    const top = climb(f, [3, 3], BOX, [0.5, 0.5])
    expect(top.x[0]).toBeCloseTo(0.2, 3)
  })

  it('says that a function without finite values has no top', () => {
    expect(climb(() => Number.NaN, [0, 0], BOX, [1, 1]).converged).toBe(false)
  })
})

describe('ridge', () => {
  it('needs three looks on a parabola when it starts at the top', () => {
    let looks = 0
    const top = ridge((x) => -((x - 1) ** 2) * (++looks > 0 ? 1 : 0), 1, { low: -5, high: 5 }, 0.7)
    expect(looks).toBe(3)
    expect(top).toEqual({ x: 1, value: 0 })
  })

  it('finds the top of a skewed dome from far away', () => {
    const top = ridge((x) => x - Math.exp(x), -6, { low: -10, high: 10 }, 1)
    expect(top.x).toBeCloseTo(0, 1)
    expect(top.value).toBeCloseTo(-1, 4)
  })

  it('goes after a dome a hundred widths away over a slope that bends upwards', () => {
    const top = ridge((x) => 100 * Math.exp(-((x - 50) ** 2) / 400), 0, { low: -1000, high: 1000 }, 0.5)
    expect(top.x).toBeCloseTo(50, 1)
  })

  it('stays in its range', () => {
    expect(ridge((x) => x, 0, { low: -1, high: 1 }, 0.1).x).toBeCloseTo(1, 3)
    expect(ridge((x) => -((x - 5) ** 2), 0, { low: -1, high: 1 }, 0.5).x).toBe(1)
  })
})
