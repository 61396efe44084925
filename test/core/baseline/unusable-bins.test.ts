import { describe, expect, it } from 'vitest'
import { partlyExposedBins, unusableBins } from '../../../src/core/baseline/unusable-bins.ts'
import { traceOf } from './telegraph.ts'

const trace = { ...traceOf(new Uint16Array(10), 0.1), startSeconds: 5 }

describe('unusableBins', () => {
  it('is null when every bin can be used', () => {
    expect(unusableBins(trace, [])).toBeNull()
    expect(unusableBins({ ...trace, coverage: new Uint8Array(10).fill(255) }, [])).toBeNull()
    expect(
      unusableBins(trace, [
        [0, 5],
        [6, 9],
        [5.5, 5.5],
        [5.8, 5.2],
        [Number.NaN, 7],
      ]),
    ).toBeNull()
  })

  it('marks every bin an excluded span touches, decimal edges on bin edges included', () => {
    expect([...(unusableBins(trace, [[5.2, 5.4]]) ?? [])]).toEqual([0, 0, 1, 1, 0, 0, 0, 0, 0, 0])
    expect([
      ...(unusableBins(trace, [
        [5.25, 5.31],
        [5.9, 99],
      ]) ?? []),
    ]).toEqual([0, 0, 1, 1, 0, 0, 0, 0, 0, 1])
    expect([
      ...(unusableBins(trace, [
        [0, 5.7],
        [5.6, 5.8],
      ]) ?? []),
    ]).toEqual([1, 1, 1, 1, 1, 1, 1, 1, 0, 0])
  })

  it('marks gaps and partly exposed bins, and counts the latter', () => {
    const coverage = Uint8Array.from([255, 0, 0, 254, 255, 1, 255, 255, 255, 255])
    expect([...(unusableBins({ ...trace, coverage }, []) ?? [])]).toEqual([0, 1, 1, 1, 0, 1, 0, 0, 0, 0])
    expect(partlyExposedBins({ ...trace, coverage })).toBe(2)
    expect(partlyExposedBins(trace)).toBe(0)
  })
})
