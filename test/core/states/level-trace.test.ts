import { describe, expect, it } from 'vitest'
import { baselineCounts } from '../../../src/core/baseline/baseline-at.ts'
import type { Baseline } from '../../../src/core/baseline/baseline.ts'
import type { Trace } from '../../../src/core/photons/trace.ts'
import { countHistogram } from '../../../src/core/states/count-histogram.ts'
import { levelTrace } from '../../../src/core/states/level-trace.ts'

const baseline = (rates: number[]): Baseline => ({
  method: rates.length > 1 ? 'drifting' : 'constant',
  automatic: false,
  reason: '',
  knotSeconds: 1,
  firstKnotSeconds: 0.5,
  rateCps: Float64Array.from(rates),
  lowCps: Float64Array.from(rates),
  highCps: Float64Array.from(rates),
  supportBins: new Float64Array(rates.length),
  supportedShare: 1,
  longestUnsupportedSeconds: 0,
  onAboveCps: 5000,
  onShare: 0.5,
  rounds: 1,
  status: 'ok',
  message: '',
})

const traceOf = (counts: number[]): Trace => ({
  kind: 'trace',
  counts: Uint16Array.from(counts),
  binSeconds: 0.01,
  startSeconds: 0,
  coverage: null,
  dropped: {},
})

describe('levelTrace', () => {
  it('is the trace itself under a constant baseline', () => {
    const trace = traceOf([3, 9, 70])
    const levelled = levelTrace(trace, baseline([1000]), null)
    expect(levelled.values).toBe(trace.counts)
    expect(levelled).toMatchObject({ offset: 0, highest: 70, offCounts: 10, onCounts: 60, gaps: null })
  })

  it('moves the threshold with a drifting baseline: value >= c exactly when counts >= c + b - mean b', () => {
    const counts = Array.from({ length: 300 }, (_, i) => (i * 7919) % 60)
    const unusable = Uint8Array.from(counts, (_, i) => (i > 250 ? 1 : 0))
    const trace = traceOf(counts)
    const drifting = baseline([500, 2500, 900])
    const levelled = levelTrace(trace, drifting, unusable)
    const perBin = baselineCounts(drifting, trace)
    const mean = perBin.subarray(0, 251).reduce((a, b) => a + b, 0) / 251
    expect(levelled.offCounts).toBeCloseTo(mean, 10)
    expect(levelled.onCounts - levelled.offCounts).toBeCloseTo(50, 10)
    expect(levelled.highest).toBe(levelled.offset + Math.max(...levelled.values))
    for (let i = 0; i < 300; i++)
      for (const c of [-10, 0, 14, 40])
        expect(levelled.values[i] + levelled.offset >= c).toBe(
          counts[i] >= c + (perBin[i] - levelled.offCounts),
        )
  })

  it('stands an empty trace and refuses a baseline that is not finite', () => {
    expect(levelTrace(traceOf([]), baseline([1000]), null).values.length).toBe(0)
    expect(() => levelTrace(traceOf([1]), baseline([Number.NaN]), null)).toThrow(
      'finite baseline in every bin',
    )
  })
})

describe('countHistogram', () => {
  it('counts usable bins of each levelled value', () => {
    const histogram = countHistogram({
      values: Uint16Array.of(2, 4, 4, 9, 0),
      offset: -3,
      gaps: Uint8Array.of(0, 0, 0, 0, 1),
    })
    expect(histogram.first).toBe(-1)
    expect(Array.from(histogram.counts)).toEqual([1, 0, 2, 0, 0, 0, 0, 1])
  })

  it('has no entries without usable bins', () => {
    const { counts } = countHistogram({ values: Uint16Array.of(5), offset: 0, gaps: Uint8Array.of(1) })
    expect(counts.length).toBe(0)
  })
})
