import type { DroppedCounts, PhotonChunk, PhotonStream } from './photon-stream.ts'

/** Photons per slab of storage; chunks are views into slabs. */
const SLAB_PHOTONS = 2 ** 20
const OFFSET_LIMIT = 2 ** 32

/** Exposure and losses the reader knows about; the first tick and one after the last tick where left out. */
export interface StreamSpan {
  readonly startTick?: number
  readonly endTick?: number
  readonly dropped?: DroppedCounts
}

export interface PhotonStreamBuilder {
  /** Photons kept so far. */
  readonly photons: number
  /**
   * Adds ticks (whole numbers, 0 <= tick < 2^53) in order, with one channel each when the record has channels.
   * @returns null, or the position, counted from the first photon ever pushed, of the first tick that is smaller than
   *   the one before it or not a whole number; that photon and those after it in this push are not kept
   */
  push(ticks: ArrayLike<number>, channels?: ArrayLike<number> | null, count?: number): number | null
  /** The stream of everything kept. The builder takes nothing more after it. */
  finish(span?: StreamSpan): PhotonStream
}

/**
 * Gathers arrival ticks into chunks of 4 bytes a photon (1 more with channels). A chunk ends when its slab is full
 * or a tick is 2^32 or more after its base, so a long silence or a very fine tick costs one small object, not photons.
 */
export function photonStreamBuilder(tickSeconds: number): PhotonStreamBuilder {
  const chunks: PhotonChunk[] = []
  let slab = new Uint32Array(0)
  let channelSlab: Uint8Array | null = null
  let used = 0
  let chunkStart = 0
  let base = 0
  let last = -1
  let firstTick = 0
  let photons = 0

  const closeChunk = (): void => {
    if (used === chunkStart) return
    chunks.push({
      baseTick: base,
      offsets: slab.subarray(chunkStart, used),
      count: used - chunkStart,
      channels: channelSlab === null ? null : channelSlab.subarray(chunkStart, used),
    })
    chunkStart = used
  }

  const openSlab = (withChannels: boolean): void => {
    closeChunk()
    slab = new Uint32Array(SLAB_PHOTONS)
    channelSlab = withChannels ? new Uint8Array(SLAB_PHOTONS) : null
    used = 0
    chunkStart = 0
  }

  const push = (
    ticks: ArrayLike<number>,
    channels: ArrayLike<number> | null = null,
    count: number = ticks.length,
  ): number | null => {
    if (photons === 0) openSlab(channels !== null)
    else if ((channels !== null) !== (channelSlab !== null))
      throw new TypeError('Channels must be given for every photon of a record or for none.')
    for (let i = 0; i < count; i++) {
      const tick = ticks[i]
      if (!(tick >= last && Number.isSafeInteger(tick))) return photons
      if (used === slab.length) openSlab(channels !== null)
      if (used === chunkStart || tick - base >= OFFSET_LIMIT) {
        closeChunk()
        base = tick
      }
      if (photons === 0) firstTick = tick
      slab[used] = tick - base
      if (channels !== null) (channelSlab as Uint8Array)[used] = channels[i]
      last = tick
      used++
      photons++
    }
    return null
  }

  const finish = (span: StreamSpan = {}): PhotonStream => {
    // The last slab is cut to what it holds, so that a short record does not carry an empty megabyte.
    const start = chunkStart
    if (used < slab.length) {
      const kept = chunks.length
      slab = slab.slice(0, used)
      channelSlab = channelSlab === null ? null : channelSlab.slice(0, used)
      // Earlier chunks of this slab are moved onto the shorter copy.
      let end = start
      for (let c = kept - 1; c >= 0 && end > 0; c--) {
        const chunk = chunks[c]
        chunks[c] = {
          ...chunk,
          offsets: slab.subarray(end - chunk.count, end),
          channels: channelSlab === null ? null : channelSlab.subarray(end - chunk.count, end),
        }
        end -= chunk.count
      }
    }
    closeChunk()
    return {
      kind: 'photons',
      tickSeconds,
      photons,
      chunks,
      startTick: span.startTick ?? firstTick,
      endTick: span.endTick ?? (photons === 0 ? firstTick : last + 1),
      dropped: span.dropped ?? {},
    }
  }

  return {
    get photons() {
      return photons
    },
    push,
    finish,
  }
}
