import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { durationGrid } from '../../../src/core/states/duration-grid.ts'
import { singlePassTally } from '../../../src/core/states/single-pass.ts'
import { inColumns, levelledOf, plainTally, telegraphValues } from './plain-tally.ts'

function expectPlain(levelled: ReturnType<typeof levelledOf>, threshold: number): void {
  const grid = durationGrid(levelled.values.length)
  const tallies = singlePassTally(levelled, threshold, grid)
  const plain = plainTally(levelled, null, threshold, -1)
  for (const state of [0, 1] as const) {
    const complete = inColumns(grid, plain[state].complete)
    const censored = inColumns(grid, plain[state].censored)
    expect(Array.from(tallies[state].completeCount)).toEqual(complete.count)
    expect(Array.from(tallies[state].completeSum)).toEqual(complete.sum)
    expect(Array.from(tallies[state].completeSquares)).toEqual(complete.squares)
    expect(Array.from(tallies[state].censoredCount)).toEqual(censored.count)
    expect(Array.from(tallies[state].censoredSum)).toEqual(censored.sum)
    expect(Array.from(tallies[state].censoredSquares)).toEqual(censored.squares)
    expect(tallies[state].unseenStarts).toBe(plain[state].unseenStarts)
    expect(tallies[state].stateBins).toBe(plain[state].stateBins)
    expect(tallies[state].longestBins).toBe(plain[state].longestBins)
  }
}

describe('singlePassTally', () => {
  it('equals the slow reference for any counts, kind of storage, place in memory, gaps and threshold', () => {
    fc.assert(
      fc.property(
        fc.array(fc.oneof(fc.integer({ min: 0, max: 9 }), fc.constantFrom(0x7fff, 0x8000, 0xffff)), {
          minLength: 1,
          maxLength: 300,
          size: 'max',
        }),
        fc.constantFrom(0, 1, 5, 9, 10, 0x7fff, 0x8000, 0x8001, 0xffff, 0x10000),
        fc.boolean(),
        fc.boolean(),
        fc.nat(3),
        fc.array(fc.nat(299), { maxLength: 4, size: 'max' }),
        (values, threshold, wide, small, shift, gapAt) => {
          const kept = small ? values.map((v) => v % 10) : values
          const Kind = wide ? Uint32Array : Uint16Array
          const memory = new Kind(kept.length + shift)
          memory.set(kept, shift)
          const stored = memory.subarray(shift)
          const gaps = new Uint8Array(kept.length)
          for (const at of gapAt) if (at < gaps.length) gaps[at] = 1
          const levelled = levelledOf(kept, { gaps: gapAt.length > 0 ? gaps : null })
          expectPlain({ ...levelled, values: stored }, threshold)
        },
      ),
      { seed: 4, numRuns: 500 },
    )
  })

  it('equals it over more bins than are looked at together', () => {
    const values = telegraphValues(80000, 21, 900)
    const gaps = Uint8Array.from(values, (_, i) => (i === 40001 ? 1 : 0))
    for (const threshold of [0, 11, 33, 60, 200]) expectPlain(levelledOf(values, { gaps }), threshold)
  })

  it('has nothing to tally in an empty record', () => {
    const [off, on] = singlePassTally(levelledOf([]), 5, durationGrid(1))
    expect([off.stateBins, on.stateBins, off.unseenStarts, on.unseenStarts]).toEqual([0, 0, 0, 0])
  })
})
