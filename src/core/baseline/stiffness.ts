/**
 * What the stiffness in seconds means, and the penalty it becomes.
 *
 * The fit maximises sum_j [Y_j eta_j - e^eta_j D W_j] - (mu / 2) sum_j (eta_(j-1) - 2 eta_j + eta_(j+1))^2, knots h seconds
 * apart, eta = ln rate. For slow curves the second differences are h^2 eta'', so the sum is an integral with
 * (mu h^3 / 2) (eta'')^2. Where the emitter is off and the rate near r counts per second, the information on eta is r per
 * second, and a wave of angular frequency w in the data returns in the fit with amplitude 1 / (1 + mu h^3 w^4 / r): the
 * equivalent kernel of a cubic smoothing spline (Silverman 1984, Ann. Statist. 12, 898). It halves the wave of period
 *
 *     P = 2 pi (mu h^3 / r)^(1/4)
 *
 * and passes slower waves (period 2 P: 94 %; P / 2: 6 %). P is the stiffness: the shortest time over which the baseline may bend.
 * It holds whatever the knot spacing; mu = r (P / 2 pi)^4 / h^3 with r the global off level. With mu = 300 at 1 s
 * knots on 1 kcps P is 4.65 s.
 */
export const DEFAULT_STIFFNESS_SECONDS = 4.65

/** Knots per stiffness: 1 s knots at the default. */
const KNOTS_PER_STIFFNESS = DEFAULT_STIFFNESS_SECONDS
const LEAST_BINS_PER_KNOT = 10
const LEAST_KNOTS = 4
const MOST_KNOTS = 20_000
/** Pull of ln rate towards the global off level, as a share of the information of an off second: 0.02 at 1 kcps and 1 s knots. */
const RIDGE_SHARE = 2e-5
/** Above this ratio of kernel time to knot spacing the fit is a straight line in ln rate to rounding; more would only cost digits. */
const STIFFEST_KNOTS = 100

export interface KnotPlan {
  readonly binsPerKnot: number
  readonly knots: number
  readonly knotSeconds: number
}

/**
 * Knot spacing for a stiffness, a whole number of bins; null when the record is too short for a moving baseline
 * (below 40 bins). At least 4 knots, 10 bins each, at most 20 000 knots.
 */
export function knotPlan(bins: number, binSeconds: number, stiffnessSeconds: number): KnotPlan | null {
  const most = Math.floor(bins / LEAST_KNOTS)
  if (most < LEAST_BINS_PER_KNOT) return null
  const wanted = Math.round(stiffnessSeconds / KNOTS_PER_STIFFNESS / binSeconds)
  const binsPerKnot = Math.min(most, Math.max(wanted, LEAST_BINS_PER_KNOT, Math.ceil(bins / MOST_KNOTS)))
  return { binsPerKnot, knots: Math.ceil(bins / binsPerKnot), knotSeconds: binsPerKnot * binSeconds }
}

/** Weights mu of the squared second differences and rho of the pull to the off level, for knots h apart and an off level in cps. */
export function penaltyWeights(
  stiffnessSeconds: number,
  knotSeconds: number,
  offCps: number,
): { bend: number; pull: number } {
  const kernelKnots = Math.min(stiffnessSeconds / (2 * Math.PI * knotSeconds), STIFFEST_KNOTS)
  return {
    bend: offCps * knotSeconds * kernelKnots ** 4,
    pull: RIDGE_SHARE * offCps * knotSeconds,
  }
}
