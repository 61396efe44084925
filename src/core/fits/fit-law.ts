import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law } from '../laws/law.ts'
import { atLeast, binLikelihood, referenceSeconds } from './bin-likelihood.ts'
import type { Fit } from './fit.ts'
import { failed, maximiseLaw } from './maximise-law.ts'

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

/**
 * One law fitted to the dwells of at least `shortestBins` bins by the bin-exact likelihood. Never throws on data:
 * see `status`. AICc and BIC count complete and censored dwells.
 */
export function fitLaw(law: Law, sample: DwellSample, shortestBins: number, options: FitOptions): Fit {
  const likelihood = binLikelihood(law, sample, shortestBins)
  const shortestSeconds = shortestBins * sample.binSeconds
  const common = {
    law: law.name,
    weight: null,
    complete: likelihood.complete,
    censored: likelihood.censored,
    shortestBins,
    shortestSeconds,
  }
  if (likelihood.complete < FEWEST_DWELLS) {
    const { parameters, status, message } = failed(
      law,
      0,
      'too-few-dwells',
      `${likelihood.complete} complete dwells of at least ${shortestBins} bins; a fit needs ${FEWEST_DWELLS}. Lower the shortest fitted dwell or record longer.`,
    )
    return {
      ...common,
      coordinates: [],
      parameters,
      logLikelihood: null,
      aicc: null,
      bic: null,
      evaluations: 0,
      status,
      message,
    }
  }
  const reference = referenceSeconds(sample, shortestBins)
  const chosen = atLeast(sample.completeBins, sample.completeWeights, shortestBins)
  const seconds = chosen.bins.map((bins) => bins * sample.binSeconds)
  const start = options.start ?? law.start(seconds, chosen.weights, shortestSeconds)
  const found = maximiseLaw(law, (at) => likelihood.at(at), start, likelihood.complete, reference, options)
  const finite = Number.isFinite(found.logLikelihood)
  const n = likelihood.complete + likelihood.censored
  const p = law.coordinates.length
  return {
    ...common,
    coordinates: found.coordinates,
    parameters: found.parameters,
    logLikelihood: finite ? found.logLikelihood : null,
    aicc: finite && n > p + 1 ? -2 * found.logLikelihood + 2 * p + (2 * p * (p + 1)) / (n - p - 1) : null,
    bic: finite ? -2 * found.logLikelihood + p * Math.log(n) : null,
    evaluations: found.evaluations,
    status: found.status,
    message: found.message,
  }
}
