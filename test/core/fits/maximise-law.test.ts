import { describe, expect, it } from 'vitest'
import { binLikelihood } from '../../../src/core/fits/bin-likelihood.ts'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { referenceSeconds } from '../../../src/core/fits/mean-survival.ts'
import { type ProfileAxis, searchFrame } from '../../../src/core/fits/search-frame.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { minimise1d } from '../../../src/core/numeric/minimise.ts'
import { drawnBins, sampleOf, TYPICAL } from './plain-likelihood.ts'

const Z = 1.959963984540054

/** Greatest height over the other coordinate: a scan over twelve decades to both sides, then Brent around the best. */
function slowProfile(height: (other: number) => number, axis: ProfileAxis, around: number): number {
  if (axis.otherRange === null) return height(0)
  const { low, high } = axis.otherRange
  let top = Number.NEGATIVE_INFINITY
  let place = around
  for (let k = -60; k <= 60; k++) {
    for (const side of [-1, 1]) {
      const other = Math.min(high, Math.max(low, around + side * 10 ** (k / 6 - 6)))
      const here = height(other)
      if (here > top) {
        top = here
        place = other
      }
    }
  }
  const width = Math.max(0.5 * Math.abs(place - around), 1e-6)
  const found = minimise1d(
    (other) => -height(other),
    Math.max(low, place - width),
    Math.min(high, place + width),
    {
      tolerance: 1e-10,
    },
  )
  return Math.max(top, -found.value)
}

describe('profile limits of every law on the dwells of every law', () => {
  // Wrong laws run along ridges and into the edges of their ranges: the hard cases of the walk.
  it.each(Object.values(LAWS))(
    'meet the level, or lie beyond the range: dwells of the $name law',
    (truth) => {
      for (const n of [15, 100]) {
        for (let seed = 0; seed < 3; seed++) {
          const bins = drawnBins(truth, TYPICAL[truth.name], n, `limits ${seed}`)
          const sample = sampleOf(bins, { censored: seed === 1 ? [50, 500] : [] })
          for (const law of Object.values(LAWS)) {
            const fit = fitLaw(law, sample, 3, { confidence: 0.95, intervals: true })
            expect(['ok', 'at-bound']).toContain(fit.status)
            const likelihood = binLikelihood(law, sample, 3)
            const frame = searchFrame(law, referenceSeconds(sample, 3), 0.1)
            const turned = (i: number): boolean => ['kappa', 'rate'].includes(law.coordinates[i].name)
            law.parameters.forEach(({ name }, i) => {
              const axis = frame.axes[i]
              const { other } = axis.read(frame.fromLaw(fit.coordinates))
              const fall = (value: number): number => {
                const height = (o: number): number => {
                  const here = likelihood.at(frame.toLaw(axis.place(value, o)))
                  return Number.isNaN(here) ? Number.NEGATIVE_INFINITY : here
                }
                const top = slowProfile(height, axis, other)
                return Math.sqrt(Math.max(0, 2 * ((fit.logLikelihood ?? Number.NaN) - top)))
              }
              for (const end of ['low', 'high'] as const) {
                const limit = fit.parameters[name][end]
                if (limit !== null) {
                  const parameters = law.parametersOf(fit.coordinates)
                  parameters[i] = limit
                  // A hundredth of a standard error of the limit.
                  expect(Math.abs(fall(law.coordinatesOf(parameters)[i]) - Z)).toBeLessThan(0.01)
                } else {
                  const bound = (end === 'low') === turned(i) ? axis.range.high : axis.range.low
                  expect(fall(bound)).toBeLessThan(Z + 0.01)
                }
              }
            })
          }
        }
      }
    },
  )
})
