import { describe, expect, it } from 'vitest'
import type { Baseline } from '../../../src/core/baseline/baseline.ts'
import { baselineBandCps, baselineCounts, baselineCps } from '../../../src/core/baseline/baseline-at.ts'
import { traceOf } from './telegraph.ts'

const baseline: Baseline = {
  method: 'drifting',
  automatic: false,
  reason: '',
  knotSeconds: 2,
  firstKnotSeconds: 11,
  rateCps: Float64Array.from([100, 300, 200]),
  lowCps: Float64Array.from([50, 200, 100]),
  highCps: Float64Array.from([150, 400, 300]),
  supportBins: new Float64Array(3),
  supportedShare: 0,
  longestUnsupportedSeconds: 6,
  onAboveCps: 0,
  onShare: 0,
  rounds: 1,
  status: 'ok',
  message: '',
}

describe('baselineCps', () => {
  it('is linear between knots and flat outside', () => {
    expect([0, 11, 12, 13, 14.5, 15, 99].map((t) => baselineCps(baseline, t))).toEqual([
      100, 100, 200, 300, 225, 200, 200,
    ])
    expect(baselineBandCps(baseline, 12)).toEqual({ low: 125, high: 275 })
  })

  it('gives counts per bin at bin centres, the same as asking bin by bin', () => {
    const trace = { ...traceOf(new Uint16Array(70), 0.1), startSeconds: 10 }
    const counts = baselineCounts(baseline, trace)
    counts.forEach((value, i) =>
      expect(value).toBeCloseTo(baselineCps(baseline, 10 + (i + 0.5) * 0.1) * 0.1, 9),
    )
    expect(baselineCounts(baseline, traceOf([])).length).toBe(0)
  })
})
