import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law, LawName } from '../laws/law.ts'
import { lawNamed } from '../laws/all-laws.ts'
import { seededRandom } from '../numeric/seeded-random.ts'
import type { Fit } from './fit.ts'
import { fitLaw } from './fit-law.ts'
import { dwellSimulator } from './simulate-dwells.ts'
import { survivalDistance } from './survival-distance.ts'

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

/** Samples between two looks at `shouldStop`. */
const CHUNK = 10

/**
 * Simulated samples [from, to) of the parametric bootstrap. Every sample has its own seed, so the result does not
 * depend on how the work is split among workers: add slices up with `goodnessFrom`.
 * @param sample as it was fitted; whole dwells (sampleFromDwells), since nodes of a threshold table would be rounded
 * @param distance of the observed sample, see survivalDistance
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
  const simulator = dwellSimulator(law, sample, fit.shortestBins)
  let further = 0
  let failed = 0
  for (let index = from; index < to; index++) {
    const other = simulator.draw(fit.coordinates, seededRandom(`${seed}/goodness/${fit.law}/${index}`))
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
export function goodnessFrom(
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
    // At p = 0 or 1 the binomial error would be 0; one sample is the least that can be told.
    pError: p === null ? null : Math.max(Math.sqrt((p * (1 - p)) / samples), 1 / samples),
    samples,
    failedSamples: slices.reduce((sum, slice) => sum + slice.failed, 0),
    seed,
  }
}

/**
 * Goodness of fit by parametric bootstrap of the Kolmogorov-Smirnov distance: simulate from the fit with the same
 * number of dwells and the same censoring, fit again, measure again (Clauset, Shalizi and Newman, SIAM Rev. 51, 661
 * (2009); binned form: Virkar and Clauset, Ann. Appl. Stat. 8, 89 (2014)). A small p speaks against the law.
 */
export function goodnessOfFit(law: Law, sample: DwellSample, fit: Fit, options: GoodnessOptions): Goodness {
  const { samples, seed, onProgress, shouldStop } = options
  if (fit.coordinates.length === 0) {
    return {
      law: law.name,
      state: 'no-fit',
      distance: null,
      p: null,
      pError: null,
      samples: 0,
      failedSamples: 0,
      seed,
    }
  }
  const distance = survivalDistance(law, fit.coordinates, sample, fit.shortestBins)
  const slices: GoodnessSlice[] = []
  for (let from = 0; from < samples; from += CHUNK) {
    if (shouldStop?.() === true) return goodnessFrom(fit, distance, slices, seed, true)
    const to = Math.min(samples, from + CHUNK)
    slices.push(goodnessSlice(sample, fit, distance, seed, from, to))
    onProgress?.(to / samples)
  }
  return goodnessFrom(fit, distance, slices, seed, false)
}
