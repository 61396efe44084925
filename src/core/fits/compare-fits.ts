import type { DwellSample } from '../dwells/dwell-sample.ts'
import { lawNamed } from '../laws/all-laws.ts'
import { chiSquareUpperTail } from '../numeric/chi-square.ts'
import { lnNormalUpperTail } from '../numeric/normal.ts'
import { atLeast, edgeShift, lnMeanSurvival, referenceSeconds } from './bin-likelihood.ts'
import type { Fit } from './fit.ts'
import { triangleNodes } from './triangle-nodes.ts'

/** The same fits with AICc weights among them (Burnham and Anderson 2002); fits without a likelihood keep null. */
export function withWeights(fits: readonly Fit[]): Fit[] {
  const best = Math.min(...fits.map((fit) => fit.aicc ?? Number.POSITIVE_INFINITY))
  const shares = fits.map((fit) => (fit.aicc === null ? 0 : Math.exp(-0.5 * (fit.aicc - best))))
  const sum = shares.reduce((a, b) => a + b, 0)
  return fits.map((fit, i) => ({ ...fit, weight: fit.aicc === null || sum === 0 ? null : shares[i] / sum }))
}

/**
 * Power law against the same with cutoff: 2 dl, whose null distribution is half chi-square with one degree of freedom
 * and half zero, because no cutoff lies on the edge of the range (Self and Liang, J. Am. Stat. Assoc. 82, 605 (1987)).
 * Null when either fit has no likelihood or they were not made on the same dwells.
 */
export function boundaryLikelihoodRatio(power: Fit, cutoff: Fit): { statistic: number; p: number } | null {
  if (power.logLikelihood === null || cutoff.logLikelihood === null) return null
  if (power.complete !== cutoff.complete || power.shortestBins !== cutoff.shortestBins) return null
  const statistic = Math.max(0, 2 * (cutoff.logLikelihood - power.logLikelihood))
  return { statistic, p: statistic === 0 ? 1 : 0.5 * chiSquareUpperTail(statistic, 1) }
}

/** ln of the likelihood contribution of every dwell of the sample, complete ones first, then the censored. */
export function contributions(
  fit: Fit,
  sample: DwellSample,
): { values: Float64Array; weights: Float64Array } {
  const { shortestBins } = fit
  const shift = edgeShift(sample)
  const reference = referenceSeconds(sample, shortestBins)
  const law = lawNamed(fit.law).at(fit.coordinates, reference)
  const complete = atLeast(sample.completeBins, sample.completeWeights, shortestBins)
  const censored = atLeast(sample.censoredBins, sample.censoredWeights, shortestBins)
  const nodes = triangleNodes(complete.bins, shift, sample.binSeconds, reference)
  const base = lnMeanSurvival(law, shortestBins, shift, sample.binSeconds)
  const values = new Float64Array(complete.bins.length + censored.bins.length)
  for (let i = 0; i < complete.bins.length; i++) {
    let mass = 0
    for (let n = nodes.first[i]; n < nodes.first[i + 1]; n++) {
      mass += nodes.weights[n] * Math.exp(law.logDensity(nodes.seconds[n]))
    }
    values[i] = Math.log(mass) - base
  }
  for (let i = 0; i < censored.bins.length; i++) {
    values[complete.bins.length + i] = lnMeanSurvival(law, censored.bins[i], shift, sample.binSeconds) - base
  }
  return { values, weights: Float64Array.from([...complete.weights, ...censored.weights]) }
}

/** Vuong's statistic for weighted contributions; positive favours the first. Null when they do not differ at all. */
export function vuongStatistic(
  first: ArrayLike<number>,
  second: ArrayLike<number>,
  weights: ArrayLike<number>,
  extraParameters: number,
): { z: number; p: number } | null {
  let n = 0
  let sum = 0
  let squares = 0
  for (let i = 0; i < weights.length; i++) {
    const d = first[i] - second[i]
    n += weights[i]
    sum += weights[i] * d
    squares += weights[i] * d * d
  }
  const variance = squares / n - (sum / n) ** 2
  if (!(variance > 1e-24)) return null
  const z = (sum - 0.5 * extraParameters * Math.log(n)) / Math.sqrt(n * variance)
  return { z, p: Math.min(1, 2 * Math.exp(lnNormalUpperTail(Math.abs(z)))) }
}

/**
 * Two laws that do not contain each other, on the same dwells (Vuong, Econometrica 57, 307 (1989)), corrected for the
 * number of parameters as BIC does. Dwells that depend on each other make p optimistic. Null when either fit failed.
 */
export function vuong(first: Fit, second: Fit, sample: DwellSample): { z: number; p: number } | null {
  if (first.coordinates.length === 0 || second.coordinates.length === 0) return null
  if (first.shortestBins !== second.shortestBins) return null
  const a = contributions(first, sample)
  const b = contributions(second, sample)
  return vuongStatistic(a.values, b.values, a.weights, first.coordinates.length - second.coordinates.length)
}
