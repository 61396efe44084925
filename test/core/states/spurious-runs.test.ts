import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { buildThresholdTable } from '../../../src/core/states/build-threshold-table.ts'
import {
  expectedSpurious,
  interiorRuns,
  splitRuns,
  spuriousChance,
  spuriousSafeBins,
} from '../../../src/core/states/spurious-runs.ts'
import { levelledOf } from './plain-tally.ts'

describe('splitRuns', () => {
  // Expected counts per dwell, n = 60, p1 = 0.03, four digits.
  it.each([
    [1, 0.1088],
    [5, 0.0933],
    [20, 0.0517],
    [59, 0.0099],
    [60, 0.1608],
  ])('of %d bins', (m, expected) => {
    expect(splitRuns(60, 0.03, m)).toBeCloseTo(expected, 4)
  })

  it('accounts for every bin that is not missed', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 200 }), fc.double({ min: 0, max: 0.9, noNaN: true }), (n, p) => {
        let bins = 0
        for (let m = 1; m <= n + 1; m++) bins += m * splitRuns(n, p, m)
        expect(bins).toBeCloseTo(n * (1 - p), 8)
      }),
      { seed: 9 },
    )
  })

  it('is a true dwell unharmed without misses', () => {
    expect(splitRuns(9, 0, 9)).toBe(1)
    expect(splitRuns(9, 0, 3)).toBe(0)
    expect(splitRuns(9, 0.1, 10)).toBe(0)
  })
})

describe('interiorRuns', () => {
  it('is the sum over all patterns of a short dwell', () => {
    const n = 10
    const p = 0.2
    for (let m = 1; m <= n; m++) {
      let expected = 0
      for (let pattern = 0; pattern < 1 << n; pattern++) {
        const wrong = Array.from({ length: n }, (_, i) => (pattern >> i) & 1)
        const chance = wrong.reduce((all, w) => all * (w === 1 ? p : 1 - p), 1)
        const text = wrong.join('')
        for (let i = 1; i + m < n; i++)
          if (text.slice(i - 1, i + m + 1) === `0${'1'.repeat(m)}0`) expected += chance
      }
      expect(interiorRuns(n, p, m)).toBeCloseTo(expected, 12)
    }
  })
})

/** A record of long dwells whose bins are called wrong independently with chances p0 (off) and p1 (on). */
function misread(bins: number, dwell: number, p0: number, p1: number, seed: string) {
  const random = seededRandom(seed)
  const truth = Uint16Array.from({ length: bins }, (_, i) => Math.floor(i / dwell) % 2)
  const seen = truth.map((on) => (random.uniform() < (on === 1 ? p1 : p0) ? 1 - on : on))
  return buildThresholdTable(levelledOf(seen), null, { firstThreshold: 1, step: 1, rows: 1 })
}

describe('expectedSpurious', () => {
  it('predicts simulated spurious and split dwells of both states', () => {
    const p0 = 0.02
    const p1 = 0.01
    const dwell = 200
    const table = misread(800000, dwell, p0, p1, 'spurious')
    const errors = { falseOnPerBin: p0, falseOffPerBin: p1 }
    // Durations of a few bins are spurious, 10 to 100 bins split; edges of true dwells move both by one per cent or so.
    for (const state of [0, 1] as const) {
      const { spurious, split, observed } = expectedSpurious(table, 0, 0, state, errors)
      for (const m of [1, 2]) {
        const expected = spurious[m - 1] + split[m - 1]
        // Five standard deviations (false alarm 6e-7 each) and 3 % for higher orders.
        expect(Math.abs(observed[m - 1] - expected)).toBeLessThan(0.03 * expected + 5 * Math.sqrt(expected))
      }
      const sum = (values: Float64Array): number => values.subarray(9, 64).reduce((a, b) => a + b, 0)
      expect(sum(spurious)).toBeLessThan(1)
      // Two to four misreadings in every dwell: far beyond first order, some 20 % of the split dwells are not foreseen.
      expect(sum(split) / sum(observed)).toBeGreaterThan(0.7)
      expect(sum(split) / sum(observed)).toBeLessThan(1.1)
    }
  })

  it('is right within noise when splits are rare', () => {
    const table = misread(2000000, 50, 2e-3, 1e-3, 'rare')
    const errors = { falseOnPerBin: 2e-3, falseOffPerBin: 1e-3 }
    for (const state of [0, 1] as const) {
      const { spurious, split, observed } = expectedSpurious(table, 0, 0, state, errors)
      const total = (values: Float64Array): number => values.subarray(0, 40).reduce((a, b) => a + b, 0)
      const expected = total(spurious) + total(split)
      // Five standard deviations (false alarm 6e-7) and 2 % for second order in (missed x dwell), 0.1 at most.
      expect(Math.abs(total(observed) - expected)).toBeLessThan(5 * Math.sqrt(expected) + 0.02 * expected)
      expect(spurious[0]).toBeGreaterThan(0.9 * observed[0] * (spurious[0] / (spurious[0] + split[0])))
    }
  })

  it('equals the sum over dwells where columns are single durations, and nearly so beyond', () => {
    // On dwells of 40, 90 and 400 bins between off dwells of 30 and 700 bins.
    const pattern: number[] = []
    for (const [state, n] of [
      [0, 5],
      [1, 40],
      [0, 30],
      [1, 90],
      [0, 700],
      [1, 400],
      [0, 12],
    ] as const)
      for (let i = 0; i < n; i++) pattern.push(state)
    const table = buildThresholdTable(levelledOf(pattern), null, { firstThreshold: 1, step: 1, rows: 1 })
    const errors = { falseOnPerBin: 0.03, falseOffPerBin: 0.05 }
    const { spurious, split } = expectedSpurious(table, 0, 0, 1, errors)
    for (let m = 1; m < 40; m++) {
      // The first dwell, of unseen start, counts too.
      const inside = [5, 30, 700, 12].reduce((sum, n) => sum + interiorRuns(n, 0.03, m), 0)
      expect(spurious[m - 1]).toBeCloseTo(inside, 10)
      // Expected spurious dwells of 40 and more bins are fewer than 1e-50: nothing is taken off the hosts.
      expect(split[m - 1]).toBeCloseTo(
        [40, 90, 400].reduce((sum, n) => sum + splitRuns(n, 0.05, m), 0),
        8,
      )
    }
    let splitBins = 0
    let summed = 0
    for (let c = 64; c < split.length; c++) {
      if (table.grid.edges[c + 1] > 380) break
      splitBins += split[c]
      for (let m = table.grid.edges[c]; m < table.grid.edges[c + 1]; m++)
        for (const n of [90, 400]) if (m < n) summed += splitRuns(n, 0.05, m)
    }
    expect(splitBins / summed).toBeCloseTo(1, 1)
  })

  it('shares the expected dwells between gate classes by their bins', () => {
    const random = seededRandom('classes')
    const seen = Uint16Array.from({ length: 40000 }, (_, i) =>
      random.uniform() < 0.01 ? 1 - (Math.floor(i / 300) % 2) : Math.floor(i / 300) % 2,
    )
    const gate = Uint8Array.from(seen, (_, i) => Math.floor(i / 5000) % 2)
    const table = buildThresholdTable(levelledOf(seen), gate, { firstThreshold: 1, step: 1, rows: 1 })
    const errors = { falseOnPerBin: 0.01, falseOffPerBin: 0.01 }
    const [all, reference, driven] = [0, 1, 2].map((group) => expectedSpurious(table, group, 0, 1, errors))
    all.spurious.forEach((expected, c) =>
      expect(reference.spurious[c] + driven.spurious[c]).toBeCloseTo(expected, 8),
    )
    expect(reference.observed[0] + driven.observed[0]).toBe(all.observed[0])
  })
})

describe('spuriousSafeBins', () => {
  const table = misread(400000, 100, 5e-3, 5e-3, 'safe')

  it('is the first duration from which on spurious dwells are rare among the observed', () => {
    const errors = { falseOnPerBin: 5e-3, falseOffPerBin: 5e-3 }
    const { spurious, observed } = expectedSpurious(table, 0, 0, 1, errors)
    const safe = spuriousSafeBins(table, 0, 0, 1, errors)
    expect(safe).toBeGreaterThan(1)
    expect(safe).toBeLessThan(6)
    expect(spurious[safe - 2]).toBeGreaterThanOrEqual(0.05 * Math.max(1, observed[safe - 2]))
    for (let m = safe; m <= 64; m++) expect(spurious[m - 1]).toBeLessThan(0.05 * Math.max(1, observed[m - 1]))
  })

  it('is one bin without errors and grows with the error rate', () => {
    const at = (p: number): number =>
      spuriousSafeBins(table, 0, 0, 1, { falseOnPerBin: p, falseOffPerBin: 0 })
    expect(at(0)).toBe(1)
    const safe = [1e-6, 1e-3, 0.05, 0.3].map(at)
    expect(safe).toEqual(safe.toSorted((a, b) => a - b))
    expect(safe[0]).toBe(1)
    expect(safe[3]).toBeGreaterThan(6)
  })
})

describe('spuriousChance', () => {
  it('is expected over observed, never rises with duration, and stays within 0..1', () => {
    const table = misread(400000, 100, 5e-3, 5e-3, 'chance')
    const { spurious, observed } = expectedSpurious(table, 0, 0, 1, {
      falseOnPerBin: 5e-3,
      falseOffPerBin: 5e-3,
    })
    const chance = spuriousChance(spurious, observed, table.grid)
    expect(chance[0]).toBeCloseTo(Math.min(1, spurious[0] / observed[0]), 12)
    expect(chance[0]).toBeGreaterThan(0.5)
    for (let c = 1; c < chance.length; c++) expect(chance[c]).toBeLessThanOrEqual(chance[c - 1])
    expect(chance[chance.length - 1]).toBeGreaterThanOrEqual(0)
    expect(chance[30]).toBeLessThan(1e-6)
  })
})
