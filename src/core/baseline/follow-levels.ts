import { confidentOff, type OffSums } from './confident-off.ts'
import { fitKnots } from './fit-knots.ts'
import { type KnotPlan, penaltyWeights } from './stiffness.ts'

/** Where the rounds start, from the histogram of the whole record. */
export interface LevelStart {
  /** Off level of the whole record, counts per bin; sets the strength of the penalty and where it pulls to. */
  readonly off: number
  /** Where the knots start, ln counts per bin; null starts them at the off level. */
  readonly lnBaseline: Float64Array | null
  /** Counts per bin; 0 when there is one level only. */
  readonly signal: number
  readonly onShare: number
}

/** Levels after the rounds, counts per bin. */
export interface FollowedLevels {
  readonly lnBaseline: Float64Array
  readonly variance: Float64Array
  readonly sums: OffSums
  readonly signal: number
  readonly onShare: number
  readonly rounds: number
  /** What the penalty takes off the log-likelihood; 0 for a constant level. */
  readonly penalty: number
}

const MOST_ROUNDS = 15
/**
 * Rounds end when the signal moves by less than this share and nearly all supported knots by less than it plus a tenth of their
 * own standard deviation. Some knots of a long record always trade a bin or two to and fro.
 */
const SETTLED = 1e-3
const SETTLED_DEVIATIONS = 0.1
const RESTLESS_SHARE = 0.005
const LEAST_INNER_BINS = 20
/** Support, in bins, from which a knot counts as seen. */
export const SUPPORTED_BINS = 5

/**
 * Rounds of expectation (which bins are confidently off), maximisation (the knots) and update of signal and on share,
 * until they settle: a baseline that rests on off bins only and admits ignorance through long on-times.
 *
 * @param stiffnessSeconds shortest time over which the baseline may bend; null for one constant level
 */
export function followLevels(
  counts: Uint16Array | Uint32Array,
  unusable: Uint8Array | null,
  plan: KnotPlan,
  binSeconds: number,
  stiffnessSeconds: number | null,
  start: LevelStart,
): FollowedLevels {
  // A level of no counts at all is set to half a count in the record, so that its logarithm exists.
  const least = 0.5 / Math.max(1, counts.length)
  const lnOff = Math.log(Math.max(start.off, least))
  let lnBaseline: Float64Array = start.lnBaseline ?? new Float64Array(plan.knots).fill(lnOff)
  let doubt: Float64Array | null = null
  let { signal, onShare } = start
  const penalty =
    stiffnessSeconds === null
      ? null
      : penaltyWeights(stiffnessSeconds, plan.knotSeconds, Math.exp(lnOff) / binSeconds)
  for (let rounds = 1; ; rounds++) {
    const sums = confidentOff(counts, unusable, plan.binsPerKnot, lnBaseline, doubt, signal, onShare)
    const fitted =
      penalty === null
        ? fitLevel(sums, plan.knots, lnOff, least)
        : fitKnots(sums.exposure, sums.counts, lnBaseline, penalty.bend, penalty.pull, lnOff)
    const nextSignal = signal > 0 ? signalOf(sums, least) : 0
    const signalMoved = signal > 0 ? Math.abs(nextSignal - signal) / signal : 0
    let restless = 0
    for (let j = 0; j < plan.knots; j++) {
      const settled = SETTLED + SETTLED_DEVIATIONS * Math.sqrt(fitted.variance[j])
      if (sums.support[j] >= SUPPORTED_BINS && Math.abs(fitted.lnBaseline[j] - lnBaseline[j]) > settled)
        restless++
    }
    lnBaseline = fitted.lnBaseline
    doubt = fitted.variance.map(Math.sqrt)
    signal = nextSignal
    // One bin of each kind is added, so that neither share can reach 0 and stay there.
    onShare = signal > 0 ? (sums.onBins + 1) / (sums.usableBins + 2) : 0
    if ((signalMoved < SETTLED && restless <= RESTLESS_SHARE * plan.knots) || rounds === MOST_ROUNDS)
      return { lnBaseline, variance: fitted.variance, sums, signal, onShare, rounds, penalty: fitted.penalty }
  }
}

/** Signal from the bins between on neighbours, from all on bins when there are hardly any such; 0 when there is no on bin. */
function signalOf(sums: OffSums, least: number): number {
  if (sums.innerOnBins >= LEAST_INNER_BINS) return Math.max(sums.innerOnExcess / sums.innerOnBins, least)
  return sums.onBins > 0.5 ? Math.max(sums.onExcess / sums.onBins, least) : 0
}

/** The whole record taken as off: the smooth curve through all counts, which an emitter that is seldom on hardly lifts. */
export function smoothedCounts(
  counts: Uint16Array | Uint32Array,
  unusable: Uint8Array | null,
  plan: KnotPlan,
  binSeconds: number,
  stiffnessSeconds: number,
  mean: number,
): Float64Array {
  const least = 0.5 / Math.max(1, counts.length)
  const start = { off: Math.max(mean, least), lnBaseline: null, signal: 0, onShare: 0 }
  return followLevels(counts, unusable, plan, binSeconds, stiffnessSeconds, start).lnBaseline
}

/** One level for all knots: total counts over total exposure. Its ln has variance 1 / counts. */
function fitLevel(
  sums: OffSums,
  knots: number,
  lnOff: number,
  least: number,
): { lnBaseline: Float64Array; variance: Float64Array; penalty: number } {
  let exposure = 0
  let counts = 0
  for (let j = 0; j < knots; j++) {
    exposure += sums.exposure[j]
    counts += sums.counts[j]
  }
  const ln = exposure > 0 ? Math.log(Math.max(counts / exposure, least)) : lnOff
  return {
    lnBaseline: new Float64Array(knots).fill(ln),
    variance: new Float64Array(knots).fill(1 / Math.max(counts, 0.5)),
    penalty: 0,
  }
}
