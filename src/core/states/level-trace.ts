import { baselineCounts } from '../baseline/baseline-at.ts'
import type { Baseline } from '../baseline/baseline.ts'
import type { Trace } from '../photons/trace.ts'
import type { LevelledTrace } from './levels.ts'

/**
 * The trace on a level axis, see LevelledTrace. With a baseline that is the same everywhere the values are the counts
 * themselves (the same memory). The mean baseline is taken over usable bins.
 *
 * @param unusable 1 where a bin cannot be used; null when all can
 */
export function levelTrace(trace: Trace, baseline: Baseline, unusable: Uint8Array | null): LevelledTrace {
  const { counts, binSeconds, startSeconds } = trace
  const perBin = baselineCounts(baseline, trace)
  const { mean, constant } = meanOver(perBin, unusable)
  const rest = {
    gaps: unusable,
    binSeconds,
    startSeconds,
    offCounts: mean,
    onCounts: mean + baseline.onAboveCps * binSeconds,
  }
  if (constant) {
    let highest = 0
    for (let i = 0; i < counts.length; i++) if (counts[i] > highest) highest = counts[i]
    return { values: counts, offset: 0, highest, ...rest }
  }
  let lowest = Number.POSITIVE_INFINITY
  let highest = Number.NEGATIVE_INFINITY
  for (let i = 0; i < counts.length; i++) {
    const value = Math.floor(counts[i] - (perBin[i] - mean))
    if (value < lowest) lowest = value
    if (value > highest) highest = value
  }
  const values = highest - lowest < 65536 ? new Uint16Array(counts.length) : new Uint32Array(counts.length)
  for (let i = 0; i < counts.length; i++) values[i] = Math.floor(counts[i] - (perBin[i] - mean)) - lowest
  return { values, offset: lowest, highest, ...rest }
}

/** Mean over usable bins, over all when none is; whether all entries are equal. An empty array has mean 0. */
function meanOver(perBin: Float64Array, unusable: Uint8Array | null): { mean: number; constant: boolean } {
  let sum = 0
  let bins = 0
  let all = 0
  let constant = true
  const first = perBin[0]
  for (let i = 0; i < perBin.length; i++) {
    const b = perBin[i]
    if (!Number.isFinite(b))
      throw new RangeError(`Expected a finite baseline in every bin, received ${b} in bin ${i}.`)
    if (b !== first) constant = false
    all += b
    if (unusable !== null && unusable[i] !== 0) continue
    sum += b
    bins++
  }
  if (constant) return { mean: first ?? 0, constant }
  return { mean: bins > 0 ? sum / bins : all / perBin.length, constant }
}
