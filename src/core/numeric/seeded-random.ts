import type { RandomSource } from './random-source.ts'

const TWO_TO_MINUS_53 = 2 ** -53

/**
 * A seeded uniform generator: xoshiro128** of Blackman and Vigna (ACM Trans. Math. Softw. 47, 36 (2021)); the
 * 128-bit state is filled from the seed's text by a mixing hash of 32 bits, so two of 10^4 different seeds share their
 * stream with a chance of one in a hundred, and changing the hash would change every seeded record. Equal seeds give
 * equal numbers on every machine; a number and its text are the same seed.
 */
export function seededRandom(seed: number | string): RandomSource {
  const text = String(seed)
  let hash = 0x9e3779b9 ^ text.length
  const next32 = (): number => {
    // Finaliser of a 32-bit mixing hash, run as a counter generator (splitmix style).
    hash = (hash + 0x9e3779b9) | 0
    let z = hash
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b)
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35)
    return (z ^ (z >>> 16)) >>> 0
  }
  for (let i = 0; i < text.length; i++) {
    hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193)
    hash = (hash ^ (hash >>> 15)) + i
    next32()
  }
  let a = next32() | 0
  let b = next32() | 0
  let c = next32() | 0
  let d = next32() | 0 || 1

  const bits32 = (): number => {
    const r = Math.imul(b, 5)
    const result = Math.imul((r << 7) | (r >>> 25), 9)
    const t = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= t
    d = (d << 11) | (d >>> 21)
    return result >>> 0
  }
  return {
    uniform() {
      const high = bits32() >>> 5
      const low = bits32() >>> 6
      return (high * 67108864 + low + 0.5) * TWO_TO_MINUS_53
    },
  }
}

/** A seed for an independent stream: text made of the parent's seed and a label. */
export function splitSeed(seed: number | string, label: string | number): string {
  return `${seed}/${label}`
}
