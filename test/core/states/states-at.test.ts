import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { statesAt } from '../../../src/core/states/states-at.ts'
import { levelledOf, telegraphValues } from './plain-tally.ts'

/** State of every bin, written out from the runs. */
function written({ bins, starts, states }: ReturnType<typeof statesAt>): number[] {
  const out = Array.from({ length: bins }, () => -1)
  for (let r = 0; r < starts.length; r++)
    out.fill(states[r], starts[r], r + 1 < starts.length ? starts[r + 1] : bins)
  return out
}

describe('statesAt', () => {
  it('covers the record exactly, bin by bin, with runs that differ from their neighbours', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 6 }), { maxLength: 200, size: 'max' }),
        fc.array(fc.boolean(), { maxLength: 200, size: 'max' }),
        fc.integer({ min: -5, max: 5 }),
        fc.integer({ min: -6, max: 14 }),
        (values, marks, offset, threshold) => {
          const gaps = Uint8Array.from(values, (_, i) => (marks[i] ? 1 : 0))
          const sequence = statesAt(levelledOf(values, { offset, gaps }), threshold)
          expect(written(sequence)).toEqual(
            values.map((v, i) => (gaps[i] === 1 ? 255 : v + offset >= threshold ? 1 : 0)),
          )
          for (let r = 1; r < sequence.states.length; r++)
            expect(sequence.states[r]).not.toBe(sequence.states[r - 1])
        },
      ),
      { seed: 5, numRuns: 300 },
    )
  })

  it('finds every run of a long record', () => {
    const values = telegraphValues(100000, 31, 8)
    const sequence = statesAt(levelledOf(values), 33)
    expect(written(sequence)).toEqual(Array.from(values, (v) => (v >= 33 ? 1 : 0)))
    expect(sequence.method).toBe('threshold 33 counts')
  })

  it('has no runs without bins', () => {
    expect(statesAt(levelledOf([]), 3).starts.length).toBe(0)
  })
})
