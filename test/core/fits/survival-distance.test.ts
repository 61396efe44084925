import { describe, expect, it } from 'vitest'
import { survivalDistance } from '../../../src/core/fits/survival-distance.ts'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { power } from '../../../src/core/laws/power.ts'
import data from '../../reference/continuous-dwell-fits.json' with { type: 'json' }
import published from '../../reference/heavy-tail-blackouts.json' with { type: 'json' }
import { drawnBins, plainMeanSurvival, sampleOf } from './plain-likelihood.ts'

describe('survivalDistance', () => {
  it('is the published distance on the blackouts, in bins too fine to matter (Newman 2005)', () => {
    const { t, tmin } = data.data.blackouts_tail_ge_230
    const binSeconds = 0.001
    const sample = sampleOf(
      t.map((seconds) => Math.round(seconds / binSeconds) + 1),
      { binSeconds, edgeShare: 0.5 },
    )
    const shortest = Math.round(tmin / binSeconds)
    const fit = fitLaw(power, sample, shortest, { confidence: 0.95, intervals: false })
    expect(fit.parameters['alpha'].estimate).toBeCloseTo(published.blackouts.powerlaw.alpha, 3)
    expect(survivalDistance(power, fit.coordinates, sample, shortest)).toBeCloseTo(
      published.blackouts.powerlaw.KS_two_sided,
      3,
    )
  })

  it('is the plain distance of counted and fitted shares when nothing is cut', () => {
    const bins = drawnBins(power, [1.5], 80, 'distance')
    const at = power.at([1.4], 0.018)
    const tail = (m: number): number => plainMeanSurvival(at, m, 0.4, 0.01, 1.8)
    let worst = 0
    for (const m of bins) {
      for (const next of [m, m + 1]) {
        const share = bins.filter((other) => other >= next).length / bins.length
        worst = Math.max(worst, Math.abs(share - tail(next) / tail(3)))
      }
    }
    expect(survivalDistance(power, [1.4], sampleOf(bins), 3)).toBeCloseTo(worst, 9)
  })

  it('takes cut dwells out of the risk set after their cut, and entered ones in at their age', () => {
    // By hand: S steps 1 -> 3/4 at 4 (four at risk: one of five is cut at 3), 3/4 x 2/3 at 6 (one entered at 5, one cut at 5).
    const sample = sampleOf([4, 6, 9, 9], { censored: [3, 5], entered: [5] })
    const at = power.at([1.5], 0.018)
    const tail = (m: number): number =>
      plainMeanSurvival(at, m, 0.4, 0.01, 1.8) / plainMeanSurvival(at, 3, 0.4, 0.01, 1.8)
    const curve = [
      [4, 1, 3 / 4],
      [6, 3 / 4, (3 / 4) * (2 / 3)],
      [9, (3 / 4) * (2 / 3), 0],
    ]
    const worst = Math.max(
      ...curve.flatMap(([m, before, after]) => [Math.abs(before - tail(m)), Math.abs(after - tail(m + 1))]),
    )
    expect(survivalDistance(power, [1.5], sample, 3)).toBeCloseTo(worst, 9)
  })

  it('is 0 for no dwells', () => {
    expect(survivalDistance(power, [1.5], sampleOf([]), 3)).toBe(0)
  })
})
