import { describe, expect, it } from 'vitest'
import { continuousLikelihood, fitContinuous } from '../../../src/core/fits/continuous-fit.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import type { LawName } from '../../../src/core/laws/law.ts'
import reference from '../../reference/continuous-dwell-fits.json' with { type: 'json' }
import intervals from '../../reference/profile-intervals.json' with { type: 'json' }

const BOTH = { confidence: 0.95, intervals: true }
/** Untruncated fits: a shortest duration that cuts nothing off. */
const NOTHING = 1e-12

interface Named {
  readonly law: LawName
  /** Whether the reference fit is conditional on the shortest duration. */
  readonly truncated: boolean
  readonly read: (params: Record<string, number>) => number[]
}
const MODELS: Record<string, Named> = {
  powerlaw: { law: 'power', truncated: true, read: ({ alpha }) => [alpha] },
  powerlaw_exp_cutoff: {
    law: 'power-cutoff-density',
    truncated: true,
    read: ({ alpha, lambda }) => [alpha, 1 / lambda],
  },
  exponential_shifted: { law: 'exponential', truncated: true, read: ({ k }) => [1 / k] },
  exponential: { law: 'exponential', truncated: false, read: ({ k }) => [1 / k] },
  lognormal: { law: 'log-normal', truncated: false, read: ({ mu, sigma }) => [Math.exp(mu), sigma] },
  lognormal_truncated: { law: 'log-normal', truncated: true, read: ({ mu, sigma }) => [Math.exp(mu), sigma] },
  stretched: { law: 'stretched', truncated: false, read: ({ tau, beta }) => [tau, beta] },
  stretched_truncated: { law: 'stretched', truncated: true, read: ({ tau, beta }) => [tau, beta] },
}

type DataName = keyof typeof reference.data

function dwellsOf(name: string, truncated: boolean) {
  const { t, event, tmin } = reference.data[name as DataName]
  return { seconds: t, ended: event, shortestSeconds: truncated ? tmin : NOTHING }
}

const INTERIOR = reference.fits.filter((fit) => 'params' in fit)
const OPEN = reference.fits.filter((fit) => !('params' in fit))

describe('fitContinuous against 30-digit optimisation, truncated and censored (Newman 2005, Proschan 1963, Gehan 1965)', () => {
  it.each(INTERIOR)('$dataset, $model', ({ dataset, model, params, loglik }) => {
    const { law: name, truncated, read } = MODELS[model]
    const law = LAWS[name]
    const dwells = dwellsOf(dataset, truncated)
    const fit = fitContinuous(law, dwells, BOTH)
    expect(fit.status).toBe('ok')
    // The likelihood itself, at the reference optimum, to rounding; the reference gives 15 digits.
    const expected = read(
      Object.fromEntries(Object.entries(params ?? {}).filter(([, v]) => v !== undefined)) as Record<
        string,
        number
      >,
    )
    const there = continuousLikelihood(law, dwells)(law.coordinatesOf(expected))
    expect(there).toBeCloseTo(loglik ?? Number.NaN, 9)
    // The optimum: 1e-6 in ln L is 0.0014 standard errors.
    expect(Math.abs(fit.logLikelihood - (loglik ?? Number.NaN))).toBeLessThan(1e-6)
    law.parametersOf(fit.coordinates).forEach((value, i) => {
      const coordinate = fit.coordinates[i]
      const wanted = law.coordinatesOf(expected)[i]
      const { low, high } = fit.parameters[law.parameters[i].name]
      const limits = [low, high].map((limit) =>
        limit === null
          ? coordinate
          : law.coordinatesOf(law.parametersOf(fit.coordinates).map((v, j) => (j === i ? limit : v)))[i],
      )
      const width = Math.abs(limits[0] - limits[1])
      expect(Number.isFinite(value)).toBe(true)
      expect(Math.abs(coordinate - wanted)).toBeLessThan(0.002 * width)
    })
  })

  it.each(OPEN)(
    '$dataset, $model: no interior optimum, said so, at no lower likelihood',
    ({ dataset, model, ...fit }) => {
      const { law, truncated } = MODELS[model]
      const found = fitContinuous(LAWS[law], dwellsOf(dataset, truncated), BOTH)
      expect(found.status).toBe('at-bound')
      expect(found.message).not.toBe('')
      const power = fitContinuous(LAWS.power, dwellsOf(dataset, true), BOTH)
      // All of these laws have the power law as their limit, from below.
      expect(found.logLikelihood).toBeLessThan(power.logLikelihood + 1e-6)
      expect(found.logLikelihood).toBeGreaterThan(power.logLikelihood - 0.01)
      if (law === 'power-cutoff-density') {
        expect(found.parameters['tauSeconds'].estimate).toBeNull()
        expect(found.parameters['tauSeconds'].high).toBeNull()
        expect(found.logLikelihood).toBeCloseTo(power.logLikelihood, 6)
        if ('bestFound' in fit && fit.bestFound !== null)
          expect(found.logLikelihood).toBeCloseTo(fit.bestFound, 6)
      }
    },
  )
})

describe('profile intervals against published data', () => {
  it('alpha of the blackouts', () => {
    const { alpha } = fitContinuous(LAWS.power, dwellsOf('blackouts_tail_ge_230', true), BOTH).parameters
    expect(alpha.estimate).toBeCloseTo(intervals.blackouts_alpha.alpha, 5)
    expect(alpha.low).toBeCloseTo(intervals.blackouts_alpha.profile[0], 3)
    expect(alpha.high).toBeCloseTo(intervals.blackouts_alpha.profile[1], 3)
  })

  it('mean time between failures of air conditioning (Proschan 1963)', () => {
    const { tauSeconds } = fitContinuous(LAWS.exponential, dwellsOf('aircondit', false), BOTH).parameters
    expect(tauSeconds.estimate).toBeCloseTo(intervals.aircondit_mean.mle, 1)
    expect(tauSeconds.low).toBeCloseTo(intervals.aircondit_mean.profile[0], 1)
    expect(tauSeconds.high).toBeCloseTo(intervals.aircondit_mean.profile[1], 0)
  })

  it('rate of a censored exponential (Gehan 1965)', () => {
    const { tauSeconds } = fitContinuous(LAWS.exponential, dwellsOf('gehan_6MP', false), BOTH).parameters
    const [low, high] = intervals.gehan_6MP_rate.profile
    expect(1 / (tauSeconds.estimate ?? Number.NaN)).toBeCloseTo(intervals.gehan_6MP_rate.rate, 5)
    expect(1 / (tauSeconds.high ?? Number.NaN)).toBeCloseTo(low, 5)
    expect(1 / (tauSeconds.low ?? Number.NaN)).toBeCloseTo(high, 5)
  })

  it('exponent and cutoff together (density form)', () => {
    const { aircondit_cutoff_profile: expected } = intervals
    const { alpha, tauSeconds } = fitContinuous(
      LAWS['power-cutoff-density'],
      dwellsOf('aircondit', true),
      BOTH,
    ).parameters
    expect(alpha.estimate).toBeCloseTo(expected.alpha, 3)
    expect(alpha.low).toBeCloseTo(expected.alpha_CI[0], 2)
    expect(alpha.high).toBeCloseTo(expected.alpha_CI[1], 2)
    expect(1 / (tauSeconds.high ?? Number.NaN) / expected.lambda_CI[0]).toBeCloseTo(1, 2)
    expect(1 / (tauSeconds.low ?? Number.NaN) / expected.lambda_CI[1]).toBeCloseTo(1, 2)
  })
})

describe('fitContinuous in closed form', () => {
  it('is 1 + n / sum ln(t/s) for the power law', () => {
    const seconds = [1.1, 2, 3.5, 8, 1.01, 40, 1.4, 1.9, 5, 2.2]
    const { estimate } = fitContinuous(
      LAWS.power,
      { seconds, ended: seconds.map(() => 1), shortestSeconds: 1 },
      BOTH,
    ).parameters['alpha']
    const logs = seconds.reduce((sum, t) => sum + Math.log(t), 0)
    expect(estimate).toBeCloseTo(1 + seconds.length / logs, 4)
  })
})
