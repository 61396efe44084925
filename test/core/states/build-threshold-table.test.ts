import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { buildThresholdTable, thresholdRange } from '../../../src/core/states/build-threshold-table.ts'
import type { LevelledTrace } from '../../../src/core/states/levels.ts'
import { singlePassTally } from '../../../src/core/states/single-pass.ts'
import type { ThresholdBlock, ThresholdTable } from '../../../src/core/states/threshold-table.ts'
import { inColumns, levelledOf, plainTally, telegraphValues } from './plain-tally.ts'

const CODE = { all: -1, reference: 0, driven: 1, sham: 2 } as const

function rowOf(table: ThresholdTable, cells: Float64Array, row: number): number[] {
  const columns = table.grid.edges.length - 1
  return Array.from(cells.subarray(row * columns, (row + 1) * columns))
}

/** Every row, group and state of the table against the slow reference. */
function expectRowsPlain(
  table: ThresholdTable,
  levelled: LevelledTrace,
  gateCodes: Uint8Array | null,
  rows?: readonly number[],
): void {
  for (const row of rows ?? Array.from({ length: table.rows }, (_, t) => t)) {
    const threshold = table.firstThreshold + row * table.step
    table.groups.forEach((name, g) => {
      const plain = plainTally(levelled, gateCodes, threshold, CODE[name])
      for (const state of [0, 1] as const) {
        const block = table.blocks[g][state]
        const expected = plain[state]
        const label = `threshold ${threshold}, ${name}, state ${state}`
        const compare = (kind: 'complete' | 'censored' | 'entered'): void => {
          const { count, sum, squares } = inColumns(table.grid, expected[kind])
          expect(rowOf(table, block[`${kind}Count`], row), `${kind} count, ${label}`).toEqual(count)
          expect(rowOf(table, block[`${kind}Sum`], row), `${kind} sum, ${label}`).toEqual(sum)
          expect(rowOf(table, block[`${kind}Squares`], row), `${kind} squares, ${label}`).toEqual(squares)
        }
        compare('complete')
        compare('censored')
        if (name !== 'all') compare('entered')
        expect(block.unseenStarts[row], `unseen, ${label}`).toBe(expected.unseenStarts)
        expect(block.stateBins[row], `bins, ${label}`).toBe(expected.stateBins)
        expect(block.longestBins[row], `longest, ${label}`).toBe(expected.longestBins)
      }
    })
  }
}

interface Case {
  values: number[]
  offset: number
  gaps: boolean
  gated: boolean
  step: number
  firstBelow: number
}

/** Short records full of ties, gaps, short windows and guard bins. */
const cases = fc.record<Case & { gapAt: number[]; codes: number[] }>({
  values: fc.array(fc.integer({ min: 0, max: 12 }), { minLength: 1, maxLength: 120, size: 'max' }),
  offset: fc.integer({ min: -20, max: 20 }),
  gaps: fc.boolean(),
  gapAt: fc.array(fc.nat(119), { maxLength: 8, size: 'max' }),
  gated: fc.boolean(),
  codes: fc.array(fc.integer({ min: 0, max: 3 }), { minLength: 1, maxLength: 30, size: 'max' }),
  step: fc.integer({ min: 1, max: 3 }),
  firstBelow: fc.integer({ min: -3, max: 3 }),
})

describe('buildThresholdTable', () => {
  it('equals a plain pass at every threshold, state and gate class', () => {
    fc.assert(
      fc.property(cases, ({ values, offset, gaps, gapAt, gated, codes, step, firstBelow }) => {
        const marks = new Uint8Array(values.length)
        for (const at of gapAt) if (at < marks.length) marks[at] = 1
        const levelled = levelledOf(values, { offset, gaps: gaps ? marks : null })
        const gate = gated ? Uint8Array.from(values, (_, i) => codes[(i >> 2) % codes.length]) : null
        const table = buildThresholdTable(levelled, gate, {
          firstThreshold: offset - firstBelow,
          step,
          rows: Math.ceil(16 / step),
        })
        expectRowsPlain(table, levelled, gate)
      }),
      { seed: 2, numRuns: 300 },
    )
  })

  it('equals a plain pass where dwells are longer than the exact columns', () => {
    const values = telegraphValues(30000, 7, 400)
    const gate = Uint8Array.from(values, (_, i) => (i % 977 < 3 ? 3 : Math.floor(i / 977) % 3))
    const gaps = Uint8Array.from(values, (_, i) => (i % 7001 > 6990 ? 1 : 0))
    const levelled = levelledOf(values, { gaps, offset: -4 })
    const table = buildThresholdTable(levelled, gate, { firstThreshold: 0, step: 1, rows: 80 })
    expect(table.blocks[0][0].longestBins[40]).toBeGreaterThan(500)
    expectRowsPlain(table, levelled, gate, [0, 3, 12, 25, 32, 40, 55, 70, 79])
  })

  it('equals the single pass row by row', () => {
    const levelled = levelledOf(telegraphValues(20000, 11))
    const table = buildThresholdTable(levelled, null, { firstThreshold: 3, step: 5, rows: 16 })
    for (let row = 0; row < table.rows; row++) {
      const single = singlePassTally(levelled, 3 + 5 * row, table.grid)
      for (const state of [0, 1] as const) {
        const block = table.blocks[0][state]
        expect(rowOf(table, block.completeCount, row)).toEqual(Array.from(single[state].completeCount))
        expect(rowOf(table, block.completeSum, row)).toEqual(Array.from(single[state].completeSum))
        expect(rowOf(table, block.completeSquares, row)).toEqual(Array.from(single[state].completeSquares))
        expect(rowOf(table, block.censoredCount, row)).toEqual(Array.from(single[state].censoredCount))
        expect(block.stateBins[row]).toBe(single[state].stateBins)
        expect(block.longestBins[row]).toBe(single[state].longestBins)
        expect(block.unseenStarts[row]).toBe(single[state].unseenStarts)
      }
    }
  })

  it('accounts for every usable bin at every threshold', () => {
    const values = telegraphValues(5000, 3)
    const gaps = Uint8Array.from(values, (_, i) => (i % 1000 < 5 ? 1 : 0))
    const table = buildThresholdTable(
      levelledOf(values, { gaps }),
      Uint8Array.from(values, (_, i) => Math.floor(i / 250) % 2),
      { firstThreshold: 0, step: 1, rows: 90 },
    )
    expect(table.usableBins).toBe(5000 - 25)
    expect(table.groupBins[1] + table.groupBins[2]).toBe(table.usableBins)
    const fitted = (block: ThresholdBlock, row: number): number => {
      const dwellBins = (count: Float64Array, sum: Float64Array): number =>
        rowOf(table, count, row).reduce((all, n, c) => all + n * table.grid.edges[c], 0) +
        rowOf(table, sum, row).reduce((all, y) => all + y, 0)
      return (
        dwellBins(block.completeCount, block.completeSum) + dwellBins(block.censoredCount, block.censoredSum)
      )
    }
    for (let row = 0; row < table.rows; row++) {
      const [off, on] = table.blocks[0]
      expect(off.stateBins[row] + on.stateBins[row]).toBe(table.usableBins)
      // Only the first run of each of the five stretches between gaps has an unseen start.
      expect(off.unseenStarts[row] + on.unseenStarts[row]).toBe(5)
      expect(fitted(off, row)).toBeLessThanOrEqual(off.stateBins[row])
      // Bins not in a seen dwell are those of the first runs.
      const inFirst = plainTally(levelledOf(values, { gaps }), null, row, -1)
      const seen = (state: 0 | 1): number =>
        [...inFirst[state].complete, ...inFirst[state].censored].reduce((a, b) => a + b, 0)
      expect(fitted(off, row) + fitted(on, row)).toBe(seen(0) + seen(1))
    }
  })

  it('counts the same complete dwells when time runs backwards', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 9 }), { minLength: 1, maxLength: 200, size: 'max' }),
        (values) => {
          const range = { firstThreshold: 0, step: 1, rows: 11 }
          const there = buildThresholdTable(levelledOf(values), null, range)
          const back = buildThresholdTable(levelledOf(values.toReversed()), null, range)
          for (const state of [0, 1] as const) {
            expect(back.blocks[0][state].completeCount).toEqual(there.blocks[0][state].completeCount)
            expect(back.blocks[0][state].stateBins).toEqual(there.blocks[0][state].stateBins)
            expect(back.blocks[0][state].longestBins).toEqual(there.blocks[0][state].longestBins)
          }
        },
      ),
      { seed: 3, numRuns: 100 },
    )
  })

  it('does not change when counts and thresholds move together', () => {
    const values = telegraphValues(3000, 5)
    const range = { firstThreshold: 5, step: 2, rows: 30 }
    const table = buildThresholdTable(levelledOf(values), null, range)
    const moved = buildThresholdTable(levelledOf(Uint16Array.from(values, (v) => v + 1000)), null, {
      ...range,
      firstThreshold: 1005,
    })
    const wide = buildThresholdTable(levelledOf(Uint32Array.from(values, (v) => v + 100000)), null, {
      ...range,
      firstThreshold: 100005,
    })
    const offset = buildThresholdTable(levelledOf(values, { offset: -50 }), null, {
      ...range,
      firstThreshold: -45,
    })
    for (const other of [moved, wide, offset]) expect(other.blocks).toEqual(table.blocks)
  })

  it('turns on into off when counts are mirrored', () => {
    const values = telegraphValues(3000, 9)
    const mirrored = Uint16Array.from(values, (v) => 100 - v)
    const table = buildThresholdTable(levelledOf(values), null, { firstThreshold: 1, step: 1, rows: 100 })
    const mirror = buildThresholdTable(levelledOf(mirrored), null, { firstThreshold: 1, step: 1, rows: 100 })
    // v >= c is the same as 100 - v < 101 - c.
    for (let row = 0; row < 100; row++)
      expect(rowOf(mirror, mirror.blocks[0][0].completeCount, 99 - row)).toEqual(
        rowOf(table, table.blocks[0][1].completeCount, row),
      )
  })

  it('stands an empty record, one that is all gap, and one bin', () => {
    const range = { firstThreshold: 1, step: 1, rows: 3 }
    for (const levelled of [levelledOf([]), levelledOf([4, 5], { gaps: Uint8Array.of(1, 1) })]) {
      const table = buildThresholdTable(levelled, null, range)
      expect(table.usableBins).toBe(0)
      expect(table.blocks[0][1].completeCount.every((n) => n === 0)).toBe(true)
    }
    const one = buildThresholdTable(levelledOf([2]), null, range)
    expect(Array.from(one.blocks[0][1].unseenStarts)).toEqual([1, 1, 0])
    expect(Array.from(one.blocks[0][0].unseenStarts)).toEqual([0, 0, 1])
  })

  it('refuses gate codes of another length and no rows', () => {
    const levelled = levelledOf([1, 2, 3])
    expect(() =>
      buildThresholdTable(levelled, new Uint8Array(2), { firstThreshold: 1, step: 1, rows: 2 }),
    ).toThrow('Expected one gate code per bin, 3, received 2')
    expect(() => buildThresholdTable(levelled, null, { firstThreshold: 1, step: 1, rows: 0 })).toThrow(
      'Expected 1 to 65535 rows',
    )
  })
})

describe('thresholdRange', () => {
  it('reaches three standard deviations beyond both levels, inside the values that occur', () => {
    const values = [0, 3, 50, 99, 140, 200]
    expect(thresholdRange(levelledOf(values, { offCounts: 25, onCounts: 100 }))).toEqual({
      firstThreshold: 10,
      step: 1,
      rows: 121,
    })
    expect(thresholdRange(levelledOf(values, { offCounts: 4, onCounts: 400 }))).toEqual({
      firstThreshold: 1,
      step: 1,
      rows: 200,
    })
  })

  it('widens the step to keep the number of rows', () => {
    const { firstThreshold, step, rows } = thresholdRange(
      levelledOf([0, 5000], { offCounts: 400, onCounts: 3600 }),
      512,
    )
    expect(step).toBe(7)
    expect(rows).toBeLessThanOrEqual(512)
    expect(firstThreshold).toBe(340)
    expect(firstThreshold + rows * step).toBeGreaterThan(3780)
  })

  it('ignores bins that cannot be used and stands records without any', () => {
    const gaps = Uint8Array.of(0, 0, 1, 1)
    expect(
      thresholdRange(levelledOf([4, 9, 900, 0], { gaps, offCounts: Number.NaN, onCounts: Number.NaN })),
    ).toEqual({ firstThreshold: 5, step: 1, rows: 5 })
    expect(thresholdRange(levelledOf([])).rows).toBe(1)
    expect(thresholdRange(levelledOf([7, 7, 7])).rows).toBe(1)
  })
})
