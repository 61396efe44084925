import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DwellTable } from '../../../src/core/dwells/dwell-table.ts'
import { dwellTableOf } from '../../../src/core/dwells/dwell-table-of.ts'
import { statesAt } from '../../../src/core/states/states-at.ts'
import type { TableGroup } from '../../../src/core/states/threshold-table.ts'
import { levelledOf, telegraphValues } from '../states/plain-tally.ts'

const bits = fc.array(fc.integer({ min: 0, max: 1 }), { maxLength: 150, size: 'max' })
const record = fc.record({
  values: bits,
  marks: fc.array(fc.boolean(), { maxLength: 150, size: 'max' }),
  codes: fc.array(fc.integer({ min: 0, max: 3 }), { minLength: 1, maxLength: 40, size: 'max' }),
  gate: fc.constantFrom<TableGroup>('all', 'reference', 'driven', 'sham'),
})

function build(values: number[], marks: boolean[], codes: number[], gate: TableGroup) {
  const gaps = Uint8Array.from(values, (_, i) => (marks[i] && i % 5 === 0 ? 1 : 0))
  const gateCodes = Uint8Array.from(values, (_, i) => codes[(i >> 2) % codes.length])
  const levelled = levelledOf(values, { gaps, startSeconds: 2 })
  return { gaps, gateCodes, table: dwellTableOf(statesAt(levelled, 1), levelled, gateCodes, gate) }
}

const firstBin = (table: DwellTable, row: number): number =>
  Math.round((table.startSeconds[row] - 2) / table.binSeconds)

describe('dwellTableOf', () => {
  it('covers every usable bin by exactly one row, of its state, in time order', () => {
    fc.assert(
      fc.property(record, ({ values, marks, codes, gate }) => {
        const { gaps, gateCodes, table } = build(values, marks, codes, gate)
        const seen = Array.from({ length: values.length }, () => -1)
        for (let row = 0; row < table.rows; row++) {
          const from = firstBin(table, row)
          for (let i = from; i < from + table.durationBins[row]; i++) {
            expect(seen[i]).toBe(-1)
            seen[i] = table.state[row]
          }
          expect(table.gateAtStart[row]).toBe(gateCodes[from])
          expect(table.gateAtEnd[row]).toBe(gateCodes[from + table.durationBins[row] - 1])
          if (table.gate !== 'all') expect(table.gateAtStart[row]).toBe(table.gateAtEnd[row])
          if (row > 0) expect(from).toBeGreaterThan(firstBin(table, row - 1))
        }
        expect(seen).toEqual(values.map((v, i) => (gaps[i] === 1 ? -1 : v)))
      }),
      { seed: 11, numRuns: 300 },
    )
  })

  it('is the whole dwells again when the pieces of each are joined', () => {
    fc.assert(
      fc.property(record, ({ values, marks, codes, gate }) => {
        const { table } = build(values, marks, codes, gate)
        const { table: whole } = build(values, marks, codes, 'all')
        const joined: number[][] = []
        for (let row = 0; row < table.rows; row++) {
          if (table.entryAgeBins[row] === 0)
            joined.push([table.startSeconds[row], 0, table.state[row], table.censoring[row]])
          const last = joined[joined.length - 1]
          expect(table.entryAgeBins[row]).toBe(last[1])
          last[1] += table.durationBins[row]
          last[3] = table.censoring[row]
        }
        expect(joined).toEqual(
          Array.from({ length: whole.rows }, (_, row) => [
            whole.startSeconds[row],
            whole.durationBins[row],
            whole.state[row],
            whole.censoring[row],
          ]),
        )
      }),
      { seed: 12, numRuns: 300 },
    )
  })

  it('censors at record ends, gaps and gate edges, and marks unseen starts', () => {
    //               0  1  2  3  4  5  6  7  8  9 10 11
    const values = [1, 1, 0, 0, 0, 0, 1, 1, 0, 0, 1, 1]
    const codes = [0, 0, 0, 0, 1, 1, 1, 1, 1, 0, 0, 0]
    const gaps = Uint8Array.from(values, (_, i) => (i === 9 ? 1 : 0))
    const levelled = levelledOf(values, { gaps, binSeconds: 1 })
    const table = dwellTableOf(statesAt(levelled, 1), levelled, Uint8Array.from(codes), 'driven')
    expect(table.gate).toBe('driven')
    expect(Array.from(table.startSeconds)).toEqual([0, 2, 4, 6, 8, 10])
    expect(Array.from(table.durationBins)).toEqual([2, 2, 2, 2, 1, 2])
    expect(Array.from(table.entryAgeBins)).toEqual([0, 0, 2, 0, 0, 0])
    // start unseen; end at the gate edge; complete; complete; end at the gap; both ends unseen
    expect(Array.from(table.censoring)).toEqual([1, 2, 0, 0, 2, 3])
    expect(Array.from(table.gateAtStart)).toEqual([0, 0, 1, 1, 1, 0])
  })

  it('does not cut without a gate or without windows of the class', () => {
    const levelled = levelledOf([0, 1, 1, 1, 0])
    const sequence = statesAt(levelled, 1)
    expect(dwellTableOf(sequence, levelled, null, 'driven')).toMatchObject({ rows: 3, gate: 'all' })
    const table = dwellTableOf(sequence, levelled, Uint8Array.of(0, 0, 2, 2, 2), 'driven')
    expect(table).toMatchObject({ rows: 3, gate: 'all' })
    expect([table.gateAtStart[1], table.gateAtEnd[1]]).toEqual([0, 2])
  })

  it('gives short dwells in noisy records a high chance of being spurious, long ones none', () => {
    const values = telegraphValues(60000, 17, 300)
    const levelled = levelledOf(values)
    const errors = { falseOnPerBin: 0.004, falseOffPerBin: 0.004 }
    const noisy = levelledOf(values.map((v, i) => ((i * 2654435761) % 251 === 0 ? 72 - v : v)))
    const table = dwellTableOf(statesAt(noisy, 33), noisy, null, 'all', errors)
    const chance = (m: number): number => table.spuriousProbability[table.durationBins.indexOf(m)]
    expect(chance(1)).toBeGreaterThan(0.5)
    for (let row = 0; row < table.rows; row++) {
      expect(table.spuriousProbability[row]).toBeGreaterThanOrEqual(0)
      expect(table.spuriousProbability[row]).toBeLessThanOrEqual(1)
      if (table.durationBins[row] > 10) expect(table.spuriousProbability[row]).toBeLessThan(1e-6)
    }
    const without = dwellTableOf(statesAt(levelled, 33), levelled, null, 'all')
    expect(without.spuriousProbability.every(Number.isNaN)).toBe(true)
    const exact = { falseOnPerBin: 0, falseOffPerBin: 0 }
    const clean = dwellTableOf(statesAt(levelled, 33), levelled, null, 'all', exact)
    expect(clean.spuriousProbability.every((p) => p === 0)).toBe(true)
  })

  it('has no rows for an empty record', () => {
    const levelled = levelledOf([])
    expect(dwellTableOf(statesAt(levelled, 1), levelled, null, 'all').rows).toBe(0)
  })
})
