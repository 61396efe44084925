import { describe, expect, it } from 'vitest'
import {
  discretePowerByDistance,
  fitDiscretePower,
  type Multiplicities,
} from '../../../src/core/fits/discrete-power.ts'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { power } from '../../../src/core/laws/power.ts'
import moby from '../../reference/moby-power-law.json' with { type: 'json' }

const WORDS = moby.valuesAndMultiplicity.map(([value, count]) => [value, count] as const)

describe('discrete power law on the words of a novel (Clauset, Shalizi and Newman 2009, table 6.1)', () => {
  it('finds the published exponent, shortest value and number', () => {
    const fit = discretePowerByDistance(WORDS)
    expect(fit?.shortest).toBe(moby.published.xmin)
    expect(fit?.n).toBe(moby.published.ntail)
    expect(Math.abs((fit?.alpha ?? 0) - moby.published.alpha)).toBeLessThan(0.005)
    expect(fit?.alpha).toBeCloseTo(moby.reproduced.alpha, 5)
    expect(fit?.distance).toBeCloseTo(moby.reproduced.ksDistance, 5)
  })

  it('sits at the top of its likelihood, summed plainly', () => {
    const { alpha, logLikelihood } = fitDiscretePower(WORDS, 7)
    const plain = (a: number): number => {
      let norm = 0
      for (let k = 7; k < 20000; k++) norm += k ** -a
      // Rest of the sum by Euler and Maclaurin.
      norm += 20000 ** (1 - a) / (a - 1) + 0.5 * 20000 ** -a + (a / 12) * 20000 ** (-a - 1)
      return WORDS.filter(([k]) => k >= 7).reduce(
        (sum, [k, n]) => sum - n * (a * Math.log(k) + Math.log(norm)),
        0,
      )
    }
    expect(plain(alpha)).toBeCloseTo(logLikelihood, 5)
    expect(plain(alpha)).toBeGreaterThan(plain(alpha + 0.002))
    expect(plain(alpha)).toBeGreaterThan(plain(alpha - 0.002))
  })

  it('nearly agrees with the binned law on the same counts far from 1', () => {
    // Whole numbers are not rounded durations; from 30 on the difference is small beside the standard error of 0.04.
    const tail = WORDS.filter(([k]) => k >= 30)
    const sample = {
      binSeconds: 1,
      edgeShare: 0.5,
      completeBins: Float64Array.from(tail, ([k]) => k),
      completeWeights: Float64Array.from(tail, ([, n]) => n),
      censoredBins: new Float64Array(0),
      censoredWeights: new Float64Array(0),
      enteredBins: new Float64Array(0),
      enteredWeights: new Float64Array(0),
    }
    const fit = fitLaw(power, sample, 30, { confidence: 0.95, intervals: false })
    expect(fit.parameters['alpha'].estimate).toBeCloseTo(fitDiscretePower(WORDS, 30).alpha, 2)
  })

  it('has nothing to say about too few values', () => {
    const one: Multiplicities = [[3, 100]]
    expect(discretePowerByDistance(one)).toBeNull()
    expect(discretePowerByDistance([])).toBeNull()
  })
})
