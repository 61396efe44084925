import { describe, expect, it } from 'vitest'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { drawnBins, sampleOf } from './plain-likelihood.ts'

const RECORDS = 400
/** Binomial(400, 0.95): mean 380, sd 4.4. Outside this band with probability 1e-3 if the coverage is exactly 0.95. */
const BAND = [365, 393] as const

describe('95 % profile intervals', () => {
  it.each([
    ['power-cutoff-density', [1.5, 1 / 5]],
    ['power-cutoff-survival', [1.5, 1 / 5]],
    ['log-normal', [-2, 1.5]],
  ] as const)('of 300 dwells from three bins on cover the truth (tau/t0 = 500): %s', (name, truth) => {
    const law = LAWS[name]
    const wanted = law.parametersOf(truth)
    const covered = wanted.map(() => 0)
    const sums = wanted.map(() => 0)
    for (let record = 0; record < RECORDS; record++) {
      // The law begins at one bin of 10 ms.
      const sample = sampleOf(drawnBins(law, truth, 300, `coverage ${name} ${record}`))
      const { parameters } = fitLaw(law, sample, 3, { confidence: 0.95, intervals: true })
      law.parameters.forEach((parameter, i) => {
        const { estimate, low, high } = parameters[parameter.name]
        if ((low ?? 0) <= wanted[i] && wanted[i] <= (high ?? Number.POSITIVE_INFINITY)) covered[i]++
        sums[i] += estimate ?? wanted[i]
      })
    }
    for (const count of covered) {
      expect(count).toBeGreaterThanOrEqual(BAND[0])
      expect(count).toBeLessThanOrEqual(BAND[1])
    }
    // Mean bias of the exponent.
    if (law.parameters[0].name === 'alpha') expect(Math.abs(sums[0] / RECORDS - 1.5)).toBeLessThan(0.03)
  })
})
