import { lnPoisson } from '../numeric/poisson.ts'
import type { LevelledTrace } from './levels.ts'

/** Chances of a wrong state per bin, and the cutoff times these make by themselves, one entry per threshold. */
export interface StateErrors {
  /** p0: an off bin called on. */
  readonly falseOnPerBin: Float64Array
  /** p1: an on bin called off. */
  readonly falseOffPerBin: Float64Array
  /** Bin width / p1: misread on bins end on dwells at this rate. Infinity where p1 underflows to 0. */
  readonly artefactCutoffOnSeconds: Float64Array
  /** Bin width / p0. */
  readonly artefactCutoffOffSeconds: Float64Array
}

/** Groups into which a moving baseline is summed up. */
const BASELINE_GROUPS = 64

/**
 * Error rates of every threshold for Poisson counts: p0 = P(Poisson(b) >= c), p1 = P(Poisson(b + A) < c).
 *
 * When the baseline moves, the threshold moves with it: bin i is on from ceil(c + b_i - bRef) counts. The rates
 * are then means over all usable bins, taken over 64 groups of equal width in b at the mean of each group; a
 * constant baseline is exact.
 *
 * @param thresholds integers on the levelled axis, ascending
 * @param baselinePerBin b_i, counts per bin, one per bin of the trace
 */
export function stateErrors(
  thresholds: Float64Array,
  levelled: LevelledTrace,
  baselinePerBin: Float64Array,
): StateErrors {
  const { offCounts, binSeconds } = levelled
  const above = Math.max(0, levelled.onCounts - offCounts)
  const falseOnPerBin = new Float64Array(thresholds.length)
  const falseOffPerBin = new Float64Array(thresholds.length)
  const wanted = new Float64Array(thresholds.length)
  for (const { baseline, share } of baselineGroups(baselinePerBin, levelled.gaps, offCounts)) {
    for (let t = 0; t < wanted.length; t++) wanted[t] = Math.ceil(thresholds[t] + (baseline - offCounts))
    const off = poissonTails(wanted, Math.max(0, baseline))
    const on = poissonTails(wanted, Math.max(0, baseline) + above)
    for (let t = 0; t < wanted.length; t++) {
      falseOnPerBin[t] += share * off.atLeast[t]
      falseOffPerBin[t] += share * on.below[t]
    }
  }
  return {
    falseOnPerBin,
    falseOffPerBin,
    artefactCutoffOnSeconds: falseOffPerBin.map((p) => binSeconds / p),
    artefactCutoffOffSeconds: falseOnPerBin.map((p) => binSeconds / p),
  }
}

/** Mean baseline and share of bins of each non-empty group; one group at the mean when the baseline does not move. */
function baselineGroups(
  perBin: Float64Array,
  gaps: Uint8Array | null,
  mean: number,
): { baseline: number; share: number }[] {
  let lowest = Number.POSITIVE_INFINITY
  let highest = Number.NEGATIVE_INFINITY
  for (let i = 0; i < perBin.length; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    if (perBin[i] < lowest) lowest = perBin[i]
    if (perBin[i] > highest) highest = perBin[i]
  }
  if (!(highest > lowest)) return [{ baseline: mean, share: 1 }]
  const bins = new Float64Array(BASELINE_GROUPS)
  const sums = new Float64Array(BASELINE_GROUPS)
  const perCount = BASELINE_GROUPS / (highest - lowest)
  let all = 0
  for (let i = 0; i < perBin.length; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    const group = Math.min(BASELINE_GROUPS - 1, Math.floor((perBin[i] - lowest) * perCount))
    bins[group]++
    sums[group] += perBin[i]
    all++
  }
  return Array.from(bins, (n, group) => ({ baseline: sums[group] / n, share: n / all })).filter(
    ({ share }) => share > 0,
  )
}

/**
 * P(K >= c) and P(K < c) for every c of an ascending list, with small relative error in both tails: each is a sum of
 * positive terms from its own far end, never a difference from 1. Terms follow from the mode outwards by their ratio.
 */
function poissonTails(ascending: Float64Array, mean: number): { atLeast: Float64Array; below: Float64Array } {
  const atLeast = new Float64Array(ascending.length)
  const below = new Float64Array(ascending.length)
  const mode = Math.floor(mean)
  const first = Math.max(0, Math.floor(mean - 40 * Math.sqrt(mean + 1)))
  const last = Math.ceil(mean + 40 * Math.sqrt(mean + 1) + 40)
  const terms = new Float64Array(last - first + 1)
  terms[mode - first] = Math.exp(lnPoisson(mode, mean))
  for (let k = mode - 1; k >= first; k--) terms[k - first] = (terms[k + 1 - first] * (k + 1)) / mean
  for (let k = mode + 1; k <= last; k++) terms[k - first] = (terms[k - 1 - first] * mean) / k
  let sum = 0
  let k = last
  for (let t = ascending.length - 1; t >= 0; t--) {
    for (; k >= ascending[t] && k >= first; k--) sum += terms[k - first]
    atLeast[t] = Math.min(1, ascending[t] <= 0 ? 1 : sum)
  }
  sum = 0
  k = first
  for (let t = 0; t < ascending.length; t++) {
    for (; k < ascending[t] && k <= last; k++) sum += terms[k - first]
    below[t] = Math.min(1, sum)
  }
  return { atLeast, below }
}
