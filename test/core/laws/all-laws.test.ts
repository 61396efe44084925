import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { LAWS, lawNamed } from '../../../src/core/laws/all-laws.ts'
import type { LawAt, LawName } from '../../../src/core/laws/law.ts'
import { integrate } from '../../../src/core/numeric/gauss-legendre.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import reference from '../../reference/laws.json' with { type: 'json' }
import { kolmogorovDistance, kolmogorovLimit } from '../numeric/kolmogorov.ts'
import { LAW_CASES } from './law-cases.ts'

const SEED = 20_120

/** Integral of the density over [from, to], in narrow panels of ln t. */
function mass(at: LawAt, from: number, to: number, panels = 400): number {
  const width = Math.log(to / from) / panels
  let sum = 0
  for (let i = 0; i < panels; i++) {
    const low = Math.log(from) + i * width
    sum += integrate((u) => Math.exp(at.logDensity(Math.exp(u)) + u), low, low + width, 10)
  }
  return sum
}

/** Duration that a share of e^-depth outlives, to a factor of 2^(1/8). */
function depthSeconds(at: LawAt, shortest: number, depth: number): number {
  let t = shortest
  while (at.logSurvival(t) > -depth && t < 1e290) t *= 2 ** 0.125
  return t
}

describe('LAWS', () => {
  it('holds each law under its own name, with one coordinate per parameter', () => {
    for (const [name, law] of Object.entries(LAWS)) {
      expect(law.name).toBe(name)
      expect(lawNamed(law.name)).toBe(law)
      expect(law.coordinates).toHaveLength(law.parameters.length)
      for (const { low, high } of [...law.parameters, ...law.coordinates]) expect(low).toBeLessThan(high)
      for (const text of [law.label, law.formula, law.source]) expect(text.length).toBeGreaterThan(0)
    }
  })

  it('agrees with SciPy and mpmath, in density and survival, to 2e-13 of the logarithm or absolutely', () => {
    expect(new Set(reference.rows.map(({ law }) => law)).size).toBe(6)
    for (const row of reference.rows) {
      const at = lawNamed(row.law as LawName).at(row.coordinates, row.shortest)
      const where = `${row.law} (${row.coordinates.join(', ')}) at ${row.t} s, ${row.by}`
      const near = (got: number, expected: number): void =>
        expect(Math.abs(got - expected), where).toBeLessThan(2e-13 * Math.max(1, Math.abs(expected)))
      near(at.logDensity(row.t), row.lnDensity)
      near(at.logSurvival(row.t), row.lnSurvival)
    }
  })
})

describe.each(LAW_CASES)('$name', ({ law, coordinates, shortest }) => {
  const at = law.at(coordinates, shortest)

  it('starts at the shortest duration', () => {
    expect(at.logDensity(shortest * 0.999)).toBe(Number.NEGATIVE_INFINITY)
    expect(at.logDensity(0)).toBe(Number.NEGATIVE_INFINITY)
    expect(Math.abs(at.logSurvival(shortest))).toBe(0)
    expect(Math.abs(at.logSurvival(shortest / 2))).toBe(0)
    expect(at.logDensity(shortest)).toBeGreaterThan(Number.NEGATIVE_INFINITY)
  })

  it('is no number for no number, and nothing is left at infinity', () => {
    expect(at.logDensity(Number.NaN)).toBeNaN()
    expect(at.logSurvival(Number.NaN)).toBeNaN()
    expect(at.logDensity(Number.POSITIVE_INFINITY)).toBe(Number.NEGATIVE_INFINITY)
    expect(at.logSurvival(Number.POSITIVE_INFINITY)).toBe(Number.NEGATIVE_INFINITY)
  })

  it('has a density that integrates to the survival it claims, piece by piece and in the tail', () => {
    let from = shortest
    for (const depth of [0.1, 1, 3, 8, 20]) {
      const to = depthSeconds(at, shortest, depth)
      if (to >= 1e290) break
      // Relative to what is left at the start of the piece, so that the tail is checked as sharply as the body.
      const left = Math.exp(at.logSurvival(from))
      const expected = -Math.expm1(at.logSurvival(to) - at.logSurvival(from))
      expect(Math.abs(mass(at, from, to) / left - expected), `${from} to ${to} s`).toBeLessThan(1e-10)
      from = to
    }
    expect(from).toBeGreaterThan(shortest)
  })

  it('has a survival that never rises', () => {
    let before = 0
    const end = depthSeconds(at, shortest, 30)
    for (let i = 1; i <= 300; i++) {
      const here = at.logSurvival(shortest * (end / shortest) ** (i / 300))
      expect(here).toBeLessThanOrEqual(before)
      before = here
    }
  })

  it('given a later start is itself, started later', () => {
    const later = shortest * 2.5
    const same = law.at(coordinates, later)
    const atLater = at.logSurvival(later)
    // A law that has all but ended by then has lost its digits in the difference.
    const tolerance = 1e-12 * Math.max(1, Math.abs(atLater))
    for (const t of [later, later * 1.1, later * 3, later * 40]) {
      const [density, survival] = [at.logDensity(t), at.logSurvival(t)]
      const scale = tolerance + 1e-13 * Math.abs(survival)
      expect(Math.abs(same.logDensity(t) - (density - atLater))).toBeLessThan(scale)
      expect(Math.abs(same.logSurvival(t) - (survival - atLater))).toBeLessThan(scale)
    }
  })

  it('knows no unit of time', () => {
    // A power of two, so that rounding is the same on both sides.
    const factor = 1024
    const scaled = law.coordinates.map(({ name }, i) => {
      if (name === 'kappa' || name === 'rate') return coordinates[i] / factor
      if (name === 'lnMedian' || name === 'lnTau') return coordinates[i] + Math.log(factor)
      return coordinates[i]
    })
    const slow = law.at(scaled, shortest * factor)
    for (const ratio of [1, 1.3, 8, 100]) {
      const t = shortest * ratio
      const tolerance = 1e-11 * Math.max(1, Math.abs(at.logSurvival(t)))
      expect(Math.abs(slow.logDensity(t * factor) + Math.log(factor) - at.logDensity(t))).toBeLessThan(
        tolerance,
      )
      expect(Math.abs(slow.logSurvival(t * factor) - at.logSurvival(t))).toBeLessThan(tolerance)
    }
  })

  it('samples what it says (Kolmogorov distance, false alarm 1e-4 per law)', () => {
    const n = 8000
    const random = seededRandom(`${SEED} ${law.name} ${coordinates.join(' ')}`)
    const sample = Float64Array.from({ length: n }, () => law.sample(random, coordinates, shortest))
    for (const t of sample) expect(t >= shortest, `${t}`).toBe(true)
    const distance = kolmogorovDistance(sample, (t) => -Math.expm1(at.logSurvival(t)))
    expect(distance).toBeLessThan(kolmogorovLimit(n, 1e-4))
  })

  it('reports parameters and takes them back', () => {
    const parameters = law.parametersOf(coordinates)
    expect(parameters).toHaveLength(law.parameters.length)
    const back = law.coordinatesOf(parameters)
    for (const [i, value] of coordinates.entries()) expect(back[i]).toBeCloseTo(value, 10)
  })
})

describe.each(Object.values(LAWS))('start of $name', (law) => {
  it('is finite, inside the ranges, and gives every dwell a chance', () => {
    const shortest = fc.double({ min: 1e-6, max: 1e3, noNaN: true })
    // The first ratio is exactly 1 now and then: a dwell of the shortest duration.
    const dwell = fc.tuple(
      fc.oneof(fc.constant(0), fc.double({ min: 0, max: 25, noNaN: true })),
      fc.integer({ min: 1, max: 1000 }),
    )
    fc.assert(
      fc.property(shortest, fc.array(dwell, { minLength: 1, maxLength: 30 }), (s, dwells) => {
        const seconds = Float64Array.from(dwells, ([ln]) => s * Math.exp(ln))
        const weights = Float64Array.from(dwells, ([, weight]) => weight)
        const start = law.start(seconds, weights, s)
        expect(start).toHaveLength(law.coordinates.length)
        for (const [i, { name, low, high }] of law.coordinates.entries()) {
          expect(Number.isFinite(start[i]), name).toBe(true)
          expect(start[i], name).toBeGreaterThanOrEqual(low)
          expect(start[i], name).toBeLessThanOrEqual(high)
        }
        const at = law.at(start, s)
        for (const t of seconds) expect(Number.isFinite(at.logDensity(t))).toBe(true)
      }),
      { seed: SEED, numRuns: 200 },
    )
  })
})
