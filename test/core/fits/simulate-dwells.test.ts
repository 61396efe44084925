import { describe, expect, it } from 'vitest'
import { dwellSimulator, observedBins } from '../../../src/core/fits/simulate-dwells.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { power } from '../../../src/core/laws/power.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { drawnBins, plainMass, plainMeanSurvival, sampleOf } from './plain-likelihood.ts'

describe('observedBins', () => {
  // Edge rule: an edge bin counts when more than theta of it is in the state.
  it.each([
    [0.3, 0.4, 0.8, 0.8],
    [0.3, 3.3, 1, 3.7],
    [0.7, 0.8, 0.4, 0.4],
    [0.7, 3.3, 1, 2.9],
  ])(
    'at theta %f sees a dwell of %f bins with chance %f, and %f bins on average',
    (edgeShare, t, chance, mean) => {
      const random = seededRandom(`edge ${edgeShare} ${t}`)
      const n = 40_000
      let seen = 0
      let sum = 0
      for (let i = 0; i < n; i++) {
        const m = observedBins(t * 0.01, { binSeconds: 0.01, edgeShare }, random)
        if (m > 0) seen++
        sum += Math.max(0, m)
      }
      // Five standard errors of a share: false alarm below 1e-6.
      expect(Math.abs(seen / n - chance)).toBeLessThan(5 * Math.sqrt(0.25 / n) + 1e-12)
      expect(Math.abs(sum / n - mean)).toBeLessThan(5 * Math.sqrt(0.25 / n))
    },
  )
})

describe('dwellSimulator', () => {
  it('draws from the bin-exact probabilities', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 20_000, 'base'))
    const drawn = dwellSimulator(power, sample, 3).draw([1.7], seededRandom('draw'))
    const at = power.at([1.7], 0.018)
    const whole = plainMeanSurvival(at, 3, 0.4, 0.01, 1.8)
    for (const m of [3, 4, 5, 9]) {
      const share = plainMass(at, m, 0.4, 0.01, 1.8) / whole
      const count = drawn.completeWeights[drawn.completeBins.indexOf(m)]
      // Five standard deviations.
      expect(Math.abs(count - 20_000 * share)).toBeLessThan(5 * Math.sqrt(20_000 * share))
    }
    expect(drawn.censoredBins.length).toBe(0)
  })

  it('keeps the number of dwells, the bin, the edge share, the entries, and the ages of cuts', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 200, 'keep'), {
      censored: [1, 5, 9, 200, 200],
      entered: [7, 30],
    })
    const simulator = dwellSimulator(power, sample, 3)
    expect(simulator.dwells).toBe(204)
    for (let seed = 0; seed < 20; seed++) {
      const drawn = simulator.draw([1.4], seededRandom(seed))
      const total = (weights: Float64Array): number => weights.reduce((a, b) => a + b, 0)
      expect(total(drawn.completeWeights) + total(drawn.censoredWeights)).toBe(204)
      for (const age of drawn.censoredBins) expect([5, 9, 200]).toContain(age)
      expect(Math.min(...drawn.completeBins, ...drawn.censoredBins)).toBeGreaterThanOrEqual(3)
      expect(drawn.enteredBins).toBe(sample.enteredBins)
      expect([drawn.binSeconds, drawn.edgeShare]).toEqual([0.01, 0.4])
    }
  })

  it('cuts as often as the observed data do, when every dwell faced the same cut', () => {
    // All dwells were cut at 30 bins; simulated ones must be too, and never pass it.
    const bins = drawnBins(LAWS.exponential, [5], 3000, 'cut')
    const sample = sampleOf(
      bins.filter((m) => m < 30),
      {
        censored: Array.from(
          bins.filter((m) => m >= 30),
          () => 30,
        ),
      },
    )
    const observed = sample.censoredWeights[0]
    const drawn = dwellSimulator(LAWS.exponential, sample, 3).draw([5], seededRandom('cut again'))
    expect(Math.max(...drawn.completeBins)).toBeLessThan(30)
    expect(Array.from(drawn.censoredBins)).toEqual([30])
    // Both are binomial: five standard deviations of a difference.
    expect(Math.abs(drawn.censoredWeights[0] - observed)).toBeLessThan(5 * Math.sqrt(2 * observed))
  })

  it('draws a dwell that was entered late from what lasts that long', () => {
    const sample = sampleOf([50, 60, 70], { entered: [40, 40, 40] })
    for (let seed = 0; seed < 30; seed++) {
      const drawn = dwellSimulator(LAWS.exponential, sample, 3).draw([20], seededRandom(seed))
      expect(Math.min(...drawn.completeBins)).toBeGreaterThanOrEqual(40)
    }
  })
})
