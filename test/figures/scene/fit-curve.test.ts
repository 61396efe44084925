import { describe, expect, it } from 'vitest'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { lawNamed } from '../../../src/core/laws/all-laws.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { fitCurve } from '../../../src/figures/scene/fit-curve.ts'

const law = lawNamed('power-cutoff-density')
const random = seededRandom('fit curve')
const tally = new Map<number, number>()
for (let i = 0; i < 4000; i++) {
  const m = Math.max(1, Math.round(law.sample(random, [1.5, 0.2], 0.01) / 0.01))
  tally.set(m, (tally.get(m) ?? 0) + 1)
}
const bins = [...tally.keys()].sort((a, b) => a - b)
const none = new Float64Array(0)
const sample = {
  binSeconds: 0.01,
  edgeShare: 0.5,
  completeBins: Float64Array.from(bins),
  completeWeights: Float64Array.from(bins, (m) => tally.get(m) ?? 0),
  censoredBins: none,
  censoredWeights: none,
  enteredBins: none,
  enteredWeights: none,
}
const fit = fitLaw(law, sample, 3, { confidence: 0.95, intervals: false })

function integral({ seconds, values }: { seconds: Float64Array; values: Float64Array }): number {
  // Trapezium in ln t of t f(t).
  let sum = 0
  for (let i = 1; i < seconds.length; i++) {
    sum +=
      0.5 * (values[i] * seconds[i] + values[i - 1] * seconds[i - 1]) * Math.log(seconds[i] / seconds[i - 1])
  }
  return sum
}

describe('the curve of a fit', () => {
  it('has as a density the share of dwells that were fitted', () => {
    const curve = fitCurve(fit, 'density', 0.7, 0.025, 500, 60)
    if (curve === null) throw new Error('no curve')
    // From the lower edge of the first fitted dwell on; the trapezium rule on 72 points is good to a percent.
    expect(integral(curve)).toBeCloseTo(0.7, 1.7)
  })

  it('is as a survival the share at the shortest fitted dwell, and falls', () => {
    const curve = fitCurve(fit, 'survival', 0.4, 0.025, 100, 60)
    if (curve === null) throw new Error('no curve')
    expect(curve.values[0]).toBeCloseTo(0.4, 10)
    for (let i = 1; i < curve.values.length; i++) expect(curve.values[i]).toBeLessThan(curve.values[i - 1])
  })

  it('starts as t x hazard near alpha - 1 and rises at the cutoff', () => {
    const curve = fitCurve(fit, 'hazard', 1, 0.025, 100, 60)
    if (curve === null) throw new Error('no curve')
    const alpha = fit.coordinates[0]
    expect(curve.values[0]).toBeGreaterThan(alpha - 1)
    expect(curve.values[0]).toBeLessThan(alpha - 1 + 0.15)
    expect(curve.values.at(-1)).toBeGreaterThan(3)
  })

  it('is none without a fit', () => {
    expect(fitCurve({ ...fit, coordinates: [] }, 'density', 1, 0.01, 1, 1)).toBeNull()
  })
})
