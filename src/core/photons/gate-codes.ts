import { GATE_CLASSES, type Gate } from './gate.ts'

const REFERENCE = GATE_CLASSES.indexOf('reference')
const GUARD = GATE_CLASSES.indexOf('guard')
/** An edge within this many bins of a bin edge lies on it: decimal times do not make straddling bins. */
const ON_EDGE_BINS = 1e-6

/**
 * Gate class of every bin as its index in GATE_CLASSES. A bin that holds an edge between two different classes becomes
 * guard; time outside every window is reference. Empty windows count for nothing.
 *
 * @param gate windows in time order, not overlapping, s
 * @param trace bin width and start of bin 0, s, and the number of bins
 */
export function gateCodes(
  gate: Gate,
  trace: { readonly binSeconds: number; readonly startSeconds: number; readonly bins: number },
): Uint8Array {
  const codes = new Uint8Array(trace.bins).fill(REFERENCE)
  const inBins = (seconds: number): number => (seconds - trace.startSeconds) / trace.binSeconds
  const straddled: number[] = []
  let previousCode = REFERENCE
  let previousEnd = Number.NEGATIVE_INFINITY
  const edge = (at: number): void => {
    if (Math.abs(at - Math.round(at)) > ON_EDGE_BINS) straddled.push(Math.floor(at))
  }
  for (const { startSeconds, endSeconds, gateClass } of gate.windows) {
    const start = inBins(startSeconds)
    const end = inBins(endSeconds)
    if (!(end > start)) continue
    const code = GATE_CLASSES.indexOf(gateClass)
    if (start - previousEnd > ON_EDGE_BINS) {
      // Reference time stands between this window and the one before.
      if (previousCode !== REFERENCE) edge(previousEnd)
      previousCode = REFERENCE
    }
    if (previousCode !== code) edge(start)
    const first = Math.max(0, Math.floor(start + ON_EDGE_BINS))
    const stop = Math.min(trace.bins, Math.ceil(end - ON_EDGE_BINS))
    if (stop > first) codes.fill(code, first, stop)
    previousCode = code
    previousEnd = end
  }
  if (previousCode !== REFERENCE) edge(previousEnd)
  for (const bin of straddled) if (bin >= 0 && bin < trace.bins) codes[bin] = GUARD
  return codes
}
