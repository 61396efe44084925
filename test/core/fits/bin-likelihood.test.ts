import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { binLikelihood } from '../../../src/core/fits/bin-likelihood.ts'
import { continuousLikelihood } from '../../../src/core/fits/continuous-fit.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { power } from '../../../src/core/laws/power.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { drawnBins, plainLikelihood, sampleOf, TYPICAL } from './plain-likelihood.ts'

const CASES = Object.values(LAWS)

describe('binLikelihood', () => {
  it.each(CASES)('agrees with dense integration, dwell by dwell: $name', (law) => {
    const at = TYPICAL[law.name]
    const bins = drawnBins(law, at, 120, `plain ${law.name}`, { least: 1 })
    for (const edgeShare of [0.3, 0.5, 0.8]) {
      const sample = sampleOf(bins, { censored: [2, 3, 17, 240], entered: [1, 2, 5, 40], edgeShare })
      for (const shortest of [2, 3, 10]) {
        const slow = plainLikelihood(law, at, sample, shortest)
        expect(Math.abs(binLikelihood(law, sample, shortest).at(at) - slow)).toBeLessThan(1e-7)
      }
    }
  })

  it('counts complete and censored dwells at or above the shortest', () => {
    const { complete, censored } = binLikelihood(power, sampleOf([1, 2, 3, 3, 9], { censored: [2, 4] }), 3)
    expect([complete, censored]).toEqual([3, 1])
  })

  it('ignores entries up to the shortest, and what was cut before it', () => {
    const bins = [3, 4, 7, 20]
    const at = [1.5]
    const bare = binLikelihood(power, sampleOf(bins), 3).at(at)
    expect(
      binLikelihood(power, sampleOf(bins, { entered: [1, 2, 3], censored: [1, 2] }), 3).at(at),
    ).toBeCloseTo(bare, 12)
  })

  it('splits at an age: a dwell cut at q and taken up at q counts as one whole dwell', () => {
    const at = TYPICAL['power-cutoff-survival']
    const law = LAWS['power-cutoff-survival']
    const whole = binLikelihood(law, sampleOf([50, 8]), 3).at(at)
    const pieces = binLikelihood(law, sampleOf([50, 8], { censored: [20], entered: [20] }), 3).at(at)
    expect(pieces).toBeCloseTo(whole, 11)
  })

  it('gives probabilities that add up to one', () => {
    const law = LAWS.exponential
    let sum = 0
    for (let m = 3; m < 800; m++) sum += Math.exp(binLikelihood(law, sampleOf([m]), 3).at([5]))
    expect(sum).toBeCloseTo(1, 9)
  })

  it.each(CASES)('becomes the continuous likelihood when bins are fine: $name', (law) => {
    const at = TYPICAL[law.name]
    const binSeconds = 1e-6
    const random = seededRandom(`fine ${law.name}`)
    const seconds = Array.from({ length: 200 }, () => law.sample(random, at, 0.02))
    const bins = seconds.map((t) => Math.max(20001, Math.round(t / binSeconds)))
    const sample = sampleOf(bins.slice(0, 190), { censored: bins.slice(190), binSeconds, edgeShare: 0.5 })
    const fine = binLikelihood(law, sample, 20000, { compress: false }).at(at)
    const exact = continuousLikelihood(law, {
      seconds: bins.map((m) => m * binSeconds),
      ended: bins.map((_, i) => (i < 190 ? 1 : 0)),
      shortestSeconds: 0.02,
    })(at)
    // A complete dwell has the mass of one bin; the shortest duration sits half a bin higher.
    expect(Math.abs(fine - (exact + 190 * Math.log(binSeconds)))).toBeLessThan(200 * 4e-5)
  })

  it.each(['power-cutoff-survival', 'power-cutoff-density'] as const)(
    'without cutoff is the power law: %s',
    (name) => {
      const sample = sampleOf(drawnBins(power, [1.5], 400, 'edge'), { censored: [500], entered: [30] })
      const plain = binLikelihood(power, sample, 3).at([1.5])
      expect(binLikelihood(LAWS[name], sample, 3).at([1.5, 0])).toBeCloseTo(plain, 9)
      expect(binLikelihood(LAWS[name], sample, 3).at([1.5, 1e-14])).toBeCloseTo(plain, 4)
    },
  )

  it('does not change when time is counted in another unit', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e6, noNaN: true }), (unit) => {
        const bins = drawnBins(power, [1.5], 60, 'unit')
        const one = binLikelihood(LAWS['power-cutoff-survival'], sampleOf(bins, { binSeconds: 1 }), 3).at([
          1.4, 0.01,
        ])
        const other = binLikelihood(
          LAWS['power-cutoff-survival'],
          sampleOf(bins, { binSeconds: unit }),
          3,
        ).at([1.4, 0.01 / unit])
        expect(other).toBeCloseTo(one, 8)
      }),
      { seed: 5, numRuns: 30 },
    )
  })

  it('stays finite where the density climbs by more than e^700 within a bin', () => {
    const value = binLikelihood(LAWS['log-normal'], sampleOf([3, 4, 8]), 3).at([24000, 1.55])
    expect(value).toBeLessThan(-1e8)
    expect(Number.isFinite(value)).toBe(true)
  })

  it('stays finite far out in a tail, where densities underflow', () => {
    const value = binLikelihood(LAWS.exponential, sampleOf([3, 4, 1e6]), 3).at([1])
    expect(value).toBeCloseTo(-1e4, -2)
    expect(Number.isFinite(value)).toBe(true)
  })
})
