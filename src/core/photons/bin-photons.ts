import type { DroppedCounts, PhotonChunk, PhotonStream } from './photon-stream.ts'
import type { Trace } from './trace.ts'

/** Name under which photons after the last whole bin are counted. */
export const PARTIAL_BIN = 'in the last, partial bin'
export const BEFORE_START = 'before the start of the exposure'
export const AFTER_END = 'after the end of the exposure'

/** A bin wider than a whole number of ticks by less than this share of itself counts as whole. */
const WHOLE_TICKS_TOLERANCE = 1e-12
/** Mean photons per bin from which searching for bin edges is faster than placing every photon. */
const DENSE_PHOTONS_PER_BIN = 6
type Counts = Uint16Array | Uint32Array

/** Offsets below this make the lower half of a chunk. */
const LOWER_LIMIT = 2 ** 31 - 1
const LARGEST_BINS = 2 ** 30

/**
 * Counts per bin of an arrival-time record. Bin k is [start + k bin, start + (k + 1) bin).
 *
 * Exact when the bin is a whole number of ticks. Otherwise edge k is the first tick at or after k x bin, the product
 * in double precision: an edge can then be off by one tick only where k x bin is within 2^-52 of itself of a tick.
 * Photons after the last whole bin, and any outside the exposure, are counted in `dropped`.
 *
 * @param stream arrival times, non-decreasing; 4 bytes a photon are read once, nothing is copied
 * @param binSeconds bin width, s, > 0; may be any width, whole ticks or not
 * @returns counts as Uint16 when the largest fits, else Uint32; no bins when the exposure is shorter than one bin
 * @throws RangeError when the bin is not a positive number or would make more than 2^30 bins
 */
export function binPhotons(stream: PhotonStream, binSeconds: number): Trace {
  const binTicks = ticksPerBin(stream.tickSeconds, binSeconds)
  const span = Math.max(0, stream.endTick - stream.startTick)
  const bins = wholeBins(span, binTicks)
  if (bins > LARGEST_BINS)
    throw new RangeError(
      `A bin of ${binSeconds} s would cut the record into ${bins} bins; at most ${LARGEST_BINS} are kept. Choose a wider bin.`,
    )
  const parts = stream.chunks.map((chunk) => wholePart(chunk, stream.startTick, edgeTick(bins, binTicks)))
  // Counting starts in 16 bits, which is half the memory to touch, and is done again in 32 should a count pass 65535.
  let counts: Counts = new Uint16Array(bins)
  if (!countParts(counts, stream, parts, binTicks)) {
    counts = new Uint32Array(bins)
    countParts(counts, stream, parts, binTicks)
  }
  let before = 0
  let partial = 0
  let after = 0
  stream.chunks.forEach(({ baseTick, offsets, count }, c) => {
    const [first, stop] = parts[c]
    const end = firstAtLeast(offsets, stop, count, span - (baseTick - stream.startTick))
    before += first
    partial += end - stop
    after += count - end
  })
  return {
    kind: 'trace',
    counts,
    binSeconds,
    startSeconds: stream.startTick * stream.tickSeconds,
    coverage: null,
    dropped: withDropped(stream.dropped, {
      [BEFORE_START]: before,
      [PARTIAL_BIN]: partial,
      [AFTER_END]: after,
    }),
  }
}

/** Indices [first, stop) of the photons of a chunk that fall in whole bins. */
function wholePart(chunk: PhotonChunk, startTick: number, lastEdge: number): readonly [number, number] {
  const relative = chunk.baseTick - startTick
  const first = relative >= 0 ? 0 : firstAtLeast(chunk.offsets, 0, chunk.count, -relative)
  return [first, firstAtLeast(chunk.offsets, first, chunk.count, lastEdge - relative)]
}

/** Adds all photons of the parts to `counts`; false, with counts spoilt, when one does not fit in 16 bits. */
function countParts(
  counts: Counts,
  stream: PhotonStream,
  parts: readonly (readonly [number, number])[],
  binTicks: number,
): boolean {
  const narrow = counts instanceof Uint16Array
  let largest = 0
  for (let c = 0; c < parts.length; c++) {
    const [first, stop] = parts[c]
    if (stop === first) continue
    const { baseTick, offsets } = stream.chunks[c]
    const relative = baseTick - stream.startTick
    const binsSpanned = (offsets[stop - 1] - offsets[first]) / binTicks + 1
    if (stop - first >= DENSE_PHOTONS_PER_BIN * binsSpanned)
      largest |= countByEdges(counts, offsets, first, stop, relative, binTicks)
    else if (Number.isInteger(binTicks))
      largest |= countWhole(counts, offsets, first, stop, relative, binTicks)
    else largest |= countFractional(counts, offsets, first, stop, relative, binTicks)
    if (narrow && largest >>> 16 !== 0) return false
  }
  return true
}

/** `known` plus the causes of `more` that have photons; sums where both name a cause. */
export function withDropped(known: DroppedCounts, more: DroppedCounts): DroppedCounts {
  const sum: Record<string, number> = { ...known }
  for (const [cause, photons] of Object.entries(more))
    if (photons > 0) sum[cause] = (sum[cause] ?? 0) + photons
  return sum
}

/** Bin width in ticks, made whole when it is whole but for the rounding of its decimal digits. */
function ticksPerBin(tickSeconds: number, binSeconds: number): number {
  const ticks = binSeconds / tickSeconds
  if (!(ticks > 0 && Number.isFinite(ticks)))
    throw new RangeError(`Expected a bin width above 0 s, received ${binSeconds} s. Enter a positive width.`)
  const whole = Math.round(ticks)
  return whole >= 1 && Math.abs(ticks - whole) <= WHOLE_TICKS_TOLERANCE * whole ? whole : ticks
}

function edgeTick(k: number, binTicks: number): number {
  return Math.ceil(k * binTicks)
}

/** Largest n whose edge is inside the span. */
function wholeBins(span: number, binTicks: number): number {
  let n = Math.floor(span / binTicks)
  while (n > 0 && edgeTick(n, binTicks) > span) n--
  while (edgeTick(n + 1, binTicks) <= span) n++
  return n
}

/** Bin of tick x (relative to the start of the record): the k with edge(k) <= x < edge(k + 1). */
function binOfTick(x: number, binTicks: number): number {
  let k = Math.floor(x / binTicks)
  while (edgeTick(k, binTicks) > x) k--
  while (edgeTick(k + 1, binTicks) <= x) k++
  return k
}

/** First index in [from, to) whose offset is at least `limit`; `to` when none is. */
function firstAtLeast(offsets: Uint32Array, from: number, to: number, limit: number): number {
  let low = from
  let high = to
  while (low < high) {
    const middle = (low + high) >>> 1
    if (offsets[middle] < limit) low = middle + 1
    else high = middle
  }
  return low
}

/**
 * Many photons per bin: the count of a bin is the distance between the places of its two edges. The place is
 * found by striding 16 photons (one cache line) at a time and then halving, so most photons are never looked at.
 * This and the two below return the OR of all counts written: its bits reach past 16 when a count does.
 *
 * Offsets are read as signed numbers and compared by the sign bit of a 32-bit difference, which needs no branch. No difference
 * leaves 32 bits because the two halves of a chunk (below and from 2^31) are taken apart, edges clipped to the half.
 * The one offset that would meet its clipped edge, 2^31 - 1, is counted by itself.
 */
function countByEdges(
  counts: Counts,
  offsets: Uint32Array,
  first: number,
  stop: number,
  relative: number,
  binTicks: number,
): number {
  const signed = new Int32Array(offsets.buffer, offsets.byteOffset, offsets.length)
  const single = firstAtLeast(offsets, first, stop, LOWER_LIMIT)
  const upper = firstAtLeast(offsets, single, stop, LOWER_LIMIT + 1)
  let largest = 0
  if (single > first)
    largest = countHalfByEdges(counts, signed, first, single, relative, binTicks, LOWER_LIMIT)
  if (upper > single) {
    const k = binOfTick(relative + LOWER_LIMIT, binTicks)
    largest |= counts[k] + (upper - single)
    counts[k] += upper - single
  }
  if (stop > upper) largest |= countHalfByEdges(counts, signed, upper, stop, relative, binTicks, 2 ** 32)
  return largest
}

function countHalfByEdges(
  counts: Counts,
  signed: Int32Array,
  first: number,
  stop: number,
  relative: number,
  binTicks: number,
  limit: number,
): number {
  let place = first | 0
  let k = binOfTick(relative + (limit > LOWER_LIMIT ? signed[first] + 2 ** 32 : signed[first]), binTicks)
  const lastStride = (stop - 16) | 0
  let guess = 0
  let largest = 0
  while (place < stop) {
    const edge = Math.min(Math.ceil((k + 1) * binTicks) - relative, limit) | 0
    const begin = place
    // A level lasts many bins: most of the last count can be jumped over in one look.
    const jump = (place + guess) | 0
    if (jump <= lastStride && signed[jump] < edge) place = jump
    while (place <= lastStride && signed[place + 15] < edge) place = (place + 16) | 0
    if (place <= lastStride) {
      // signed[place + 15] is at or past the edge: four halvings of the 16.
      place = (place + (((signed[place + 7] - edge) >>> 31) << 3)) | 0
      place = (place + (((signed[place + 3] - edge) >>> 31) << 2)) | 0
      place = (place + (((signed[place + 1] - edge) >>> 31) << 1)) | 0
      place = (place + ((signed[place] - edge) >>> 31)) | 0
    } else while (place < stop && signed[place] < edge) place = (place + 1) | 0
    const added = (place - begin) | 0
    const count = counts[k] + added
    largest |= count
    counts[k] = count
    guess = (added - (added >> 2)) | 0
    k++
    // After an empty bin, jump over the silence.
    if (place === begin && place < stop)
      k = binOfTick(relative + (limit > LOWER_LIMIT ? signed[place] + 2 ** 32 : signed[place]), binTicks)
  }
  return largest
}

/**
 * Few photons per bin, whole ticks: each photon is placed by one multiplication. x + 1/2 lies at least 1/2 tick from every
 * edge, and the rounding of (x + 1/2) x (1 / bin) stays below 2^-51 x / bin, so the whole part is exact for
 * all x < 2^50 ticks after the bin in which the chunk starts (a chunk spans less than 2^32).
 */
function countWhole(
  counts: Counts,
  offsets: Uint32Array,
  first: number,
  stop: number,
  relative: number,
  binTicks: number,
): number {
  const phase = ((relative % binTicks) + binTicks) % binTicks
  const bin0 = (relative - phase) / binTicks
  const shift = phase + 0.5
  const perTick = 1 / binTicks
  let largest = 0
  if (bin0 >= 0) {
    const base = bin0 | 0
    for (let i = first; i < stop; i++) {
      const k = (base + (((offsets[i] + shift) * perTick) | 0)) | 0
      const count = counts[k] + 1
      largest |= count
      counts[k] = count
    }
  } else
    for (let i = first; i < stop; i++) largest |= ++counts[bin0 + Math.floor((offsets[i] + shift) * perTick)]
  return largest
}

/** Few photons per bin, broken ticks: placed by multiplication, then moved to agree with the edges. */
function countFractional(
  counts: Counts,
  offsets: Uint32Array,
  first: number,
  stop: number,
  relative: number,
  binTicks: number,
): number {
  const perTick = 1 / binTicks
  let largest = 0
  for (let i = first; i < stop; i++) {
    const x = relative + offsets[i]
    let k = Math.floor((x + 0.5) * perTick)
    if (edgeTick(k, binTicks) > x || edgeTick(k + 1, binTicks) <= x) k = binOfTick(x, binTicks)
    const count = counts[k] + 1
    largest |= count
    counts[k] = count
  }
  return largest
}
