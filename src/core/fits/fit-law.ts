import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law } from '../laws/law.ts'
import { type BinLikelihood, binLikelihood } from './bin-likelihood.ts'
import { meanLog } from '../laws/weighted-mean.ts'
import type { Fit, FitStatus } from './fit.ts'
import { failed, type LawMaximum, maximiseLaw } from './maximise-law.ts'
import { referenceSeconds } from './mean-survival.ts'

/** Fewer complete dwells than this are not fitted. */
export const FEWEST_DWELLS = 10

export interface FitOptions {
  /** Of the intervals, 0..1. */
  readonly confidence: number
  /** Profile intervals cost most of the time; without them the status is `no-interval`. */
  readonly intervals: boolean
  /** Free coordinates to start from, e.g. of the neighbouring threshold. */
  readonly start?: readonly number[]
}

/** Complete dwells from which an exponent, and a cutoff or curvature beside it, are worth reading; below, the message warns. */
const ENOUGH = { one: 50, two: 200 } as const

/**
 * One law fitted to the dwells of at least `shortestBins` bins by the bin-exact likelihood. Never throws on data:
 * see `status`; with status `ok` the message only warns of few dwells.
 *
 * AICc = -2 ln L + 2p + 2p(p + 1)/(n - p - 1) and BIC = -2 ln L + p ln n with n all dwells used, complete and censored,
 * and p the number of coordinates, also when one of them sits on its edge.
 */
export function fitLaw(law: Law, sample: DwellSample, shortestBins: number, options: FitOptions): Fit {
  if (!(shortestBins >= 1 && sample.binSeconds > 0 && sample.edgeShare >= 0 && sample.edgeShare <= 1)) {
    return withoutNumbers(
      law,
      sample,
      shortestBins,
      { complete: 0, censored: 0 },
      'not-finite',
      `Expected a shortest fitted dwell of at least 1 bin, a bin width above 0 and an edge share in 0..1; received ${shortestBins}, ${sample.binSeconds} s, ${sample.edgeShare}.`,
    )
  }
  return fitLikelihood(law, sample, shortestBins, binLikelihood(law, sample, shortestBins), options)
}

/** The same from a likelihood that was made before, e.g. an uncompressed one. */
export function fitLikelihood(
  law: Law,
  sample: DwellSample,
  shortestBins: number,
  likelihood: BinLikelihood,
  options: FitOptions,
): Fit {
  const { complete, censored } = likelihood
  if (complete < FEWEST_DWELLS) {
    return withoutNumbers(
      law,
      sample,
      shortestBins,
      likelihood,
      'too-few-dwells',
      `${complete} complete dwells of at least ${shortestBins} bins; a fit needs ${FEWEST_DWELLS}. Lower the shortest fitted dwell or record longer.`,
    )
  }
  const seconds = likelihood.nodes.bins.map((bins) => bins * sample.binSeconds)
  const own = law.start(seconds, likelihood.nodes.weights, shortestBins * sample.binSeconds)
  const given = options.start
  const usable = given !== undefined && given.length === own.length && given.every(Number.isFinite)
  const found = maximiseLaw(
    law,
    (at) => likelihood.at(at),
    usable ? [given, own] : [own],
    {
      dwells: complete,
      shortestSeconds: referenceSeconds(sample, shortestBins),
      typicalSeconds: Math.exp(meanLog(seconds, likelihood.nodes.weights)),
    },
    options,
  )
  return {
    ...numbersOf(law, found, complete + censored),
    message: found.message === '' ? fewWarning(law, complete) : found.message,
    law: law.name,
    weight: null,
    complete,
    censored,
    shortestBins,
    shortestSeconds: shortestBins * sample.binSeconds,
  }
}

function numbersOf(law: Law, found: LawMaximum, n: number) {
  const { coordinates, parameters, evaluations, status, logLikelihood } = found
  const p = law.coordinates.length
  const finite = Number.isFinite(logLikelihood)
  return {
    coordinates,
    parameters,
    evaluations,
    status,
    logLikelihood: finite ? logLikelihood : null,
    aicc: finite && n > p + 1 ? -2 * logLikelihood + 2 * p + (2 * p * (p + 1)) / (n - p - 1) : null,
    bic: finite ? -2 * logLikelihood + p * Math.log(n) : null,
  }
}

function fewWarning(law: Law, complete: number): string {
  if (complete < ENOUGH.one)
    return `Only ${complete} complete dwells; an exponent wants at least ${ENOUGH.one}. Read the interval, not the estimate.`
  if (law.coordinates.length > 1 && complete < ENOUGH.two)
    return `${complete} complete dwells; a law of two parameters wants at least ${ENOUGH.two}. Read the interval, not the estimate.`
  return ''
}

function withoutNumbers(
  law: Law,
  sample: DwellSample,
  shortestBins: number,
  { complete, censored }: { readonly complete: number; readonly censored: number },
  status: FitStatus,
  message: string,
): Fit {
  const { parameters } = failed(law, 0, status, message)
  return {
    law: law.name,
    coordinates: [],
    parameters,
    logLikelihood: null,
    aicc: null,
    bic: null,
    weight: null,
    complete,
    censored,
    shortestBins,
    shortestSeconds: shortestBins * sample.binSeconds,
    evaluations: 0,
    status,
    message,
  }
}
