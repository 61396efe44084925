import type { DwellSample } from '../dwells/dwell-sample.ts'
import { lawNamed } from '../laws/all-laws.ts'
import { chiSquareUpperTail } from '../numeric/chi-square.ts'
import { lnNormalUpperTail } from '../numeric/normal.ts'
import { atLeast, totalWeight } from './bin-likelihood.ts'
import { edgeShift, lnMeanSurvival, referenceSeconds } from './mean-survival.ts'
import type { Fit } from './fit.ts'
import { triangleNodes } from './triangle-nodes.ts'

/**
 * The same fits with AICc weights among them (Burnham and Anderson, Model Selection and Multimodel Inference, Springer
 * (2002)). Fits without a likelihood, and those whose search did not settle, keep null.
 */
export function withWeights(fits: readonly Fit[]): Fit[] {
  const of = (fit: Fit): number =>
    fit.aicc === null || fit.status === 'not-converged' ? Number.POSITIVE_INFINITY : fit.aicc
  const best = Math.min(...fits.map(of))
  const shares = fits.map((fit) =>
    of(fit) < Number.POSITIVE_INFINITY ? Math.exp(-0.5 * (of(fit) - best)) : 0,
  )
  const sum = shares.reduce((a, b) => a + b, 0)
  return fits.map((fit, i) => ({
    ...fit,
    weight: of(fit) < Number.POSITIVE_INFINITY ? shares[i] / sum : null,
  }))
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

/**
 * ln of the likelihood contribution of every dwell of the sample: complete ones first, then the censored, then what
 * entries after the shortest fitted dwell take away. They add up to ln L without compression. `dwells` is the number of
 * complete and censored ones; entries belong to some of them, the sample does not say to which.
 */
export function contributions(
  fit: Fit,
  sample: DwellSample,
): { values: Float64Array; weights: Float64Array; dwells: number } {
  const { shortestBins } = fit
  const { binSeconds } = sample
  const shift = edgeShift(sample)
  const reference = referenceSeconds(sample, shortestBins)
  const law = lawNamed(fit.law).at(fit.coordinates, reference)
  const complete = atLeast(sample.completeBins, sample.completeWeights, shortestBins)
  const censored = atLeast(sample.censoredBins, sample.censoredWeights, shortestBins)
  const entered = atLeast(sample.enteredBins, sample.enteredWeights, shortestBins)
  const nodes = triangleNodes(complete.bins, shift, binSeconds, reference)
  const lnSurvival = (m: number): number => lnMeanSurvival(law, m, shift, binSeconds, reference)
  const base = lnSurvival(shortestBins)
  const values: number[] = []
  for (let i = 0; i < complete.bins.length; i++) {
    const top = law.logDensity(nodes.seconds[nodes.first[i]])
    let mass = 0
    for (let n = nodes.first[i]; n < nodes.first[i + 1]; n++) {
      mass += nodes.weights[n] * Math.exp(law.logDensity(nodes.seconds[n]) - top)
    }
    values.push(top + Math.log(mass) - base)
  }
  for (const m of censored.bins) values.push(lnSurvival(m) - base)
  for (const m of entered.bins) values.push(base - lnSurvival(m))
  return {
    values: Float64Array.from(values),
    weights: Float64Array.from([...complete.weights, ...censored.weights, ...entered.weights]),
    dwells: totalWeight(complete.weights) + totalWeight(censored.weights),
  }
}

/**
 * Vuong's statistic for weighted contributions; positive favours the first. Null when they do not differ at all.
 * @param dwells number of independent units n; differences not given for a unit count as 0
 */
export function vuongStatistic(
  first: ArrayLike<number>,
  second: ArrayLike<number>,
  weights: ArrayLike<number>,
  dwells: number,
  extraParameters: number,
): { z: number; p: number } | null {
  let sum = 0
  let squares = 0
  let size = 0
  for (let i = 0; i < weights.length; i++) {
    const d = first[i] - second[i]
    sum += weights[i] * d
    squares += weights[i] * d * d
    size += weights[i] * (first[i] * first[i] + second[i] * second[i])
  }
  const variance = squares / dwells - (sum / dwells) ** 2
  // Differences that are rounding of the values themselves are none.
  if (!(variance > 1e-18 * (size / dwells + 1e-300))) return null
  const z = (sum - 0.5 * extraParameters * Math.log(dwells)) / Math.sqrt(dwells * variance)
  return { z, p: Math.min(1, 2 * Math.exp(lnNormalUpperTail(Math.abs(z)))) }
}

/**
 * Two laws that do not contain each other, on the same dwells (Vuong, Econometrica 57, 307 (1989)), corrected for the
 * number of parameters as BIC does: sum of d less (p1 - p2) ln n / 2, over sqrt(n) times the spread of d. Dwells that
 * depend on each other make p optimistic. Null when either fit failed or they were not made on the same dwells.
 */
export function vuong(first: Fit, second: Fit, sample: DwellSample): { z: number; p: number } | null {
  if (first.coordinates.length === 0 || second.coordinates.length === 0) return null
  if (first.shortestBins !== second.shortestBins) return null
  const a = contributions(first, sample)
  const b = contributions(second, sample)
  const extra = first.coordinates.length - second.coordinates.length
  return vuongStatistic(a.values, b.values, a.weights, a.dwells, extra)
}
