import type { Trace } from '../photons/trace.ts'
import type { Recipe } from '../recipe/recipe.ts'
import type { Baseline } from './baseline.ts'
import {
  type FollowedLevels,
  followLevels,
  type LevelStart,
  smoothedCounts,
  SUPPORTED_BINS,
} from './follow-levels.ts'
import { levelLikelihood } from './level-likelihood.ts'
import { type KnotPlan, knotPlan } from './stiffness.ts'
import { fitTwoPoisson, levelDistance, SEPARABLE_DEVIATIONS, type TwoPoisson } from './two-poisson.ts'

/** Drift below this share of the signal cannot move a bin across a threshold that stands half way. */
const DRIFT_SHARE = 0.1
/** Two-sided 95 % point of the normal distribution. */
const BAND_DEVIATIONS = 1.959963984540054
const BEYOND_DOUBT_DEVIATIONS = 3
/** Factor at which the band ends where next to nothing is known. */
const WIDEST_BAND = 1000
/** Share of on bins to start from when the whole record is first taken as off. */
const SELDOM_ON = 0.02
/** That curve bends this much more slowly than the baseline may, so that it runs below on-times of some length. */
const CURVE_STIFFER = 10
/** On bins, in all, below which nothing is known of the on level. */
const LEAST_ON_BINS = 3

/**
 * The off level of a trace over time, with band and support. Counts are not touched.
 *
 * 1. Two-Poisson mixture of the whole histogram. 2. Rounds on confidently-off bins, eroded by one bin on either side
 * (`followLevels`). 3. For `automatic`: the moving baseline is fitted first and kept unless it strays from its mean, over
 * supported knots, by less than 0.1 of the signal; then the constant one is.
 *
 * Bad data do not throw: `status` and `message` say what is missing and what to do.
 *
 * @param choices method, stiffness (s; > 0, Infinity for a straight line in ln rate) and excluded spans, which must already
 *   be part of `unusable`
 * @param unusable 1 at bins to leave out; null when all can be used
 */
export function fitBaseline(
  trace: Trace,
  choices: Recipe['baseline'],
  unusable: Uint8Array | null,
): Baseline {
  const { counts, binSeconds } = trace
  const histogram = usableHistogram(counts, unusable)
  if (histogram.bins === 0) return withoutBins(trace, choices)
  const mixture = fitTwoPoisson(histogram.bySize)
  const moving = knotPlan(counts.length, binSeconds, choices.stiffnessSeconds)
  const plan = moving ?? { binsPerKnot: counts.length, knots: 1, knotSeconds: counts.length * binSeconds }
  const start: LevelStart = {
    off: mixture.offMean,
    lnBaseline: null,
    signal: mixture.onMean - mixture.offMean,
    onShare: Math.min(Math.max(mixture.onShare, 1 / (histogram.bins + 2)), 1 - 1 / (histogram.bins + 2)),
  }
  const constant = (from: LevelStart, reason: string, automatic: boolean): Baseline => {
    const levels = followLevels(counts, unusable, plan, binSeconds, null, from)
    return describe(trace, plan, levels, mixture, { method: 'constant', automatic, reason })
  }
  const automatic = choices.method === 'automatic'
  if (choices.method === 'constant') return constant(start, 'Constant: chosen by hand.', false)
  if (moving === null) {
    const reason = `Constant: a record of ${counts.length} bins is too short to follow a drift (40 are needed).`
    return constant(start, reason, automatic)
  }
  if (automatic && mixture.status === 'one-level')
    return constant(start, 'Constant: the counts scatter no more than one steady level would.', true)

  const drifting = followDrift(trace, unusable, plan, choices.stiffnessSeconds, start, histogram)
  if (!automatic)
    return describe(trace, plan, drifting, mixture, {
      method: 'drifting',
      automatic,
      reason: 'Drifting: chosen by hand.',
    })
  const strayCps = strayFromMean(drifting) / binSeconds
  const limitCps = (DRIFT_SHARE * drifting.signal) / binSeconds
  const onward = { ...start, off: meanLevel(drifting), signal: drifting.signal, onShare: drifting.onShare }
  if (Number.isNaN(strayCps)) return constant(onward, 'Constant: too few off bins to follow a drift.', true)
  const numbers = `the fitted baseline strays up to ${rate(strayCps)} from its mean`
  if (drifting.signal > 0 && strayCps < limitCps)
    return constant(
      onward,
      `Constant: ${numbers}, less than a tenth of the signal (${rate(limitCps)}).`,
      true,
    )
  const reason =
    drifting.signal > 0
      ? `Drifting: ${numbers}, at least a tenth of the signal (${rate(limitCps)}).`
      : `Drifting: ${numbers}, and there is no second level to compare it with.`
  return describe(trace, plan, drifting, mixture, { method: 'drifting', automatic, reason })
}

/**
 * The moving baseline from two starts, the better penalised likelihood kept: the levels of the mixture, right when the
 * drift is small beside the signal; and the smooth curve through all counts, right when the emitter is seldom on and the drift is what
 * the mixture took for two levels. When two levels then explain no more than one, there is no signal.
 */
function followDrift(
  trace: Trace,
  unusable: Uint8Array | null,
  plan: KnotPlan,
  stiffnessSeconds: number,
  start: LevelStart,
  histogram: UsableHistogram,
): FollowedLevels {
  const { counts, binSeconds } = trace
  const follow = (from: LevelStart): FollowedLevels =>
    followLevels(counts, unusable, plan, binSeconds, stiffnessSeconds, from)
  const plain = follow(start)
  if (start.signal === 0) return plain
  const likelihood = (levels: FollowedLevels) =>
    levelLikelihood(counts, unusable, plan.binsPerKnot, levels.lnBaseline, levels.signal)
  const curve = smoothedCounts(
    counts,
    unusable,
    plan,
    binSeconds,
    CURVE_STIFFER * stiffnessSeconds,
    histogram.mean,
  )
  const smooth = follow({ ...start, off: histogram.mean, lnBaseline: curve, onShare: SELDOM_ON })
  const [plainFit, smoothFit] = [likelihood(plain), likelihood(smooth)]
  const better = smoothFit.twoLevels - smooth.penalty > plainFit.twoLevels - plain.penalty
  const levels = better ? smooth : plain
  const fit = better ? smoothFit : plainFit
  // One more parameter, the signal, must earn at least ln(bins) after the switches are paid for.
  if (levels.signal > 0 && fit.twoLevels - fit.oneLevel > Math.log(histogram.bins)) return levels
  return follow({ off: histogram.mean, lnBaseline: curve, signal: 0, onShare: 0 })
}

interface UsableHistogram {
  readonly bySize: Float64Array
  readonly bins: number
  /** Counts per bin. */
  readonly mean: number
}

function usableHistogram(counts: Uint16Array | Uint32Array, unusable: Uint8Array | null): UsableHistogram {
  let largest = 0
  for (let i = 0; i < counts.length; i++) if (counts[i] > largest) largest = counts[i]
  const bySize = new Float64Array(largest + 1)
  let bins = 0
  let sum = 0
  for (let i = 0; i < counts.length; i++) {
    if (unusable !== null && unusable[i] !== 0) continue
    bySize[counts[i]]++
    bins++
    sum += counts[i]
  }
  return { bySize, bins, mean: bins > 0 ? sum / bins : 0 }
}

/** Greatest distance of a supported knot from the mean of the supported knots, counts per bin; NaN when there is none. */
function strayFromMean({ lnBaseline, sums }: FollowedLevels): number {
  let sum = 0
  let seen = 0
  let low = Number.POSITIVE_INFINITY
  let high = 0
  for (let j = 0; j < lnBaseline.length; j++) {
    if (sums.support[j] < SUPPORTED_BINS) continue
    const level = Math.exp(lnBaseline[j])
    sum += level
    seen++
    low = Math.min(low, level)
    high = Math.max(high, level)
  }
  return seen === 0 ? Number.NaN : Math.max(high - sum / seen, sum / seen - low)
}

function describe(
  trace: Trace,
  plan: KnotPlan,
  levels: FollowedLevels,
  mixture: TwoPoisson,
  chosen: Pick<Baseline, 'method' | 'automatic' | 'reason'>,
): Baseline {
  const { binSeconds, startSeconds } = trace
  const { lnBaseline, variance, sums } = levels
  const rateCps = lnBaseline.map((ln) => Math.exp(ln) / binSeconds)
  const reach = variance.map((v) => Math.min(Math.exp(BAND_DEVIATIONS * Math.sqrt(v)), WIDEST_BAND))
  let supported = 0
  let run = 0
  let longest = 0
  let offBins = 0
  for (let j = 0; j < plan.knots; j++) {
    const seen = sums.support[j] >= SUPPORTED_BINS
    supported += seen ? 1 : 0
    run = seen ? 0 : run + 1
    longest = Math.max(longest, run)
    offBins += sums.support[j]
  }
  const found = verdict(levels, mixture, chosen.method, offBins, binSeconds)
  const lit = found.status !== 'no-on-bins'
  return {
    ...chosen,
    knotSeconds: plan.knotSeconds,
    firstKnotSeconds: startSeconds + plan.knotSeconds / 2,
    rateCps,
    lowCps: rateCps.map((cps, j) => cps / reach[j]),
    highCps: rateCps.map((cps, j) => cps * reach[j]),
    supportBins: sums.support,
    supportedShare: supported / plan.knots,
    longestUnsupportedSeconds: Math.min(longest * plan.knotSeconds, trace.counts.length * binSeconds),
    onAboveCps: lit ? levels.signal / binSeconds : 0,
    onShare: lit ? sums.onBins / sums.usableBins : 0,
    rounds: levels.rounds,
    ...found,
  }
}

/** Whether the two levels can be relied on, and one sentence: what was found, and what to do when they cannot. */
function verdict(
  levels: FollowedLevels,
  mixture: TwoPoisson,
  method: Baseline['method'],
  offBins: number,
  binSeconds: number,
): Pick<Baseline, 'status' | 'message'> {
  const off = meanLevel(levels)
  if (mixture.status === 'one-level' || levels.signal === 0 || levels.sums.onBins < LEAST_ON_BINS)
    return {
      status: 'no-on-bins',
      message: `One level only, ${rate(off / binSeconds)}: taken as off, but counts alone cannot tell an emitter that never lit from one that never went dark. Compare with a blank area, or set the emitter aside.`,
    }
  const on = off + levels.signal
  const numbers = `off ${rate(off / binSeconds)}, on ${rate(on / binSeconds)}`
  // Where the levels overlap, the off bins sure enough to be used lie too low and the distance comes out too large; unless
  // a moving baseline puts it beyond doubt, the mixture, which uses all bins, decides.
  const followed = levelDistance(off, on)
  const overlap =
    mixture.status === 'not-separable' && (method === 'constant' || followed < BEYOND_DOUBT_DEVIATIONS)
  const distance = overlap ? levelDistance(mixture.offMean, mixture.onMean) : followed
  if (distance < SEPARABLE_DEVIATIONS)
    return {
      status: 'not-separable',
      message: `The levels (${numbers}) lie ${Math.max(0, distance).toFixed(1)} standard deviations of one bin apart; at this bin width bins cannot be told on from off. Use a wider bin, or set the emitter aside.`,
    }
  if (offBins < SUPPORTED_BINS)
    return {
      status: 'no-off-bins',
      message: `Two levels (${numbers}), but no stretch of three off bins to rest a baseline on. Use a narrower bin, or set the emitter aside.`,
    }
  return {
    status: 'ok',
    message: `Two levels, ${numbers}, ${distance.toFixed(1)} standard deviations of one bin apart.`,
  }
}

/** Mean baseline over knots weighted by support, or over all knots when none has any; counts per bin. */
function meanLevel({ lnBaseline, sums }: FollowedLevels): number {
  let weighted = 0
  let weight = 0
  let plain = 0
  for (let j = 0; j < lnBaseline.length; j++) {
    const level = Math.exp(lnBaseline[j])
    weighted += sums.support[j] * level
    weight += sums.support[j]
    plain += level / lnBaseline.length
  }
  return weight > 0 ? weighted / weight : plain
}

/** One knot of rate 0 and no support, for a record that has no bin to fit. */
function withoutBins(trace: Trace, choices: Recipe['baseline']): Baseline {
  const seconds = Math.max(trace.counts.length, 1) * trace.binSeconds
  return {
    method: 'constant',
    automatic: choices.method === 'automatic',
    reason: 'Constant: there is no usable bin to fit.',
    knotSeconds: seconds,
    firstKnotSeconds: trace.startSeconds + seconds / 2,
    rateCps: new Float64Array(1),
    lowCps: new Float64Array(1),
    highCps: new Float64Array(1),
    supportBins: new Float64Array(1),
    supportedShare: 0,
    longestUnsupportedSeconds: trace.counts.length * trace.binSeconds,
    onAboveCps: 0,
    onShare: 0,
    rounds: 0,
    status: 'no-off-bins',
    message:
      trace.counts.length === 0
        ? 'The record has no whole bin at this bin width. Use a narrower bin.'
        : 'No bin can be used: all are excluded or not wholly exposed. Exclude less, or set the emitter aside.',
  }
}

function rate(cps: number): string {
  return cps >= 1000 ? `${Number((cps / 1000).toPrecision(3))} kcps` : `${Number(cps.toPrecision(3))} cps`
}
