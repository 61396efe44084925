import { describe, expect, it } from 'vitest'
import { sampleFromRow } from '../../../src/core/dwells/dwell-sample-of.ts'
import { kaplanMeier } from '../../../src/core/dwells/survival.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { buildThresholdTable } from '../../../src/core/states/build-threshold-table.ts'
import reference from '../../reference/kaplan-meier.json' with { type: 'json' }
import { levelledOf } from '../states/plain-tally.ts'
import { sampleOf } from './sample-of.ts'

describe('kaplanMeier', () => {
  it.each(['amlMaintained', 'gehan6mp'] as const)('agrees with R survival on %s', (name) => {
    const { time, event, kaplanMeier: expected } = reference[name]
    const curve = kaplanMeier(
      sampleOf(
        time.filter((_, i) => event[i] === 1),
        time.filter((_, i) => event[i] === 0),
      ),
      0.95,
    )
    expect(Array.from(curve.seconds)).toEqual(expected.time.map((t) => t * 0.5))
    expect(Array.from(curve.atRisk)).toEqual(expected.atRisk)
    expect(Array.from(curve.events)).toEqual(expected.events)
    expected.survival.forEach((s, i) => {
      expect(curve.survival[i]).toBeCloseTo(s, 12)
      expect(curve.low[i]).toBeCloseTo(expected.logLogLower[i], 9)
      expect(curve.high[i]).toBeCloseTo(expected.logLogUpper[i], 9)
    })
  })

  it('is one minus the share ended when nothing is censored, and ends at 0 without limits', () => {
    const curve = kaplanMeier(sampleOf([1, 1, 2, 5, 9]), 0.9)
    expect(Array.from(curve.survival)).toEqual([0.6, expect.closeTo(0.4, 14), expect.closeTo(0.2, 14), 0])
    expect(curve.low[3]).toBeNaN()
    expect(curve.high[3]).toBeNaN()
  })

  it('counts delayed entries from the bin after their age', () => {
    // Four dwells: ended at 3; taken up at 2, ended at 4; taken up at 3, ended at 4; cut at 3.
    const curve = kaplanMeier(sampleOf([3, 4, 4], [3], [2, 3]), 0.95)
    expect(Array.from(curve.atRisk)).toEqual([3, 2])
    expect(Array.from(curve.survival)).toEqual([expect.closeTo(2 / 3, 14), 0])
  })

  it('recovers the law of each gate class of a record cut into short windows', () => {
    // Ends of on bins with chance 0.1 a bin in reference windows, 0.2 in driven ones; windows of 12 bins.
    const random = seededRandom('two classes')
    const n = 300000
    const codes = Uint8Array.from({ length: n }, (_, i) => Math.floor(i / 12) % 2)
    const values = new Uint16Array(n)
    for (let i = 1; i < n; i++) {
      // A dwell whose last bin is i - 1 ends with the chance of that bin's class.
      const ends =
        values[i - 1] === 1 ? random.uniform() < (codes[i - 1] === 1 ? 0.2 : 0.1) : random.uniform() < 0.3
      values[i] = ends ? 1 - values[i - 1] : values[i - 1]
    }
    const table = buildThresholdTable(levelledOf(values), codes, { firstThreshold: 1, step: 1, rows: 1 })
    for (const [name, chance] of [
      ['reference', 0.1],
      ['driven', 0.2],
    ] as const) {
      const curve = kaplanMeier(sampleFromRow(table, table.groups.indexOf(name), 1, 0, 0.5), 0.95)
      for (let i = 0; i < 15; i++) {
        const ended = curve.events[i] / curve.atRisk[i]
        // Five standard deviations of a binomial share: false alarm 2 x 15 x 6e-7.
        const sd = Math.sqrt((chance * (1 - chance)) / curve.atRisk[i])
        expect(Math.abs(ended - chance)).toBeLessThan(5 * sd)
      }
    }
  })

  it('is empty without complete dwells', () => {
    expect(kaplanMeier(sampleOf([], [5]), 0.95).seconds.length).toBe(0)
  })
})
