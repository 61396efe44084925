import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { sampleFromDwells } from '../../../src/core/dwells/dwell-sample-of.ts'
import { dwellTableOf } from '../../../src/core/dwells/dwell-table-of.ts'
import type { DwellTable } from '../../../src/core/dwells/dwell-table.ts'
import { GATE_CLASSES } from '../../../src/core/photons/gate.ts'
import { dwellSummary } from '../../../src/core/pipeline/state-dwells.ts'
import type { TableGroup } from '../../../src/core/states/threshold-table.ts'

/** The table of a record given bin by bin: state 0, 1 or 255 for a gap, and class code. */
function tableOf(states: readonly number[], codes: readonly number[] | null, gate: TableGroup): DwellTable {
  const starts = states.flatMap((state, bin) => (bin === 0 || state !== states[bin - 1] ? [bin] : []))
  return dwellTableOf(
    {
      starts: Uint32Array.from(starts),
      states: Uint8Array.from(starts, (bin) => states[bin]),
      bins: states.length,
      method: 'threshold',
    },
    { binSeconds: 0.5, startSeconds: 0 },
    codes === null ? null : Uint8Array.from(codes),
    gate,
  )
}

const sum = (list: Float64Array): number => list.reduce((a, b) => a + b, 0)

const runs = <T>(value: fc.Arbitrary<T>, longest: number) =>
  fc
    .array(fc.tuple(value, fc.integer({ min: 1, max: longest })), {
      minLength: 1,
      maxLength: 60,
      size: 'max',
    })
    .map((list) => list.flatMap(([one, length]) => Array.from({ length }, () => one)))

const anyRecord = fc
  .tuple(runs(fc.constantFrom(0, 1, 1, 0, 255), 9), runs(fc.nat(3), 12))
  .map(([states, codes]) => ({ states, codes: states.map((_, bin) => codes[bin % codes.length]) }))

describe('dwellSummary', () => {
  it('counts by hand: off 2, on 3, off 1, gap 2, on 4, off 2', () => {
    const table = tableOf([0, 0, 1, 1, 1, 0, 255, 255, 1, 1, 1, 1, 0, 0], null, 'all')
    expect(dwellSummary(table, 0)).toEqual({
      complete: 0,
      censored: 2,
      startUnseen: 1,
      totalSeconds: 2.5,
      longestSeconds: 1,
      lastSeconds: 1,
      longestShare: 2 / 12,
    })
    expect(dwellSummary(table, 1)).toEqual({
      complete: 1,
      censored: 0,
      startUnseen: 1,
      totalSeconds: 3.5,
      longestSeconds: 2,
      lastSeconds: null,
      longestShare: 4 / 12,
    })
  })

  it('counts only pieces inside windows of the class', () => {
    // reference 0..4, driven 4..8, reference 8..12; off 3, on 6, off 3.
    const states = [0, 0, 0, 1, 1, 1, 1, 1, 1, 0, 0, 0]
    const codes = [0, 0, 0, 0, 1, 1, 1, 1, 0, 0, 0, 0]
    const driven = tableOf(states, codes, 'driven')
    expect(dwellSummary(driven, 1)).toMatchObject({
      complete: 0,
      censored: 1,
      startUnseen: 0,
      totalSeconds: 2,
    })
    expect(dwellSummary(driven, 1).longestSeconds).toBe(2.5)
    expect(dwellSummary(driven, 0)).toEqual({
      complete: 0,
      censored: 0,
      startUnseen: 0,
      totalSeconds: 0,
      longestSeconds: null,
      lastSeconds: 1.5,
      longestShare: null,
    })
    const reference = tableOf(states, codes, 'reference')
    expect(dwellSummary(reference, 1)).toMatchObject({
      complete: 1,
      censored: 1,
      totalSeconds: 1,
      longestSeconds: 3,
    })
  })

  it('counts the dwells that fits get, in every class', () => {
    fc.assert(
      fc.property(
        anyRecord,
        fc.constantFrom('all' as const, 'reference' as const, 'driven' as const, 'sham' as const),
        fc.constantFrom(0 as const, 1 as const),
        ({ states, codes }, gate, state) => {
          const table = tableOf(states, codes, gate)
          const sample = sampleFromDwells(table, state, 0.5)
          const summary = dwellSummary(table, state)
          expect(summary.complete).toBe(sum(sample.completeWeights))
          expect(summary.censored).toBe(sum(sample.censoredWeights))
          const code = table.gate === 'all' ? -1 : GATE_CLASSES.indexOf(table.gate)
          const bins = states.filter((one, bin) => one === state && (code < 0 || codes[bin] === code)).length
          expect(summary.totalSeconds).toBeCloseTo(0.5 * bins, 9)
        },
      ),
      { seed: 141, numRuns: 500 },
    )
  })

  it('of no dwells is null where there is nothing', () => {
    expect(dwellSummary(tableOf([255, 255], null, 'all'), 1)).toEqual({
      complete: 0,
      censored: 0,
      startUnseen: 0,
      totalSeconds: 0,
      longestSeconds: null,
      lastSeconds: null,
      longestShare: null,
    })
  })
})
