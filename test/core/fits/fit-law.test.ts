import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { binLikelihood } from '../../../src/core/fits/bin-likelihood.ts'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { power } from '../../../src/core/laws/power.ts'
import { drawnBins, sampleOf, TYPICAL } from './plain-likelihood.ts'

const BOTH = { confidence: 0.95, intervals: true }
const HALF_LEVEL = 0.5 * 3.841458820694124

describe('fitLaw', () => {
  it.each(Object.values(LAWS))('finds the best point of a dense grid: $name', (law) => {
    const truth = TYPICAL[law.name]
    const sample = sampleOf(drawnBins(law, truth, 500, `grid ${law.name}`), { censored: [300] })
    const fit = fitLaw(law, sample, 3, BOTH)
    expect(fit.status).toBe('ok')
    const likelihood = binLikelihood(law, sample, 3)
    // A grid that halves its width about its best point, thirty times.
    let centre: number[] = [...truth]
    let width = truth.map((v) => Math.max(0.6 * Math.abs(v), 0.3))
    let best = likelihood.at(centre)
    for (let round = 0; round < 30; round++) {
      const marks = [-1, -0.5, 0, 0.5, 1]
      const points = marks.flatMap((p) => (truth.length === 1 ? [[p]] : marks.map((q) => [p, q])))
      for (const point of points) {
        const x = centre.map((v, i) => v + point[i] * width[i])
        const value = likelihood.at(x)
        if (value > best) {
          best = value
          centre = x
        }
      }
      width = width.map((w) => w * (round < 6 ? 0.9 : 0.65))
    }
    expect(fit.logLikelihood ?? Number.NaN).toBeGreaterThan(best - 2e-5)
    law.parametersOf(centre).forEach((value, i) => {
      const { estimate, low, high } = fit.parameters[law.parameters[i].name]
      expect(Math.abs((estimate ?? Number.NaN) - value)).toBeLessThan(0.02 * ((high ?? 0) - (low ?? 0)))
    })
  })

  it.each(Object.values(LAWS))('draws its limits where the profile meets the level: $name', (law) => {
    const sample = sampleOf(drawnBins(law, TYPICAL[law.name], 400, `profile ${law.name}`))
    const fit = fitLaw(law, sample, 3, BOTH)
    const likelihood = binLikelihood(law, sample, 3)
    law.parameters.forEach(({ name }, i) => {
      for (const end of ['low', 'high'] as const) {
        const value = fit.parameters[name][end]
        if (value === null) throw new Error(`${law.name}: no ${end} of ${name}`)
        const parameters = law.parametersOf(fit.coordinates)
        parameters[i] = value
        const fixed = law.coordinatesOf(parameters)
        // Slow profile: the other coordinate by golden section over a wide range.
        const height =
          fixed.length === 1
            ? likelihood.at(fixed)
            : goldenTop(
                (other) => likelihood.at(fixed.map((v, j) => (j === i ? v : other))),
                fit.coordinates[1 - i],
              )
        expect((fit.logLikelihood ?? Number.NaN) - height).toBeCloseTo(HALF_LEVEL, 1.7)
      }
    })
  })

  it('reports a cutoff that may be absent as a bound', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 200, 'bound 3'))
    for (const name of ['power-cutoff-survival', 'power-cutoff-density'] as const) {
      const { tauSeconds } = fitLaw(LAWS[name], sample, 3, BOTH).parameters
      expect(tauSeconds.high).toBeNull()
      expect(tauSeconds.low).toBeGreaterThan(1)
    }
  })

  it('says so when no cutoff is the best', () => {
    // Short dwells end fast, S = (t/3)^-1.2; the few that outlive 30 bins go on for 3000 and are cut.
    const bins = Array.from({ length: 150 }, (_, i) => Math.round(3 * ((i + 0.5) / 150) ** (-1 / 1.2)))
    const sample = sampleOf(
      bins.filter((m) => m < 30),
      { censored: bins.filter((m) => m >= 30).map(() => 3000) },
    )
    for (const name of ['power-cutoff-survival', 'power-cutoff-density'] as const) {
      const fit = fitLaw(LAWS[name], sample, 3, BOTH)
      expect(fit.status).toBe('at-bound')
      expect(fit.message).toMatch(/No cutoff improves the fit/)
      expect(fit.coordinates[1]).toBe(0)
      const { tauSeconds, alpha } = fit.parameters
      expect(tauSeconds.estimate).toBeNull()
      expect(tauSeconds.high).toBeNull()
      expect(tauSeconds.low).toBeGreaterThan(0)
      const plain = fitLaw(power, sample, 3, BOTH)
      expect(alpha.estimate).toBeCloseTo(plain.parameters['alpha'].estimate ?? Number.NaN, 3)
      expect(fit.logLikelihood).toBeCloseTo(plain.logLikelihood ?? Number.NaN, 5)
    }
  })

  it.each(Object.values(LAWS))('comes to the same place from bad starts: $name', (law) => {
    const sample = sampleOf(drawnBins(law, TYPICAL[law.name], 300, `start ${law.name}`))
    const plain = fitLaw(law, sample, 3, { confidence: 0.95, intervals: false })
    expect(plain.status).toBe('no-interval')
    const bad: Record<string, number[][]> = {
      power: [[7.9], [1.0001]],
      'power-cutoff-survival': [
        [7, 1e3],
        [1.001, 0],
      ],
      'power-cutoff-density': [
        [-1.9, 1e3],
        [7, 1e-8],
      ],
      exponential: [[1e4], [1e-6]],
      'log-normal': [
        [30, 0.1],
        [-200, 25],
      ],
      stretched: [
        [20, 4],
        [-300, 0.02],
      ],
    }
    for (const start of [...bad[law.name], [Number.NaN, 0], []]) {
      const fit = fitLaw(law, sample, 3, { confidence: 0.95, intervals: false, start })
      expect(fit.status).toBe('no-interval')
      expect(fit.logLikelihood).toBeCloseTo(plain.logLikelihood ?? Number.NaN, 4)
    }
  })

  it('says what to do when there are too few dwells', () => {
    const fit = fitLaw(power, sampleOf([3, 4, 5, 1, 1, 1, 1, 1, 1, 1, 1], { censored: [9] }), 3, BOTH)
    expect(fit).toMatchObject({
      status: 'too-few-dwells',
      complete: 3,
      censored: 1,
      coordinates: [],
      logLikelihood: null,
      aicc: null,
    })
    expect(fit.message).toMatch(/^3 complete dwells of at least 3 bins; a fit needs 10\. Lower/)
    expect(fit.parameters['alpha']).toEqual({ estimate: null, low: null, high: null, unit: '' })
  })

  it('warns of few dwells in the message, with status ok', () => {
    const few = fitLaw(power, sampleOf(drawnBins(power, [1.5], 40, 'few')), 3, BOTH)
    expect(few.status).toBe('ok')
    expect(few.message).toMatch(/^Only 40 complete dwells/)
    expect(fitLaw(power, sampleOf(drawnBins(power, [1.5], 60, 'few')), 3, BOTH).message).toBe('')
    const two = fitLaw(
      LAWS['log-normal'],
      sampleOf(drawnBins(LAWS['log-normal'], [-2, 1.5], 150, 'few')),
      3,
      BOTH,
    )
    expect(two.message).toMatch(/^150 complete dwells; a law of two parameters/)
  })

  it('says that a law does not suit dwells that are all alike', () => {
    const fit = fitLaw(power, sampleOf(Array.from({ length: 50 }, () => 3)), 3, BOTH)
    expect(fit.status).toBe('at-bound')
    expect(fit.message).toMatch(/end of its range/)
  })

  it('counts complete and censored dwells in AICc and BIC', () => {
    const fit = fitLaw(
      LAWS.stretched,
      sampleOf(drawnBins(LAWS.stretched, [-2, 0.5], 100, 'aicc'), { censored: [50, 60] }),
      3,
      BOTH,
    )
    const l = fit.logLikelihood ?? Number.NaN
    expect(fit.aicc).toBeCloseTo(-2 * l + 4 + 12 / 99, 9)
    expect(fit.bic).toBeCloseTo(-2 * l + 2 * Math.log(102), 9)
  })

  it('rescales rates and times exactly with the unit of time', () => {
    const bins = drawnBins(LAWS['power-cutoff-survival'], [1.5, 0.2], 400, 'unit')
    const fits = [0.01, 10].map((binSeconds) =>
      fitLaw(LAWS['power-cutoff-survival'], sampleOf(bins, { binSeconds }), 3, BOTH),
    )
    for (const end of ['estimate', 'low', 'high'] as const) {
      const [a, b] = fits.map((fit) => fit.parameters)
      expect((b['tauSeconds'][end] ?? 0) / (a['tauSeconds'][end] ?? 0) / 1000).toBeCloseTo(1, 3)
      expect(b['alpha'][end]).toBeCloseTo(a['alpha'][end] ?? Number.NaN, 3)
    }
  })

  it('never throws and never reports a number that is not finite', () => {
    const durations = fc.array(
      fc.oneof(
        fc.integer({ min: 1, max: 40 }),
        fc.integer({ min: 1, max: 1e7 }),
        fc.constant(Number.NaN),
        fc.constant(Infinity),
        fc.constant(-3),
      ),
      { maxLength: 40 },
    )
    fc.assert(
      fc.property(
        durations,
        durations,
        durations,
        fc.constantFrom(...Object.values(LAWS)),
        fc.constantFrom(0, 1, 2, 3, 50, Number.NaN),
        (complete, censored, entered, law, shortest) => {
          const fit = fitLaw(law, sampleOf(complete, { censored, entered }), shortest, BOTH)
          for (const { estimate, low, high } of Object.values(fit.parameters)) {
            for (const v of [estimate, low, high]) expect(v === null || Number.isFinite(v)).toBe(true)
            if (fit.status === 'ok') expect(estimate).not.toBeNull()
            if (estimate !== null && low !== null)
              expect(low).toBeLessThanOrEqual(estimate * (1 + 1e-6) + 1e-9)
            if (estimate !== null && high !== null)
              expect(high).toBeGreaterThanOrEqual(estimate * (1 - 1e-6) - 1e-9)
          }
          for (const v of [fit.logLikelihood, fit.aicc, fit.bic])
            expect(v === null || Number.isFinite(v)).toBe(true)
          if (fit.status !== 'ok' && fit.status !== 'no-interval') expect(fit.message).not.toBe('')
        },
      ),
      { seed: 77, numRuns: 250 },
    )
  })
})

/** Greatest value of f over a bracket that is found by walking out from a start. */
function goldenTop(f: (x: number) => number, start: number): number {
  let step = 1e-3 * Math.max(Math.abs(start), 0.01)
  const side = f(start + step) > f(start - step) ? 1 : -1
  let a = start - side * step
  let b = start
  while (f(b + side * step) > f(b) && step < 1e6) {
    a = b
    b += side * step
    step *= 1.6
  }
  let [low, high] = [a, b + side * step].sort((p, q) => p - q)
  const golden = 0.5 * (Math.sqrt(5) - 1)
  for (let i = 0; i < 80; i++) {
    const [x, y] = [high - golden * (high - low), low + golden * (high - low)]
    if (f(x) > f(y)) high = y
    else low = x
  }
  return f(0.5 * (low + high))
}
