import type { Trace } from '../../../src/core/photons/trace.ts'

/** Seeded uniform numbers in (0, 1): a 32-bit counter hashed by multiplications, enough for a test. */
export function uniformSource(seed: number): () => number {
  let a = seed >>> 0
  return () => {
    a = (a + 0x6d2b79f5) | 0
    let t = Math.imul(a ^ (a >>> 15), 1 | a)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32 + 2 ** -40
  }
}

/** Poisson count by products of uniforms; large means are split in halves, sums of Poisson counts being Poisson. */
export function poissonCount(uniform: () => number, mean: number): number {
  if (mean > 30) return poissonCount(uniform, mean / 2) + poissonCount(uniform, mean / 2)
  const limit = Math.exp(-mean)
  let count = -1
  for (let product = 1; product > limit; product *= uniform()) count++
  return count
}

export interface Telegraph {
  readonly trace: Trace
  /** Share of each bin spent on, and baseline of each bin in counts. */
  readonly onShare: Float64Array
  readonly baseline: Float64Array
}

/** Power-law dwells from 10 ms (density exponents 1.5 on, 1.6 off), on-times cut off at `tauSeconds` (density form). */
export function telegraph(options: {
  readonly seconds: number
  readonly binSeconds: number
  readonly offCps: (t: number) => number
  readonly signalCps: number
  readonly tauSeconds: number
  readonly seed: number
}): Telegraph {
  const { seconds, binSeconds, offCps, signalCps, tauSeconds, seed } = options
  const uniform = uniformSource(seed)
  const bins = Math.round(seconds / binSeconds)
  const onShare = new Float64Array(bins)
  let on = uniform() < 0.5
  for (let t = 0; t < seconds; ) {
    let dwell = 0.01 * uniform() ** (on ? -2 : -1 / 0.6)
    if (on) while (uniform() > Math.exp(-dwell / tauSeconds)) dwell = 0.01 * uniform() ** -2
    const end = Math.min(seconds, t + dwell)
    if (on)
      for (let i = Math.floor(t / binSeconds); i < bins && i * binSeconds < end; i++)
        onShare[i] += (Math.min(end, (i + 1) * binSeconds) - Math.max(t, i * binSeconds)) / binSeconds
    t = end
    on = !on
  }
  const baseline = Float64Array.from({ length: bins }, (_, i) => offCps((i + 0.5) * binSeconds) * binSeconds)
  const counts = Uint16Array.from(onShare, (share, i) =>
    poissonCount(uniform, baseline[i] + share * signalCps * binSeconds),
  )
  return { trace: traceOf(counts, binSeconds), onShare, baseline }
}

export function traceOf(counts: ArrayLike<number>, binSeconds = 0.01): Trace {
  return {
    kind: 'trace',
    counts: Uint16Array.from(counts),
    binSeconds,
    startSeconds: 0,
    coverage: null,
    dropped: {},
  }
}

/** Longest run of bins that are on, in bins, and their share. */
export function runsOf(bins: number, isOn: (bin: number) => boolean): { longest: number; share: number } {
  let longest = 0
  let run = 0
  let on = 0
  for (let i = 0; i < bins; i++) {
    run = isOn(i) ? run + 1 : 0
    on += run > 0 ? 1 : 0
    longest = Math.max(longest, run)
  }
  return { longest, share: on / bins }
}
