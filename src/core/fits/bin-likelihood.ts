import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law, LawAt } from '../laws/law.ts'
import { compressed, type WeightedBins } from './compress-sample.ts'
import { edgeShift, lnMeanSurvival, referenceSeconds } from './mean-survival.ts'
import { triangleNodes } from './triangle-nodes.ts'

/** The likelihood of the dwells of one sample at or above a shortest duration, as a function of a law's coordinates. */
export interface BinLikelihood {
  readonly complete: number
  readonly censored: number
  /** Complete dwells as nodes, for start values. */
  readonly nodes: WeightedBins
  /** ln L; -Infinity where the law gives an observed dwell no chance. */
  at(coordinates: readonly number[]): number
}

/**
 * Bin-exact likelihood, noise-free; valid from about three bins on, where shot noise no longer blurs durations.
 *
 * Both edges of a dwell are rounded to bins at the fractional threshold theta, so that a true duration t is seen as m
 * bins with probability max(0, 1 - |t/Delta + 1 - 2 theta - m|). Then, with Sbar(m) the chance of being seen for at least m
 * bins (see mean-survival.ts) and m0 the shortest fitted duration,
 *
 *   complete at m bins     P(m) = integral of (1 - |x|) f((m - 1 + 2 theta + x) Delta) Delta dx    over  Sbar(m0)
 *   cut after m bins       Sbar(m): it lasts for at least m                                        over  Sbar(m0)
 *   entered at age q > m0  the same, but given that it lasts for at least q                        over  Sbar(q)
 *
 * P(m) = Sbar(m) - Sbar(m + 1) is integrated, not subtracted, which would lose all digits of long durations. A dwell cut
 * before m0 says nothing and is left out; an entry before m0 changes nothing, as the dwell counts only from m0 on.
 *
 * The law is anchored at the lowest true duration that can be seen as m0 bins, so that nothing is cut off; the anchor
 * drops out of all ratios.
 *
 * @param compress false keeps one node per distinct duration: the slow reference for the default
 */
export function binLikelihood(
  law: Law,
  sample: DwellSample,
  shortestBins: number,
  { compress = true }: { readonly compress?: boolean } = {},
): BinLikelihood {
  const { binSeconds } = sample
  const shiftBins = edgeShift(sample)
  const reference = referenceSeconds(sample, shortestBins)
  const fewer = (list: WeightedBins): WeightedBins => (compress ? compressed(list) : list)
  const chosen = atLeast(sample.completeBins, sample.completeWeights, shortestBins)
  const nodes = fewer(chosen)
  const { bins, weights } = nodes
  const { first, seconds, weights: shares } = triangleNodes(bins, shiftBins, binSeconds, reference)
  const cut = atLeast(sample.censoredBins, sample.censoredWeights, shortestBins)
  const censored = fewer(cut)
  const later = atLeast(sample.enteredBins, sample.enteredWeights, shortestBins)
  const entered = fewer(later)
  const complete = totalWeight(chosen.weights)
  const cutTotal = totalWeight(cut.weights)
  // Every dwell that is at risk from the shortest duration on carries one denominator; one that entered later
  // carries its own instead.
  const anchored = complete + cutTotal - totalWeight(later.weights)

  return {
    complete,
    censored: cutTotal,
    nodes,
    at(coordinates) {
      const here = law.at(coordinates, reference)
      const lnSurvival = (m: number): number => lnMeanSurvival(here, m, shiftBins, binSeconds, reference)
      let sum = 0
      for (let i = 0; i < bins.length; i++) {
        // Densities relative to the first node, which keeps far tails from underflowing.
        const top = here.logDensity(seconds[first[i]])
        if (top === Number.NEGATIVE_INFINITY) return top
        let mass = shares[first[i]]
        for (let n = first[i] + 1; n < first[i + 1]; n++) {
          mass += shares[n] * Math.exp(here.logDensity(seconds[n]) - top)
        }
        sum +=
          weights[i] *
          (top +
            (mass < Infinity
              ? Math.log(mass)
              : lnSteepMass(here, seconds, shares, first[i], first[i + 1], top)))
      }
      for (let i = 0; i < censored.bins.length; i++) sum += censored.weights[i] * lnSurvival(censored.bins[i])
      for (let i = 0; i < entered.bins.length; i++) sum -= entered.weights[i] * lnSurvival(entered.bins[i])
      return sum - anchored * lnSurvival(shortestBins)
    },
  }
}

/** ln of the sum of share x density / e^top where the density climbs by more than e^700 within one kernel. */
function lnSteepMass(
  at: LawAt,
  seconds: Float64Array,
  shares: Float64Array,
  from: number,
  to: number,
  top: number,
): number {
  let highest = top
  for (let n = from; n < to; n++) highest = Math.max(highest, at.logDensity(seconds[n]))
  let mass = 0
  for (let n = from; n < to; n++) mass += shares[n] * Math.exp(at.logDensity(seconds[n]) - highest)
  return highest - top + Math.log(mass)
}

/** Dwells of at least `shortestBins`; nodes of a compressed list count by their own position. */
export function atLeast(bins: Float64Array, weights: Float64Array, shortestBins: number): WeightedBins {
  const keptBins = new Float64Array(bins.length)
  const keptWeights = new Float64Array(bins.length)
  let n = 0
  for (let i = 0; i < bins.length; i++) {
    if (!(bins[i] >= shortestBins)) continue
    keptBins[n] = bins[i]
    keptWeights[n++] = weights[i]
  }
  return { bins: keptBins.subarray(0, n), weights: keptWeights.subarray(0, n) }
}

/** Number of dwells. Weights of two nodes of one column add up to a whole number only up to rounding. */
export function totalWeight(weights: Float64Array): number {
  let sum = 0
  for (let i = 0; i < weights.length; i++) sum += weights[i]
  const whole = Math.round(sum)
  return Math.abs(sum - whole) < 1e-6 ? whole : sum
}
