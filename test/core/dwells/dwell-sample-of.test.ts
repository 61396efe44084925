import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DwellSample } from '../../../src/core/dwells/dwell-sample.ts'
import { sampleFromDwells, sampleFromRow } from '../../../src/core/dwells/dwell-sample-of.ts'
import { dwellTableOf } from '../../../src/core/dwells/dwell-table-of.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { buildThresholdTable } from '../../../src/core/states/build-threshold-table.ts'
import { statesAt } from '../../../src/core/states/states-at.ts'
import type { TableGroup } from '../../../src/core/states/threshold-table.ts'
import { levelledOf, plainTally } from '../states/plain-tally.ts'

const RANGE = { firstThreshold: 1, step: 1, rows: 1 }

/** A record of heavy-tailed dwells (survival m^-1/2 up to 20000 bins). */
function heavyTailed(bins: number, seed: string): Uint16Array {
  const random = seededRandom(seed)
  const values = new Uint16Array(bins)
  for (let i = 0, on = 0; i < bins; on ^= 1) {
    const end = Math.min(bins, i + Math.ceil(Math.min(20000, 1 / random.uniform() ** 2)))
    values.fill(on, i, end)
    i = end
  }
  return values
}

const sum = (bins: Float64Array, weights: Float64Array, f: (m: number) => number): number =>
  bins.reduce((all, m, i) => all + weights[i] * f(m), 0)

const KINDS = [
  ['completeBins', 'completeWeights'],
  ['censoredBins', 'censoredWeights'],
  ['enteredBins', 'enteredWeights'],
] as const

function bothWays(values: Uint16Array, codes: Uint8Array, name: TableGroup, state: 0 | 1) {
  const levelled = levelledOf(values)
  const dwells = dwellTableOf(statesAt(levelled, 1), levelled, codes, name)
  const table = buildThresholdTable(levelled, codes, RANGE)
  return {
    exact: sampleFromDwells(dwells, state, 0.4),
    nodes: sampleFromRow(table, table.groups.indexOf(name), state, 0, 0.4),
    table,
  }
}

describe('samples', () => {
  it('agree for every duration up to 64 bins, in every gate class', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 1 }), { minLength: 1, maxLength: 64, size: 'max' }),
        fc.array(fc.integer({ min: 0, max: 3 }), { minLength: 1, maxLength: 16, size: 'max' }),
        fc.constantFrom<TableGroup>('all', 'reference', 'driven', 'sham'),
        fc.constantFrom<0 | 1>(0, 1),
        (list, pattern, name, state) => {
          const values = Uint16Array.from(list)
          const codes = Uint8Array.from(values, (_, i) => pattern[(i >> 2) % pattern.length])
          const code = ['reference', 'driven', 'sham'].indexOf(name)
          if (name !== 'all' && !codes.includes(code)) return
          const { exact, nodes } = bothWays(values, codes, name, state)
          expect(nodes).toEqual(exact)
          const plain = plainTally(levelledOf(values), codes, 1, code)[state]
          const listed = (sample: DwellSample, [bins, weights]: (typeof KINDS)[number]): number[] =>
            Array.from(sample[bins]).flatMap((m, i) => Array.from({ length: sample[weights][i] }, () => m))
          expect(listed(exact, KINDS[0])).toEqual(plain.complete.toSorted((a, b) => a - b))
          expect(listed(exact, KINDS[1])).toEqual(plain.censored.toSorted((a, b) => a - b))
          expect(listed(exact, KINDS[2])).toEqual(plain.entered.toSorted((a, b) => a - b))
        },
      ),
      { seed: 13, numRuns: 400 },
    )
  })

  it('agree in sums of smooth functions where columns are wider', () => {
    const values = heavyTailed(1500000, 'smooth')
    const codes = Uint8Array.from(values, (_, i) => Math.floor(i / 1900) % 2)
    for (const name of ['all', 'driven'] as const)
      for (const state of [0, 1] as const) {
        const { exact, nodes } = bothWays(values, codes, name, state)
        for (const [bins, weights] of KINDS) {
          const close = (f: (m: number) => number, tolerance: number): void => {
            const expected = sum(exact[bins], exact[weights], f)
            const found = sum(nodes[bins], nodes[weights], f)
            expect(Math.abs(found - expected)).toBeLessThanOrEqual(tolerance * Math.abs(expected))
          }
          // Number, sum and square sum are kept to rounding.
          close(() => 1, 1e-13)
          close((m) => m, 1e-13)
          close((m) => m * m, 1e-12)
          // Third order in the relative width of a column, 1/16.
          close(Math.log, 2e-6)
          close((m) => 1 / m, 2e-5)
          close((m) => m ** 3, 5e-5)
          close((m) => Math.exp(-m / 500), 2e-5)
        }
      }
  })

  it('keep nodes inside their columns, so that a shortest dwell chooses the same dwells', () => {
    const values = heavyTailed(400000, 'columns')
    const { exact, nodes, table } = bothWays(values, new Uint8Array(values.length), 'all', 1)
    for (const edge of table.grid.edges) {
      const atLeast = (sample: DwellSample): number =>
        sum(sample.completeBins, sample.completeWeights, (m) => (m >= edge ? 1 : 0))
      expect(atLeast(nodes)).toBeCloseTo(atLeast(exact), 9)
    }
    for (let i = 1; i < nodes.completeBins.length; i++)
      expect(nodes.completeBins[i]).toBeGreaterThan(nodes.completeBins[i - 1])
  })

  it('leave out dwells of unseen start and are empty for an empty record', () => {
    const { exact } = bothWays(Uint16Array.of(1, 1, 1), new Uint8Array(3), 'all', 1)
    expect(exact.completeBins.length + exact.censoredBins.length).toBe(0)
    const none = bothWays(new Uint16Array(0), new Uint8Array(0), 'all', 0)
    expect(none.exact).toEqual(none.nodes)
  })
})
