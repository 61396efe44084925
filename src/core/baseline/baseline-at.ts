import type { Trace } from '../photons/trace.ts'
import type { Baseline } from './baseline.ts'

/** Baseline at a time on the clock of the trace, counts per second: linear between knots, flat outside them. */
export function baselineCps(baseline: Baseline, seconds: number): number {
  return valueAt(baseline.rateCps, (seconds - baseline.firstKnotSeconds) / baseline.knotSeconds)
}

/** Lower and upper end of the 95 % band at a time, counts per second. */
export function baselineBandCps(baseline: Baseline, seconds: number): { low: number; high: number } {
  const place = (seconds - baseline.firstKnotSeconds) / baseline.knotSeconds
  return { low: valueAt(baseline.lowCps, place), high: valueAt(baseline.highCps, place) }
}

/** Baseline in counts per bin at the centre of every bin of the trace, one entry a bin. */
export function baselineCounts(baseline: Baseline, trace: Trace): Float64Array {
  const { binSeconds, startSeconds, counts } = trace
  const out = new Float64Array(counts.length)
  const perKnot = binSeconds / baseline.knotSeconds
  const first = (startSeconds + binSeconds / 2 - baseline.firstKnotSeconds) / baseline.knotSeconds
  const rates = baseline.rateCps
  const last = rates.length - 1
  if (last < 0) return out
  for (let i = 0; i < out.length; i++) {
    const place = first + i * perKnot
    if (place <= 0) out[i] = rates[0] * binSeconds
    else if (place >= last) out[i] = rates[last] * binSeconds
    else {
      const knot = Math.floor(place)
      out[i] = (rates[knot] + (place - knot) * (rates[knot + 1] - rates[knot])) * binSeconds
    }
  }
  return out
}

function valueAt(values: Float64Array, place: number): number {
  const last = values.length - 1
  if (last < 0) return Number.NaN
  if (place <= 0) return values[0]
  if (place >= last) return values[last]
  const knot = Math.floor(place)
  return values[knot] + (place - knot) * (values[knot + 1] - values[knot])
}
