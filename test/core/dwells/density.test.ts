import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { binnedDensity, neighbourDensity } from '../../../src/core/dwells/density.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { sampleOf } from './sample-of.ts'

const durations = fc.array(fc.integer({ min: 1, max: 3000 }), { minLength: 1, maxLength: 60, size: 'max' })

describe('binnedDensity', () => {
  it('holds every complete dwell once and integrates to one', () => {
    fc.assert(
      fc.property(durations, (list) => {
        const points = binnedDensity(sampleOf(list, [5000]))
        expect(points.reduce((all, { count }) => all + count, 0)).toBe(list.length)
        const area = points.reduce(
          (all, { density, lowBins, highBins }) => all + density * (highBins - lowBins) * 0.5,
          0,
        )
        expect(area).toBeCloseTo(1, 10)
        for (const { lowBins, highBins, count } of points)
          expect(count).toBe(list.filter((m) => m >= lowBins && m < highBins).length)
        for (let j = 1; j < points.length; j++) expect(points[j].lowBins).toBe(points[j - 1].highBins)
      }),
      { seed: 14 },
    )
  })

  it('has exact Poisson limits and keeps empty stretches with an upper limit', () => {
    const points = binnedDensity(sampleOf([1, 1, 1, 3]))
    const scale = 1 / (4 * 0.5)
    // Garwood 1936, 95 %: 3 counts 0.6187 .. 8.7673, none 0 .. 3.6889.
    expect(points[0]).toMatchObject({ count: 3, density: 3 * scale, seconds: 0.5 })
    expect(points[0].low / scale).toBeCloseTo(0.6186721228956014, 8)
    expect(points[0].high / scale).toBeCloseTo(8.76727306974232, 8)
    expect(points[1]).toMatchObject({ count: 0, density: 0, low: 0 })
    expect(points[1].high / scale).toBeCloseTo(3.68887945411394, 8)
  })

  it('rescales with the bin width', () => {
    const sample = sampleOf([1, 2, 2, 70, 90, 400])
    const fine = binnedDensity(sample)
    const coarse = binnedDensity({ ...sample, binSeconds: 5 })
    fine.forEach((point, j) => {
      expect(coarse[j].seconds).toBeCloseTo(point.seconds * 10, 12)
      expect(coarse[j].density).toBeCloseTo(point.density / 10, 12)
    })
  })

  it('is empty without complete dwells', () => {
    expect(binnedDensity(sampleOf([], [4]))).toEqual([])
  })
})

describe('neighbourDensity', () => {
  it('weights each duration by the distance to its neighbours', () => {
    const points = neighbourDensity(sampleOf([2, 2, 4, 10]))
    expect(points.map(({ seconds }) => seconds)).toEqual([1, 2, 5])
    // (N_i / N) / width, widths 1 s, (5 - 1) / 2 s, 3 s.
    expect(points[0].density).toBeCloseTo(0.5 / 1, 14)
    expect(points[1].density).toBeCloseTo(0.25 / 2, 14)
    expect(points[2].density).toBeCloseTo(0.25 / 3, 14)
  })

  it('follows a dense sample of a power law on average', () => {
    const random = seededRandom('neighbours')
    const list = Array.from({ length: 4000 }, () => Math.min(400, Math.ceil(1 / random.uniform() ** 2)))
    const points = neighbourDensity(sampleOf(list))
    // Where every duration occurs, the weight is one bin: P(m) = m^-1/2 ... difference of the survival of ceil(u^-2).
    for (const { seconds, density } of points.slice(0, 6)) {
      const m = seconds / 0.5
      const expected = (m === 1 ? 0 : (m - 1) ** -0.5 - m ** -0.5) / 0.5
      if (m > 1) expect(Math.abs(density / expected - 1)).toBeLessThan(5 / Math.sqrt(4000 * expected * 0.5))
    }
  })

  it('takes one bin for a single duration and nothing for none', () => {
    expect(neighbourDensity(sampleOf([6]))).toEqual([{ seconds: 3, count: 1, density: 2 }])
    expect(neighbourDensity(sampleOf([]))).toEqual([])
  })
})
