import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { type DriftTerm, driftOf } from '../../../src/core/simulate/drift.ts'

const amount = fc.double({ min: -5, max: 5, noNaN: true })
const positive = fc.double({ min: 0.1, max: 50, noNaN: true })
const time = fc.double({ min: 0, max: 100, noNaN: true })
const term: fc.Arbitrary<DriftTerm> = fc.oneof(
  fc.record({ kind: fc.constant('linear' as const), perSecond: amount }),
  fc.record({
    kind: fc.constant('sinusoid' as const),
    amplitude: amount,
    periodSeconds: positive,
    zeroSeconds: time,
  }),
  fc.record({ kind: fc.constant('exponential' as const), amplitude: amount, tauSeconds: positive }),
  fc
    .array(fc.tuple(fc.double({ min: 0.01, max: 20, noNaN: true }), amount), { minLength: 1, maxLength: 6 })
    .map((steps) => {
      let t = 0
      const seconds = steps.map(([step]) => (t += step))
      return { kind: 'knots' as const, seconds, values: steps.map(([, value]) => value) }
    }),
)
const span = fc.tuple(time, positive).map(([from, length]) => [from, from + length] as const)

describe('driftOf', () => {
  it('integrates like the midpoint rule on 4000 slices', () => {
    fc.assert(
      fc.property(amount, fc.array(term, { maxLength: 3 }), span, (constant, terms, [from, to]) => {
        const drift = driftOf(constant, terms)
        const slices = 4000
        const width = (to - from) / slices
        let sum = 0
        for (let i = 0; i < slices; i++) sum += drift.at(from + (i + 0.5) * width) * width
        // Midpoint error: curvature of a sinusoid of period 0.1 s over slices of up to 12.5 ms, or corners at knots.
        const short = terms.some((t) => t.kind === 'sinusoid' && t.periodSeconds < 2)
        expect(Math.abs(drift.integral(from, to) - sum)).toBeLessThan(
          (short ? 2e-1 : 2e-2) * (1 + Math.abs(sum)),
        )
      }),
      { seed: 11, numRuns: 200 },
    )
  })

  it('adds integrals over neighbouring spans', () => {
    fc.assert(
      fc.property(fc.array(term, { maxLength: 3 }), span, time, (terms, [from, middle], more) => {
        const drift = driftOf(1, terms)
        const parts = drift.integral(from, middle) + drift.integral(middle, middle + more)
        expect(drift.integral(from, middle + more)).toBeCloseTo(parts, 6)
      }),
      { seed: 12, numRuns: 200 },
    )
  })

  it('bounds how far the value strays from its middle', () => {
    fc.assert(
      fc.property(
        fc.array(term, { maxLength: 3 }),
        span,
        fc.double({ min: 0, max: 1, noNaN: true }),
        (terms, [from, to], u) => {
          const drift = driftOf(1, terms)
          const away = Math.abs(drift.at(from + u * (to - from)) - drift.at(0.5 * (from + to)))
          expect(away).toBeLessThanOrEqual(drift.excursion(from, to) + 1e-9)
        },
      ),
      { seed: 13, numRuns: 1000 },
    )
  })

  it('has known values', () => {
    const wave = driftOf(2, [{ kind: 'sinusoid', amplitude: 3, periodSeconds: 8, zeroSeconds: 1 }])
    expect(wave.at(3)).toBeCloseTo(5, 12)
    expect(wave.integral(1, 5)).toBeCloseTo(8 + (2 * 3 * 8) / (2 * Math.PI), 12)
    const ramp = driftOf(0, [{ kind: 'knots', seconds: [1, 3], values: [0, 4] }])
    expect([ramp.at(0), ramp.at(2), ramp.at(9)]).toEqual([0, 2, 4])
    expect(ramp.integral(0, 5)).toBeCloseTo(4 + 8, 12)
    expect(driftOf(7, []).constant).toBe(true)
  })

  it('refuses knots out of order', () => {
    expect(() => driftOf(0, [{ kind: 'knots', seconds: [2, 1], values: [0, 0] }])).toThrow(/rising times/)
    expect(() => driftOf(0, [{ kind: 'knots', seconds: [], values: [] }])).toThrow(/0 times/)
    expect(() => driftOf(0, [{ kind: 'exponential', amplitude: 1, tauSeconds: 0 }])).toThrow(/received 0 s/)
  })
})
