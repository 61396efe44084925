import type { DroppedCounts } from './photon-stream.ts'

/** Counts per bin of one emitter. Counts are never altered after this point. */
export interface Trace {
  readonly kind: 'trace'
  /** Counts per bin; Uint16Array when every count fits, else Uint32Array. */
  readonly counts: Uint16Array | Uint32Array
  readonly binSeconds: number
  /** Time of the left edge of bin 0, s. */
  readonly startSeconds: number
  /** Share of each bin that was exposed, 0..255 for 0..1; null when every bin is whole. A bin of 0 is a gap. */
  readonly coverage: Uint8Array | null
  readonly dropped: DroppedCounts
}

/** The same counts in the narrowest kind that holds them: Uint16 when the largest is below 65536. Empty stays empty. */
export function fittingCounts(counts: Uint32Array): Uint16Array | Uint32Array {
  // Bits of the OR reach past 16 exactly when some count does.
  let bits = 0
  for (let i = 0; i < counts.length; i++) bits |= counts[i]
  return bits >>> 16 === 0 ? new Uint16Array(counts) : counts
}
