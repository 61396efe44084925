import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { timeGrid } from '../../../src/core/read/time-grid.ts'

const printed = (rows: number, step: number, decimals: number, start = 0): number[] =>
  Array.from({ length: rows }, (_, i) => Number((start + i * step).toFixed(decimals)))

describe('timeGrid', () => {
  it('exactly even times, with and without missing rows', () => {
    expect(timeGrid([0, 10, 20, 30], 1)).toEqual({ step: 10, slack: 0, uncertainty: 0 })
    expect(timeGrid([0, 10, 20, 50, 60, 90], 1)).toEqual({ step: 10, slack: 0, uncertainty: 0 })
    expect(timeGrid([0, 1, 2, 3, 5, 6, 7], 1)).toEqual({ step: 1, slack: 0, uncertainty: 0 })
    expect(timeGrid([3, 3.005], 0.001)?.step).toBeCloseTo(0.005, 12)
  })
  it('a step between two printable ones is the slope', () => {
    for (const decimals of [2, 3, 4]) {
      const grid = timeGrid(printed(300, 1 / 30, decimals), 10 ** -decimals)
      expect(Math.abs((grid?.step ?? 0) * 30 - 1)).toBeLessThanOrEqual(grid?.uncertainty ?? 0)
      expect(grid?.slack).toBe(10 ** -decimals)
    }
  })
  it('a step of little more than the last digit, when rounding makes the double steps', () => {
    expect(timeGrid(printed(2000, 0.015, 2), 0.01)?.step).toBeCloseTo(0.015, 5)
    // Lost rows do not come so evenly.
    const lost = Array.from({ length: 2000 }, (_, i) => i).filter(
      (i) => (i * 7919) % 13 > 0 && (i * i) % 11 > 0,
    )
    expect(timeGrid(lost, 1)).toEqual({ step: 1, slack: 0, uncertainty: 0 })
  })
  it('missing rows between rounded times do not move the step', () => {
    const times = printed(1000, 1 / 30, 2).filter((_, i) => i % 97 !== 50 && i !== 500 && i !== 501)
    expect(timeGrid(times, 0.01)?.step).toBeCloseTo(1 / 30, 4)
  })
  it('the median is believed when the step changes', () => {
    const times = Array.from({ length: 60 }, (_, i) => (i < 40 ? i : 40 + (i - 40) * 1.25))
    expect(timeGrid(times, 0.01)?.step).toBe(1)
  })
  it('is null for too few times or times that stand or fall', () => {
    expect(timeGrid([], 1)).toBeNull()
    expect(timeGrid([5], 1)).toBeNull()
    expect(timeGrid([5, 5, 5], 1)).toBeNull()
    expect(timeGrid([5, 4, 3], 1)).toBeNull()
  })
  it('any step of two last digits or more is found within its stated uncertainty', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 2, max: 500, noNaN: true }),
        fc.integer({ min: 20, max: 400 }),
        fc.integer({ min: 0, max: 1000 }),
        (step, rows, start) => {
          const grid = timeGrid(printed(rows, step, 0, start), 1)
          if (grid === null) throw new Error('no grid')
          // Twice: the rounding of both ends.
          expect(Math.abs(grid.step - step) * (rows - 1)).toBeLessThanOrEqual(1 + 1e-9 * step * rows)
        },
      ),
      { seed: 81, numRuns: 400 },
    )
  })
})
