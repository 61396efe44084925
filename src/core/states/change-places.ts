/** Values below this fit the paired comparison: two 16-bit values in one 32-bit addition, the top bit of each free. */
const PAIRED_LIMIT = 0x8000

/** Whether the bytes of a 32-bit word stand lowest first, as the paired comparison needs. */
const LOWEST_FIRST = new Uint8Array(Uint32Array.of(1).buffer)[0] === 1

/** True when `changePlaces` may compare stored values in pairs: 16-bit, all below 2^15. */
export function comparesInPairs(values: Uint16Array | Uint32Array, highestStored: number): boolean {
  return LOWEST_FIRST && values instanceof Uint16Array && highestStored < PAIRED_LIMIT
}

/**
 * Writes every i in (from, to) where `values[i] >= level` differs from `values[i - 1] >= level` to `out`, in
 * order, from out[at] on; returns the place after the last one written. `out` needs room for to - from - 1 more.
 *
 * Thirty-two bins at a time become one word of comparison results without branches; a uniform word, the common case,
 * costs no more, and in the others each change is found by counting leading zeros.
 *
 * @param level a bin is on when its stored value is at least this
 * @param pairs result of `comparesInPairs`
 */
export function changePlaces(
  values: Uint16Array | Uint32Array,
  level: number,
  from: number,
  to: number,
  pairs: boolean,
  out: Uint32Array,
  at: number,
): number {
  if (to - from < 2 || level <= 0) return at
  // Words of 32 bins begin where the 32-bit view of the 16-bit values has whole entries.
  const oddStart = pairs ? (values.byteOffset >> 1) & 1 : 0
  const first = Math.min(to, from + 1 + ((from + 1 + oddStart) & 1))
  let place = at
  let previous = values[from] >= level ? 1 : 0
  for (let i = from + 1; i < first; i++) {
    const now = values[i] >= level ? 1 : 0
    out[place] = i
    place += now ^ previous
    previous = now
  }
  const words = (to - first) >> 5
  place =
    pairs && level <= PAIRED_LIMIT
      ? pairedWords(values, level, first, words, previous, out, place)
      : plainWords(values, level, first, words, previous, out, place)
  const rest = first + (words << 5)
  previous = values[rest - 1] >= level ? 1 : 0
  for (let i = rest; i < to; i++) {
    const now = values[i] >= level ? 1 : 0
    if (now !== previous) out[place++] = i
    previous = now
  }
  return place
}

/** Changes within words of 32 bins; bit 31 of a word is its first bin. */
function plainWords(
  values: Uint16Array | Uint32Array,
  level: number,
  first: number,
  words: number,
  before: number,
  out: Uint32Array,
  at: number,
): number {
  let place = at
  let previous = before
  for (let w = 0; w < words; w++) {
    const base = first + (w << 5)
    let mask = 0
    for (let j = 0; j < 32; j++) mask = (mask << 1) | (values[base + j] >= level ? 1 : 0)
    let changes = mask ^ ((mask >>> 1) | (previous << 31))
    previous = mask & 1
    while (changes !== 0) {
      const bit = Math.clz32(changes)
      out[place++] = base + bit
      changes &= 0x7fffffff >>> bit
    }
  }
  return place
}

/**
 * The same with two bins to an addition: lifted by 2^15 - level, a 16-bit half has its top bit set exactly when
 * the value is at least the level, and never carries into its neighbour (Lamport 1975, multiple byte
 * processing). The 16 results of a word are laid side by side: even bins in the low half, odd bins in the high
 * half.
 */
function pairedWords(
  values: Uint16Array | Uint32Array,
  level: number,
  first: number,
  words: number,
  before: number,
  out: Uint32Array,
  at: number,
): number {
  const two = new Uint32Array(values.buffer, values.byteOffset + 2 * first, words << 4)
  const lift = Math.imul(PAIRED_LIMIT - level, 0x10001)
  const TOPS = 0x80008000 | 0
  let place = at
  let previous = before
  for (let w = 0; w < words; w++) {
    const p = w << 4
    let shuffled = (two[p + 15] + lift) & TOPS
    shuffled = (shuffled >>> 1) | ((two[p + 14] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 13] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 12] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 11] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 10] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 9] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 8] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 7] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 6] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 5] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 4] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 3] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 2] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p + 1] + lift) & TOPS)
    shuffled = (shuffled >>> 1) | ((two[p] + lift) & TOPS)
    if (shuffled === ((0 - previous) | 0)) continue
    // Bit 31 - 2j is even bin 2j, bit 30 - 2j odd bin 2j + 1: swap the halves, then interleave them.
    let mask = (shuffled << 16) | (shuffled >>> 16)
    let swap = (mask ^ (mask >>> 8)) & 0x0000ff00
    mask ^= swap ^ (swap << 8)
    swap = (mask ^ (mask >>> 4)) & 0x00f000f0
    mask ^= swap ^ (swap << 4)
    swap = (mask ^ (mask >>> 2)) & 0x0c0c0c0c
    mask ^= swap ^ (swap << 2)
    swap = (mask ^ (mask >>> 1)) & 0x22222222
    mask ^= swap ^ (swap << 1)
    let changes = mask ^ ((mask >>> 1) | (previous << 31))
    previous = mask & 1
    const base = first + (w << 5)
    while (changes !== 0) {
      const bit = Math.clz32(changes)
      out[place++] = base + bit
      changes &= 0x7fffffff >>> bit
    }
  }
  return place
}
