import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law, LawAt } from '../laws/law.ts'
import { gaussLegendre } from '../numeric/gauss-legendre.ts'
import { compressed } from './compress-sample.ts'
import { triangleNodes } from './triangle-nodes.ts'

/** The likelihood of the dwells of one sample at or above a shortest duration, as a function of a law's coordinates. */
export interface BinLikelihood {
  readonly complete: number
  readonly censored: number
  /** ln L; -Infinity where the law gives an observed dwell no chance. */
  at(coordinates: readonly number[]): number
}

/** Points per bin for the bin-averaged survival. */
const SURVIVAL_POINTS = 8
/** The reference duration may not fall below this share of a bin. */
const LEAST_REFERENCE = 0.05

/**
 * ln of the bin-averaged survival over [(m - 1) Delta - delta, m Delta - delta], delta = (1 - 2 theta) Delta: the chance
 * that a dwell is observed for at least m bins. With S = 1 up to t0, the mean over [t0, t0 + Delta] is S(t0) minus
 * the integral of (1 - x) f(t0 + x Delta) Delta over x in [0, 1], which needs the density only.
 */
export function lnMeanSurvival(at: LawAt, m: number, shiftBins: number, binSeconds: number): number {
  const { nodes, weights } = gaussLegendre(SURVIVAL_POINTS)
  const from = m - shiftBins - 1
  const lnStart = at.logSurvival(Math.max(0, from) * binSeconds)
  let lost = 0
  for (let i = 0; i < SURVIVAL_POINTS; i++) {
    const x = 0.5 + 0.5 * nodes[i]
    if (from + x <= 0) continue
    lost += 0.5 * weights[i] * (1 - x) * Math.exp(at.logDensity((from + x) * binSeconds) - lnStart)
  }
  return lnStart + Math.log1p(-lost * binSeconds)
}

/** Bins by which the kernel of an observed duration sits below it: 1 - 2 theta. */
export function edgeShift(sample: Pick<DwellSample, 'edgeShare'>): number {
  return 1 - 2 * sample.edgeShare
}

/** Duration, s, at which the law is anchored: the lowest true duration that can be seen as `shortestBins`. */
export function referenceSeconds(
  sample: Pick<DwellSample, 'edgeShare' | 'binSeconds'>,
  shortestBins: number,
): number {
  return Math.max(LEAST_REFERENCE, shortestBins - edgeShift(sample) - 1) * sample.binSeconds
}

/**
 * Bin-exact likelihood (derived for two edges rounded at the fractional threshold theta, noise-free; valid from about
 * three bins on, where shot noise no longer blurs durations):
 *
 *   complete at m bins            P(m)    = integral of (1 - |x|) f((m - 1 + 2 theta + x) Delta) Delta dx
 *   cut after m bins              Sbar(m) = mean of S over [(m - 1) Delta - delta, m Delta - delta]
 *   entered at age q >= shortest  divided by Sbar(q)
 *   all of them                   divided by Sbar(shortest)
 *
 * A dwell cut before `shortestBins` says nothing and is left out, as is an entry before it.
 */
export function binLikelihood(law: Law, sample: DwellSample, shortestBins: number): BinLikelihood {
  const { binSeconds } = sample
  const shiftBins = edgeShift(sample)
  const reference = referenceSeconds(sample, shortestBins)
  const chosen = atLeast(sample.completeBins, sample.completeWeights, shortestBins)
  const { bins, weights } = compressed(chosen)
  const nodes = triangleNodes(bins, shiftBins, binSeconds, reference)
  const censored = atLeast(sample.censoredBins, sample.censoredWeights, shortestBins)
  const entered = atLeast(sample.enteredBins, sample.enteredWeights, shortestBins)
  const complete = total(chosen.weights)
  const cut = total(censored.weights)
  // Every dwell that is at risk from the shortest duration on carries one denominator; one that entered later
  // carries its own instead.
  const anchored = complete + cut - total(entered.weights)

  return {
    complete,
    censored: cut,
    at(coordinates) {
      const here = law.at(coordinates, reference)
      let sum = 0
      for (let i = 0; i < bins.length; i++) {
        let mass = 0
        for (let n = nodes.first[i]; n < nodes.first[i + 1]; n++) {
          mass += nodes.weights[n] * Math.exp(here.logDensity(nodes.seconds[n]))
        }
        sum += weights[i] * Math.log(mass)
      }
      for (let i = 0; i < censored.bins.length; i++) {
        sum += censored.weights[i] * lnMeanSurvival(here, censored.bins[i], shiftBins, binSeconds)
      }
      for (let i = 0; i < entered.bins.length; i++) {
        sum -= entered.weights[i] * lnMeanSurvival(here, entered.bins[i], shiftBins, binSeconds)
      }
      return sum - anchored * lnMeanSurvival(here, shortestBins, shiftBins, binSeconds)
    },
  }
}

/** Dwells of at least `shortestBins`; nodes of a compressed list count by their own position. */
export function atLeast(
  bins: Float64Array,
  weights: Float64Array,
  shortestBins: number,
): { bins: Float64Array; weights: Float64Array } {
  const keep: number[] = []
  for (let i = 0; i < bins.length; i++) if (bins[i] >= shortestBins) keep.push(i)
  return {
    bins: Float64Array.from(keep, (i) => bins[i]),
    weights: Float64Array.from(keep, (i) => weights[i]),
  }
}

function total(weights: Float64Array): number {
  let sum = 0
  for (let i = 0; i < weights.length; i++) sum += weights[i]
  return sum
}
