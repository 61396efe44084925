import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hazardTimesAge } from '../../../src/core/dwells/hazard.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { sampleOf } from './sample-of.ts'

const durations = fc.array(fc.integer({ min: 1, max: 900 }), { minLength: 1, maxLength: 50, size: 'max' })

describe('hazardTimesAge', () => {
  it('is ends over time at risk: sums back to all ends and all time', () => {
    fc.assert(
      fc.property(durations, durations, (complete, censored) => {
        const points = hazardTimesAge(sampleOf(complete, censored), 7)
        expect(points.reduce((all, { events }) => all + events, 0)).toBe(complete.length)
        let time = 0
        for (const { lowBins, highBins, value, events } of points)
          if (events > 0) time += (Math.sqrt((lowBins - 0.5) * (highBins - 0.5)) * events) / value
        const all = complete.reduce((a, m) => a + m - 0.5, 0) + censored.reduce((a, m) => a + m, 0)
        // Stretches without ends hold the rest of the time.
        expect(time).toBeLessThanOrEqual(all * (1 + 1e-12))
        if (points.every(({ events }) => events > 0)) expect(time).toBeCloseTo(all, 6)
      }),
      { seed: 15 },
    )
  })

  it('is flat at alpha - 1 for a power law, also when most dwells are cut', () => {
    const random = seededRandom('power')
    const complete: number[] = []
    const censored: number[] = []
    for (let i = 0; i < 40000; i++) {
      // Durations from 4 bins, survival (t / 4)^-1/2, rounded at a random phase; cut at 300 bins.
      const t = 4 / random.uniform() ** 2
      const m = Math.floor(t + random.uniform())
      if (m > 300) censored.push(300)
      else complete.push(m)
    }
    const points = hazardTimesAge(sampleOf(complete, censored), 7).filter(
      ({ lowBins, highBins }) => lowBins >= 7 && highBins <= 300,
    )
    expect(points.length).toBeGreaterThan(8)
    for (const { value, events } of points) {
      // Five standard deviations (false alarm 6e-7 a point) and 1 % for the discrete ages.
      expect(Math.abs(value - 0.5)).toBeLessThan(0.5 * (5 / Math.sqrt(events) + 0.01))
    }
  })

  it('takes delayed entries out of the time at risk', () => {
    // Ten dwells taken up at age 4 that end at 6 are at risk for a bin and a half each.
    const points = hazardTimesAge(
      sampleOf(
        Array.from({ length: 10 }, () => 6),
        [],
        Array.from({ length: 10 }, () => 4),
      ),
      7,
    )
    expect(points).toHaveLength(1)
    const [{ lowBins, highBins, value, events }] = points
    expect([lowBins, highBins, events]).toEqual([5, 7, 10])
    expect(value).toBeCloseTo((Math.sqrt(4.5 * 6.5) * 10) / (10 * 1.5), 12)
  })

  it('is empty without dwells', () => {
    expect(hazardTimesAge(sampleOf([]), 7)).toEqual([])
  })
})
