import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law, LawName } from '../laws/law.ts'
import { lawNamed } from '../laws/all-laws.ts'
import type { RandomSource } from '../numeric/random-source.ts'
import { seededRandom } from '../numeric/seeded-random.ts'
import { atLeast, edgeShift, lnMeanSurvival, referenceSeconds } from './bin-likelihood.ts'
import type { Fit } from './fit.ts'
import { fitLaw } from './fit-law.ts'

export interface Goodness {
  readonly law: LawName
  readonly state: 'complete' | 'stopped' | 'no-fit'
  /** Largest distance between observed and fitted survival from the shortest fitted dwell on. */
  readonly distance: number | null
  /** Share of simulated data sets, fitted again, with at least this distance; null when none was made. */
  readonly p: number | null
  /** Monte Carlo standard error of p. */
  readonly pError: number | null
  readonly samples: number
  /** Simulated data sets whose fit failed; they count as further away. */
  readonly failedSamples: number
  readonly seed: number
}

export interface GoodnessOptions {
  readonly samples: number
  readonly seed: number
  readonly onProgress?: (fraction: number) => void
  readonly shouldStop?: () => boolean
}

/** How many simulated data sets lie at least as far from their own fit, for samples [from, to). */
export interface GoodnessSlice {
  readonly done: number
  readonly further: number
  readonly failed: number
}

/** Censoring ages of a sample, in bins from the shortest fitted dwell on; empty when nothing was cut. */
function cutAges(sample: DwellSample, shortestBins: number): number[] {
  const { bins, weights } = atLeast(sample.censoredBins, sample.censoredWeights, shortestBins)
  const ages: number[] = []
  for (let i = 0; i < bins.length; i++) for (let k = 0; k < weights[i]; k++) ages.push(bins[i])
  return ages
}

/** Largest distance between the product-limit survival of a sample and the bin survival of a fitted law. */
export function survivalDistance(
  law: Law,
  coordinates: readonly number[],
  sample: DwellSample,
  shortestBins: number,
): number {
  const shift = edgeShift(sample)
  const at = law.at(coordinates, referenceSeconds(sample, shortestBins))
  const base = lnMeanSurvival(at, shortestBins, shift, sample.binSeconds)
  const complete = atLeast(sample.completeBins, sample.completeWeights, shortestBins)
  const order = Array.from(complete.bins.keys()).sort((a, b) => complete.bins[a] - complete.bins[b])
  const cuts = cutAges(sample, shortestBins).sort((a, b) => a - b)
  let atRisk = complete.weights.reduce((a, b) => a + b, 0) + cuts.length
  let survival = 1
  let cut = 0
  let worst = 0
  for (let k = 0; k < order.length; k++) {
    const m = complete.bins[order[k]]
    while (cut < cuts.length && cuts[cut] < m) {
      atRisk--
      cut++
    }
    let ends = complete.weights[order[k]]
    while (k + 1 < order.length && complete.bins[order[k + 1]] === m) ends += complete.weights[order[++k]]
    // Just before m ends and just after: the observed curve steps there, the fitted one moves by P(m).
    const before = Math.exp(lnMeanSurvival(at, m, shift, sample.binSeconds) - base)
    worst = Math.max(worst, Math.abs(survival - before))
    survival *= 1 - ends / atRisk
    atRisk -= ends
    const after = Math.exp(lnMeanSurvival(at, m + 1, shift, sample.binSeconds) - base)
    worst = Math.max(worst, Math.abs(survival - after))
  }
  return worst
}

/** Observed bins of a true duration whose phase against the bins is uniform; both edges round at the edge share. */
export function observedBins(
  seconds: number,
  sample: Pick<DwellSample, 'binSeconds' | 'edgeShare'>,
  random: RandomSource,
): number {
  // P(m | t) is a triangle about t/Delta + 1 - 2 theta: two independent uniform phases, one at each edge, in (-1/2, 1/2).
  const centre = seconds / sample.binSeconds + edgeShift(sample)
  const low = Math.floor(centre)
  return random.uniform() < centre - low ? low + 1 : low
}

/**
 * A data set like the observed one: as many dwells from the fitted law, rounded to bins, those below the shortest
 * fitted one drawn again, and a dwell that was cut keeps its age at the cut: it is drawn from the law and censored
 * there if it lasts longer; complete dwells face the cutting ages as often as the observed ones did.
 */
function simulated(
  law: Law,
  fit: Fit,
  sample: DwellSample,
  ages: readonly number[],
  random: RandomSource,
): DwellSample {
  const reference = referenceSeconds(sample, fit.shortestBins)
  const tally = new Map<number, number>()
  const cut = new Map<number, number>()
  const draw = (): number => {
    for (let round = 0; round < 10_000; round++) {
      const m = observedBins(law.sample(random, fit.coordinates, reference), sample, random)
      if (m >= fit.shortestBins) return m
    }
    return fit.shortestBins
  }
  for (let i = 0; i < fit.complete + ages.length; i++) {
    const m = draw()
    const age = i < ages.length ? ages[i] : Number.POSITIVE_INFINITY
    const into = m > age ? cut : tally
    const key = Math.min(m, age)
    into.set(key, (into.get(key) ?? 0) + 1)
  }
  return {
    binSeconds: sample.binSeconds,
    edgeShare: sample.edgeShare,
    completeBins: Float64Array.from(tally.keys()),
    completeWeights: Float64Array.from(tally.values()),
    censoredBins: Float64Array.from(cut.keys()),
    censoredWeights: Float64Array.from(cut.values()),
    enteredBins: new Float64Array(0),
    enteredWeights: new Float64Array(0),
  }
}

/**
 * Simulated samples [from, to) of the parametric bootstrap. Every sample has its own seed, so the result does not
 * depend on how the work is split.
 */
export function goodnessSlice(
  sample: DwellSample,
  fit: Fit,
  distance: number,
  seed: number,
  from: number,
  to: number,
): GoodnessSlice {
  const law = lawNamed(fit.law)
  const ages = cutAges(sample, fit.shortestBins)
  let further = 0
  let failed = 0
  for (let index = from; index < to; index++) {
    const other = simulated(law, fit, sample, ages, seededRandom(`${seed}/goodness/${fit.law}/${index}`))
    const again = fitLaw(law, other, fit.shortestBins, {
      confidence: 0.95,
      intervals: false,
      start: fit.coordinates,
    })
    if (again.coordinates.length === 0) {
      failed++
      further++
    } else if (survivalDistance(law, again.coordinates, other, fit.shortestBins) >= distance) further++
  }
  return { done: to - from, further, failed }
}

/** Sums slices into the verdict. */
export function goodnessOf(
  fit: Fit,
  distance: number,
  slices: readonly GoodnessSlice[],
  seed: number,
  stopped: boolean,
): Goodness {
  const samples = slices.reduce((sum, slice) => sum + slice.done, 0)
  const further = slices.reduce((sum, slice) => sum + slice.further, 0)
  const p = samples > 0 ? further / samples : null
  return {
    law: fit.law,
    state: stopped ? 'stopped' : 'complete',
    distance,
    p,
    pError: p === null ? null : Math.sqrt(Math.max(p * (1 - p), 1 / samples) / samples),
    samples,
    failedSamples: slices.reduce((sum, slice) => sum + slice.failed, 0),
    seed,
  }
}

/**
 * Goodness of fit by parametric bootstrap of the Kolmogorov-Smirnov distance: simulate from the fit with the same
 * number of dwells and the same censoring, fit again, measure again (Clauset, Shalizi and Newman, SIAM Rev. 51, 661
 * (2009); binned form: Virkar and Clauset, Ann. Appl. Stat. 8, 89 (2014)).
 */
export function goodnessOfFit(law: Law, sample: DwellSample, fit: Fit, options: GoodnessOptions): Goodness {
  if (fit.coordinates.length === 0) {
    return {
      law: law.name,
      state: 'no-fit',
      distance: null,
      p: null,
      pError: null,
      samples: 0,
      failedSamples: 0,
      seed: options.seed,
    }
  }
  const distance = survivalDistance(law, fit.coordinates, sample, fit.shortestBins)
  const slices: GoodnessSlice[] = []
  const chunk = 20
  for (let at = 0; at < options.samples; at += chunk) {
    if (options.shouldStop?.() === true) return goodnessOf(fit, distance, slices, options.seed, true)
    slices.push(goodnessSlice(sample, fit, distance, options.seed, at, Math.min(options.samples, at + chunk)))
    options.onProgress?.(Math.min(1, (at + chunk) / options.samples))
  }
  return goodnessOf(fit, distance, slices, options.seed, false)
}
