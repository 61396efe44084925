import type { Trace } from '../photons/trace.ts'

/** A bin edge this close to the edge of a span lies on it, bins. */
const ON_EDGE_BINS = 1e-6

/**
 * 1 at every bin that cannot be used: not wholly exposed (coverage below full), or touched by an excluded span.
 *
 * @param excludedSeconds spans [start, end), s, on the clock of the trace; in any order, overlaps allowed; empty, reversed
 *   and non-finite ones count for nothing
 * @returns null when every bin can be used
 */
export function unusableBins(
  trace: Trace,
  excludedSeconds: readonly (readonly [number, number])[],
): Uint8Array | null {
  const bins = trace.counts.length
  const unusable = new Uint8Array(bins)
  let any = false
  if (trace.coverage !== null)
    for (let i = 0; i < bins; i++)
      if (trace.coverage[i] < 255) {
        unusable[i] = 1
        any = true
      }
  for (const [start, end] of excludedSeconds) {
    if (!(end > start)) continue
    const first = Math.max(0, Math.floor((start - trace.startSeconds) / trace.binSeconds + ON_EDGE_BINS))
    const stop = Math.min(bins, Math.ceil((end - trace.startSeconds) / trace.binSeconds - ON_EDGE_BINS))
    if (stop > first) {
      unusable.fill(1, first, stop)
      any = true
    }
  }
  return any ? unusable : null
}

/** Bins of a trace that were exposed only in part: they are left out although they hold photons. */
export function partlyExposedBins(trace: Trace): number {
  let bins = 0
  if (trace.coverage !== null)
    for (let i = 0; i < trace.coverage.length; i++)
      if (trace.coverage[i] > 0 && trace.coverage[i] < 255) bins++
  return bins
}
