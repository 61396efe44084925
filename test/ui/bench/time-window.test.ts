import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { clipWindow, panWindow, type TimeWindow, zoomWindow } from '../../../src/ui/bench/time-window.ts'

const finite = (min: number, max: number) => fc.double({ min, max, noNaN: true })
const anyRecord: fc.Arbitrary<TimeWindow> = fc
  .tuple(finite(-1000, 1000), finite(10, 10_000))
  .map(([from, span]) => ({ from, to: from + span }))
const anyWindow: fc.Arbitrary<TimeWindow> = fc
  .tuple(finite(-50_000, 50_000), finite(0, 50_000))
  .map(([from, span]) => ({ from, to: from + span }))

/** Rounding at the size of the numbers here, s. */
const ROUNDING = 1e-7

function inside(window: TimeWindow, record: TimeWindow): void {
  expect(window.from).toBeGreaterThanOrEqual(record.from - ROUNDING)
  expect(window.to).toBeLessThanOrEqual(record.to + ROUNDING)
}

describe('clipWindow', () => {
  it('lies in the record, is 20 bins or more, and stays when it was valid', () => {
    fc.assert(
      fc.property(anyRecord, anyWindow, finite(1e-3, 0.1), (record, window, binSeconds) => {
        const clipped = clipWindow(window, record, binSeconds)
        inside(clipped, record)
        expect(clipped.to - clipped.from).toBeGreaterThanOrEqual(20 * binSeconds - ROUNDING)
        const again = clipWindow(clipped, record, binSeconds)
        expect(again.from).toBeCloseTo(clipped.from, 6)
        expect(again.to).toBeCloseTo(clipped.to, 6)
      }),
      { seed: 131, numRuns: 500 },
    )
  })

  it('shows the whole record when it has fewer than 20 bins', () => {
    expect(clipWindow({ from: 1, to: 2 }, { from: 0, to: 3 }, 1)).toEqual({ from: 0, to: 3 })
  })

  it('keeps the span of a window beyond an end', () => {
    expect(clipWindow({ from: 95, to: 115 }, { from: 0, to: 100 }, 0.01)).toEqual({ from: 80, to: 100 })
    expect(clipWindow({ from: -15, to: 5 }, { from: 0, to: 100 }, 0.01)).toEqual({ from: 0, to: 20 })
  })
})

describe('zoomWindow', () => {
  it('keeps the time under the pointer, and zooming back restores the window', () => {
    fc.assert(
      fc.property(anyWindow, finite(0.1, 10), finite(0, 1), (window, factor, at) => {
        const zoomed = zoomWindow(window, factor, at)
        const time = (one: TimeWindow): number => one.from + at * (one.to - one.from)
        expect(time(zoomed)).toBeCloseTo(time(window), 5)
        expect(zoomed.to - zoomed.from).toBeCloseTo(factor * (window.to - window.from), 5)
        const back = zoomWindow(zoomed, 1 / factor, at)
        expect(back.from).toBeCloseTo(window.from, 5)
        expect(back.to).toBeCloseTo(window.to, 5)
      }),
      { seed: 132, numRuns: 500 },
    )
  })
})

describe('panWindow', () => {
  it('stays in the record and keeps its span, however far', () => {
    fc.assert(
      fc.property(anyRecord, anyWindow, finite(-1e3, 1e3), (record, any, share) => {
        const window = clipWindow(any, record, 0.01)
        const moved = panWindow(window, share, record)
        inside(moved, record)
        expect(moved.to - moved.from).toBeCloseTo(window.to - window.from, 6)
        const wanted = window.from + share * (window.to - window.from)
        if (wanted > record.from && wanted + (window.to - window.from) < record.to) {
          expect(moved.from).toBeCloseTo(wanted, 6)
        }
      }),
      { seed: 133, numRuns: 500 },
    )
  })

  it('reaches the ends with a large share, as Home and End do', () => {
    const record = { from: 3, to: 103 }
    expect(panWindow({ from: 40, to: 50 }, 1e9, record)).toEqual({ from: 93, to: 103 })
    expect(panWindow({ from: 40, to: 50 }, -1e9, record)).toEqual({ from: 3, to: 13 })
  })
})
