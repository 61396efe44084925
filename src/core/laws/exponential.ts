import { exponentialVariate } from '../numeric/variates.ts'
import { TAU, tauOf } from './cutoff.ts'
import type { Law } from './law.ts'
import { weightedMean } from './weighted-mean.ts'

/** Exponential law: S(t) = e^(-(t-s)/tau). One rate, no memory. */
export const exponential: Law = {
  name: 'exponential',
  label: 'exponential',
  formula: 'P(t) ∝ exp(−t/τ)',
  source: 'Cox and Lewis, The Statistical Analysis of Series of Events, Methuen (1966)',
  parameters: [TAU],
  coordinates: [{ name: 'rate', symbol: 'k', unit: '1/s', low: 0, high: Number.POSITIVE_INFINITY }],
  parametersOf: ([rate]) => [tauOf(rate)],
  coordinatesOf: ([tau]) => [1 / tau],

  at([rate], shortest) {
    const lnRate = Math.log(rate)
    return {
      logDensity: (t) => (t < shortest ? Number.NEGATIVE_INFINITY : lnRate - rate * (t - shortest)),
      logSurvival: (t) => (t <= shortest ? 0 : -rate * (t - shortest)),
    }
  },

  sample: (random, [rate], shortest) => shortest + exponentialVariate(random, 1 / rate),

  start(seconds, weights, shortest) {
    const excess = weightedMean(seconds, weights) - shortest
    return [excess > 0 ? 1 / excess : 1 / shortest]
  },
}
