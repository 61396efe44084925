/** Photons whose arrival ticks share one base; offsets are ticks after the base. */
export interface PhotonChunk {
  /** First tick of the chunk, an exact integer (< 2^53). */
  readonly baseTick: number
  /** Non-decreasing offsets from the base; 4 bytes a photon. Only the first `count` are valid. */
  readonly offsets: Uint32Array
  readonly count: number
  /** Detector channel per photon, or null when the record has one channel. */
  readonly channels: Uint8Array | null
}

/** What was not kept, by cause: cause -> number of photons (or rows). Empty when nothing was dropped. */
export type DroppedCounts = Readonly<Record<string, number>>

/** Arrival times of one emitter, in ticks, never decreasing over the chunks. */
export interface PhotonStream {
  readonly kind: 'photons'
  readonly tickSeconds: number
  readonly photons: number
  readonly chunks: readonly PhotonChunk[]
  /** Exposure covered by the record, ticks: [startTick, endTick). */
  readonly startTick: number
  readonly endTick: number
  readonly dropped: DroppedCounts
}
