import { describe, expect, it } from 'vitest'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { goodnessFrom, goodnessOfFit, goodnessSlice } from '../../../src/core/fits/goodness-of-fit.ts'
import { survivalDistance } from '../../../src/core/fits/survival-distance.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { power } from '../../../src/core/laws/power.ts'
import data from '../../reference/continuous-dwell-fits.json' with { type: 'json' }
import intervals from '../../reference/profile-intervals.json' with { type: 'json' }
import { drawnBins, sampleOf } from './plain-likelihood.ts'

const PLAIN = { confidence: 0.95, intervals: false }

describe('goodnessOfFit', () => {
  it('gives the published verdict on the blackouts, in fine bins (Newman 2005)', () => {
    const { t, tmin } = data.data.blackouts_tail_ge_230
    const binSeconds = 0.001
    const sample = sampleOf(
      t.map((seconds) => Math.round(seconds / binSeconds) + 1),
      { binSeconds, edgeShare: 0.5 },
    )
    const fit = fitLaw(power, sample, Math.round(tmin / binSeconds), PLAIN)
    const { p, pError, samples } = goodnessOfFit(power, sample, fit, { samples: 600, seed: 1 })
    // 200 000 data sets there, 600 here: four standard errors, false alarm 6e-5 over seeds.
    expect(Math.abs((p ?? 0) - intervals.kolmogorovAfterFitting.p_fixed_xmin)).toBeLessThan(4 * (pError ?? 0))
    expect(samples).toBe(600)
  })

  it('accepts the law that made the dwells, with cuts and entries, and rejects a wrong one', () => {
    const law = LAWS['power-cutoff-survival']
    const bins = drawnBins(law, [1.5, 1], 300, 'gof')
    const sample = sampleOf(
      bins.map((m, i) => (i % 3 === 0 ? Math.min(m, 25) : m)).filter((m, i) => i % 3 !== 0 || m < 25),
      {
        censored: Array.from(
          bins.filter((m, i) => i % 3 === 0 && m >= 25),
          () => 25,
        ),
      },
    )
    const right = goodnessOfFit(law, sample, fitLaw(law, sample, 3, PLAIN), { samples: 150, seed: 4 })
    expect(right.p).toBeGreaterThan(0.02)
    const wrong = goodnessOfFit(LAWS.exponential, sample, fitLaw(LAWS.exponential, sample, 3, PLAIN), {
      samples: 100,
      seed: 4,
    })
    expect(wrong.p).toBe(0)
    expect(wrong.pError).toBeCloseTo(0.01, 12)
  })

  it('has p evenly spread when the law is right', () => {
    // 60 data sets of 80 dwells, every second of which would be cut at 40 bins: the mean p is within 3.3 standard errors
    // of 1/2 (false alarm 1e-3 over seeds).
    let sum = 0
    for (let i = 0; i < 60; i++) {
      const bins = Array.from(drawnBins(power, [1.6], 80, `null ${i}`))
      const isCut = (m: number, k: number): boolean => k % 2 === 1 && m >= 40
      const sample = sampleOf(
        bins.filter((m, k) => !isCut(m, k)),
        { censored: bins.filter(isCut).map(() => 40) },
      )
      sum += goodnessOfFit(power, sample, fitLaw(power, sample, 3, PLAIN), { samples: 40, seed: i }).p ?? 0
    }
    expect(Math.abs(sum / 60 - 0.5)).toBeLessThan((3.3 * Math.sqrt(1 / 12)) / Math.sqrt(60))
  })

  it('does not depend on how the samples are split', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 100, 'split'), { censored: [40] })
    const fit = fitLaw(power, sample, 3, PLAIN)
    const distance = survivalDistance(power, fit.coordinates, sample, 3)
    const whole = goodnessSlice(sample, fit, distance, 9, 0, 45)
    const parts = [
      [0, 7],
      [7, 8],
      [8, 45],
    ].map(([from, to]) => goodnessSlice(sample, fit, distance, 9, from, to))
    expect(goodnessFrom(fit, distance, parts, 9, false)).toEqual(
      goodnessFrom(fit, distance, [whole], 9, false),
    )
    expect(goodnessOfFit(power, sample, fit, { samples: 45, seed: 9 })).toEqual(
      goodnessFrom(fit, distance, [whole], 9, false),
    )
  })

  it('reports progress and stops when asked, with what it has', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 50, 'stop'))
    const fit = fitLaw(power, sample, 3, PLAIN)
    const seen: number[] = []
    const result = goodnessOfFit(power, sample, fit, {
      samples: 100,
      seed: 1,
      onProgress: (fraction) => seen.push(fraction),
      shouldStop: () => seen.length >= 3,
    })
    expect(seen).toEqual([0.1, 0.2, 0.3])
    expect(result).toMatchObject({ state: 'stopped', samples: 30 })
    const none = goodnessOfFit(power, sample, fit, { samples: 100, seed: 1, shouldStop: () => true })
    expect(none).toMatchObject({ state: 'stopped', samples: 0, p: null, pError: null })
  })

  it('has no verdict without a fit', () => {
    const fit = fitLaw(power, sampleOf([3, 4]), 3, PLAIN)
    expect(goodnessOfFit(power, sampleOf([3, 4]), fit, { samples: 10, seed: 1 })).toMatchObject({
      state: 'no-fit',
      p: null,
      distance: null,
    })
  })
})
