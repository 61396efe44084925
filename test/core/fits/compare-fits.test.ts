import { describe, expect, it } from 'vitest'
import { binLikelihood } from '../../../src/core/fits/bin-likelihood.ts'
import {
  boundaryLikelihoodRatio,
  contributions,
  vuong,
  vuongStatistic,
  withWeights,
} from '../../../src/core/fits/compare-fits.ts'
import { fitContinuous } from '../../../src/core/fits/continuous-fit.ts'
import type { Fit } from '../../../src/core/fits/fit.ts'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import type { Law } from '../../../src/core/laws/law.ts'
import { chiSquareUpperTail } from '../../../src/core/numeric/chi-square.ts'
import data from '../../reference/continuous-dwell-fits.json' with { type: 'json' }
import published from '../../reference/heavy-tail-blackouts.json' with { type: 'json' }
import intervals from '../../reference/profile-intervals.json' with { type: 'json' }
import { drawnBins, sampleOf } from './plain-likelihood.ts'

const PLAIN = { confidence: 0.95, intervals: false }
const sample = sampleOf(drawnBins(LAWS['power-cutoff-survival'], [1.5, 0.3], 500, 'compare'), {
  censored: [40, 900],
  entered: [2, 30, 31],
})
const fits = Object.values(LAWS).map((law) => fitLaw(law, sample, 3, PLAIN))

function withNumbers(logLikelihood: number | null, more: Partial<Fit> = {}): Fit {
  return { ...fits[0], logLikelihood, aicc: logLikelihood === null ? null : -2 * logLikelihood, ...more }
}

describe('withWeights', () => {
  it('adds up to one, with the ratio exp(-difference/2)', () => {
    const weighted = withWeights(fits)
    expect(weighted.reduce((sum, { weight }) => sum + (weight ?? 0), 0)).toBeCloseTo(1, 12)
    const [a, b] = weighted
    expect((a.weight ?? 0) / (b.weight ?? 1)).toBeCloseTo(Math.exp(-0.5 * ((a.aicc ?? 0) - (b.aicc ?? 0))), 9)
  })

  it('gives none to failures and to searches that did not settle', () => {
    const weights = withWeights([
      withNumbers(null),
      withNumbers(-10, { status: 'not-converged' }),
      withNumbers(-30),
      withNumbers(-29),
    ]).map(({ weight }) => weight)
    expect(weights.slice(0, 2)).toEqual([null, null])
    expect(weights[3]).toBeCloseTo(1 / (1 + Math.exp(-1)), 12)
  })

  it('leaves all null when nothing was fitted', () => {
    expect(withWeights([withNumbers(null)])[0].weight).toBeNull()
    expect(withWeights([])).toEqual([])
  })
})

describe('boundaryLikelihoodRatio', () => {
  it.each(intervals.half_mixture_critical)(
    'rejects at the critical values of the half mixture (Self and Liang 1987): $crit',
    ({ alpha, crit }) => {
      const result = boundaryLikelihoodRatio(withNumbers(-100), withNumbers(-100 + crit / 2))
      expect(result?.statistic).toBeCloseTo(crit, 12)
      expect(result?.p).toBeCloseTo(alpha, 9)
    },
  )

  it.each([
    ['blackouts_tail_ge_230', published.blackouts.cutoff.p_half_mixture],
    ['aircondit', intervals.aircondit_cutoff_profile.p_half_mixture],
  ] as const)('on %s', (name, expected) => {
    const { t, event, tmin } = data.data[name]
    const dwells = { seconds: t, ended: event, shortestSeconds: tmin }
    const [power, cutoff] = [LAWS.power, LAWS['power-cutoff-density']].map((law) =>
      withNumbers(fitContinuous(law, dwells, PLAIN).logLikelihood),
    )
    expect(boundaryLikelihoodRatio(power, cutoff)?.p).toBeCloseTo(expected, 5)
  })

  it('is 1 when the cutoff wins nothing, null when dwells or fits are missing', () => {
    expect(boundaryLikelihoodRatio(withNumbers(-5), withNumbers(-5))?.p).toBe(1)
    expect(boundaryLikelihoodRatio(withNumbers(null), withNumbers(-5))).toBeNull()
    expect(boundaryLikelihoodRatio(withNumbers(-5), withNumbers(-4, { shortestBins: 9 }))).toBeNull()
    expect(boundaryLikelihoodRatio(withNumbers(-5), withNumbers(-4, { complete: 1 }))).toBeNull()
  })
})

describe('Vuong', () => {
  it.each([
    ['exponential', 'exponential'],
    ['log-normal', 'lognormal_truncated'],
    ['stretched', 'stretched_truncated'],
  ] as const)('matches the published comparison of power law and %s on the blackouts', (name, key) => {
    const { t, event, tmin } = data.data.blackouts_tail_ge_230
    const dwells = { seconds: t, ended: event, shortestSeconds: tmin }
    const values = (law: Law): number[] => {
      const at = law.at(fitContinuous(law, dwells, PLAIN).coordinates, tmin)
      return t.map((seconds) => at.logDensity(seconds))
    }
    const [ratio, z, p] = published.blackouts[key].R_norm_p
    const [a, b] = [values(LAWS.power), values(LAWS[name])]
    expect(a.reduce((sum, v, i) => sum + v - b[i], 0)).toBeCloseTo(ratio, 4)
    const result = vuongStatistic(
      a,
      b,
      t.map(() => 1),
      t.length,
      0,
    )
    expect(result?.z).toBeCloseTo(z, 3)
    expect(result?.p).toBeCloseTo(p, 3)
  })

  it('counts weights as repeated dwells', () => {
    const repeated = vuongStatistic([1, 2, 2, 2, 0.5], [0, 1, 1, 1, 1], [1, 1, 1, 1, 1], 5, 1)
    expect(vuongStatistic([1, 2, 0.5], [0, 1, 1], [1, 3, 1], 5, 1)).toEqual(repeated)
  })

  it('charges for parameters as BIC does', () => {
    const weights = Array.from({ length: 50 }, () => 1)
    const first = weights.map((_, i) => Math.sin(i))
    const second = weights.map((_, i) => Math.cos(i))
    const [bare, charged] = [0, 1].map((extra) => vuongStatistic(first, second, weights, 50, extra))
    const d = first.map((v, i) => v - second[i])
    const mean = d.reduce((a, b) => a + b, 0) / 50
    const spread = Math.sqrt(d.reduce((sum, v) => sum + (v - mean) ** 2, 0) / 50)
    expect(bare?.z).toBeCloseTo((mean * 50) / (Math.sqrt(50) * spread), 10)
    expect((bare?.z ?? 0) - (charged?.z ?? 0)).toBeCloseTo(
      (0.5 * Math.log(50)) / (Math.sqrt(50) * spread),
      10,
    )
  })

  it('changes sign when the laws change places', () => {
    const forth = vuong(fits[0], fits[4], sample)
    const back = vuong(fits[4], fits[0], sample)
    expect(forth?.z).toBeCloseTo(-(back?.z ?? Number.NaN), 9)
    expect(forth?.p).toBeCloseTo(back?.p ?? Number.NaN, 9)
  })

  it('is null for a law against itself, for failed fits and different dwells', () => {
    expect(vuong(fits[0], fits[0], sample)).toBeNull()
    expect(vuong({ ...fits[0], coordinates: [] }, fits[1], sample)).toBeNull()
    expect(vuong({ ...fits[0], shortestBins: 5 }, fits[1], sample)).toBeNull()
  })

  it('has two-sided p', () => {
    const { z, p } = vuongStatistic([1, 2, 3, 4], [2, 1, 3, 3], [1, 1, 1, 1], 4, 0) ?? { z: 0, p: 0 }
    expect(p).toBeCloseTo(chiSquareUpperTail(z * z, 1), 9)
  })
})

describe('contributions', () => {
  it.each(fits)('of $law add up to ln L without compression', (fit) => {
    const { values, weights, dwells } = contributions(fit, sample)
    const sum = values.reduce((total, v, i) => total + weights[i] * v, 0)
    expect(sum).toBeCloseTo(
      binLikelihood(LAWS[fit.law], sample, 3, { compress: false }).at(fit.coordinates),
      8,
    )
    expect(dwells).toBe(fit.complete + fit.censored)
  })
})
