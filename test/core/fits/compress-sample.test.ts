import { describe, expect, it } from 'vitest'
import { binLikelihood } from '../../../src/core/fits/bin-likelihood.ts'
import { compressed } from '../../../src/core/fits/compress-sample.ts'
import { fitLikelihood } from '../../../src/core/fits/fit-law.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { power } from '../../../src/core/laws/power.ts'
import { drawnBins, sampleOf, TYPICAL } from './plain-likelihood.ts'

const many = sampleOf(drawnBins(power, [1.4], 6000, 'compress'), { censored: [400, 9000] })

describe('compressed', () => {
  it('keeps number, sum and sum of squares', () => {
    const list = { bins: many.completeBins, weights: many.completeWeights }
    const fewer = compressed(list)
    expect(list.bins.length).toBeGreaterThan(1000)
    expect(fewer.bins.length).toBeLessThan(450)
    for (const power of [0, 1, 2]) {
      const moment = ({ bins, weights }: typeof list): number =>
        bins.reduce((sum, m, i) => sum + weights[i] * m ** power, 0)
      expect(moment(fewer) / moment(list)).toBeCloseTo(1, 9)
    }
  })

  it('keeps short lists and short durations as they are', () => {
    const short = { bins: Float64Array.of(3, 70, 71), weights: Float64Array.of(1, 2, 3) }
    expect(compressed(short)).toEqual(short)
    const exact = compressed({ bins: many.completeBins, weights: many.completeWeights })
    const below = many.completeBins.filter((m) => m < 64)
    expect(Array.from(exact.bins.slice(0, below.length))).toEqual(Array.from(below))
  })

  it('passes durations that are not numbers on, for the likelihood to refuse', () => {
    const bins = Float64Array.from({ length: 300 }, (_, i) => (i === 5 ? Number.POSITIVE_INFINITY : 100 + i))
    expect(compressed({ bins, weights: bins.map(() => 1) }).bins).toBe(bins)
  })

  it.each(Object.values(LAWS))('changes ln L of the $name law by less than 1e-6 of it', (law) => {
    const full = binLikelihood(law, many, 3, { compress: false })
    const fast = binLikelihood(law, many, 3)
    const at = TYPICAL[law.name]
    expect(Math.abs(fast.at(at) / full.at(at) - 1)).toBeLessThan(1e-6)
  })

  it.each(Object.values(LAWS))(
    'moves no estimate or limit of the $name law by a hundredth of its interval',
    (law) => {
      const sample = sampleOf(drawnBins(law, TYPICAL[law.name], 3000, `estimate ${law.name}`), {
        censored: [700],
      })
      const options = { confidence: 0.95, intervals: true }
      const fits = [false, true].map((compress) =>
        fitLikelihood(law, sample, 3, binLikelihood(law, sample, 3, { compress }), options),
      )
      for (const { name } of law.parameters) {
        const [a, b] = fits.map((fit) => fit.parameters[name])
        const width = (a.high ?? Number.NaN) - (a.low ?? Number.NaN)
        expect(width).toBeGreaterThan(0)
        for (const end of ['estimate', 'low', 'high'] as const) {
          expect(Math.abs((a[end] ?? 0) - (b[end] ?? 0))).toBeLessThan(0.01 * width)
        }
      }
    },
  )
})
