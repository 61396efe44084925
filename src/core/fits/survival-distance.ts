import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law } from '../laws/law.ts'
import { atLeast } from './bin-likelihood.ts'
import { edgeShift, lnMeanSurvival, referenceSeconds } from './mean-survival.ts'

/**
 * Kolmogorov-Smirnov distance: the largest difference between the product-limit survival of a sample (Kaplan and
 * Meier, J. Am. Stat. Assoc. 53, 457 (1958); delayed entry honoured) and the fitted chance of being seen for at least m
 * bins, both given at least `shortestBins`. Without censoring it is the plain distance of empirical and fitted
 * distribution. 0 for an empty sample.
 */
export function survivalDistance(
  law: Law,
  coordinates: readonly number[],
  sample: DwellSample,
  shortestBins: number,
): number {
  const shift = edgeShift(sample)
  const { binSeconds } = sample
  const reference = referenceSeconds(sample, shortestBins)
  const at = law.at(coordinates, reference)
  const base = lnMeanSurvival(at, shortestBins, shift, binSeconds, reference)
  const fitted = (m: number): number => Math.exp(lnMeanSurvival(at, m, shift, binSeconds, reference) - base)
  const ends = sorted(atLeast(sample.completeBins, sample.completeWeights, shortestBins))
  const cuts = sorted(atLeast(sample.censoredBins, sample.censoredWeights, shortestBins))
  const entries = sorted(atLeast(sample.enteredBins, sample.enteredWeights, shortestBins))
  let atRisk = 0
  for (const [, weight] of ends) atRisk += weight
  for (const [, weight] of cuts) atRisk += weight
  for (const [, weight] of entries) atRisk -= weight
  let cut = 0
  let entry = 0
  let survival = 1
  let worst = 0
  for (let k = 0; k < ends.length; k++) {
    const m = ends[k][0]
    // At risk of ending at m: seen from before m on (entered at an age up to m), and not cut before m. A dwell cut at m
    // is known to last for m, but not whether it ends there; it counts up to there.
    while (cut < cuts.length && cuts[cut][0] < m) atRisk -= cuts[cut++][1]
    while (entry < entries.length && entries[entry][0] <= m) atRisk += entries[entry++][1]
    let weight = ends[k][1]
    while (k + 1 < ends.length && ends[k + 1][0] === m) weight += ends[++k][1]
    // Just before and just after the step at m; the fitted survival is monotonic between steps.
    worst = Math.max(worst, Math.abs(survival - fitted(m)))
    survival *= Math.max(0, 1 - weight / atRisk)
    atRisk -= weight
    worst = Math.max(worst, Math.abs(survival - fitted(m + 1)))
  }
  return worst
}

function sorted({ bins, weights }: { bins: Float64Array; weights: Float64Array }): [number, number][] {
  return Array.from(bins, (m, i): [number, number] => [m, weights[i]]).sort((a, b) => a[0] - b[0])
}
