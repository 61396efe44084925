import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { searchFrame } from '../../../src/core/fits/search-frame.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { TYPICAL } from './plain-likelihood.ts'

describe('searchFrame', () => {
  it.each(Object.values(LAWS))('goes there and back: $name', (law) => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-4, max: 1e3, noNaN: true }),
        fc.double({ min: 0.5, max: 2, noNaN: true }),
        fc.double({ min: 0.5, max: 2, noNaN: true }),
        (typical, p, q) => {
          const frame = searchFrame(law, 0.02, typical)
          const coordinates = TYPICAL[law.name].map((v, i) => v * (i === 0 ? p : q))
          const search = frame.fromLaw(coordinates)
          frame.toLaw(search).forEach((v, i) => expect(v).toBeCloseTo(coordinates[i], 8))
          frame.axes.forEach((axis, i) => {
            const { value, other } = axis.read(search)
            expect(value).toBeCloseTo(coordinates[i], 8)
            axis.place(value, other).forEach((v, j) => expect(v / search[j]).toBeCloseTo(1, 8))
          })
          for (const scale of frame.scales(search, 300, 1)) expect(scale).toBeGreaterThan(0)
        },
      ),
      { seed: 3, numRuns: 40 },
    )
  })

  it('runs a log-normal and a stretched exponential into the power law they resemble', () => {
    // Exponent at the typical duration: 1 + b, 1 + a.
    const slope = (name: 'log-normal' | 'stretched', search: number[]): number => {
      const frame = searchFrame(LAWS[name], 1, 10)
      const at = LAWS[name].at(frame.toLaw(search), 1)
      return -(at.logDensity(10.001) - at.logDensity(9.999)) / Math.log(10.001 / 9.999)
    }
    expect(slope('log-normal', [0.6, 0.01])).toBeCloseTo(1.6, 6)
    expect(slope('stretched', [Math.log(0.6), 0.01])).toBeCloseTo(1.6 - 0.01, 6)
  })
})
