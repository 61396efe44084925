import type { ParameterSpec } from './law.ts'
import { weightedMean } from './weighted-mean.ts'

/** The reported cutoff time of both cutoff laws. */
export const TAU: ParameterSpec = {
  name: 'tauSeconds',
  symbol: 'τ',
  unit: 's',
  low: 0,
  high: Number.POSITIVE_INFINITY,
}

/** The free coordinate: kappa = 1/tau, so that no cutoff is the point 0. */
export const KAPPA: ParameterSpec = {
  name: 'kappa',
  symbol: 'κ',
  unit: '1/s',
  low: 0,
  high: Number.POSITIVE_INFINITY,
}

/** tau from kappa; no cutoff is Infinity. */
export function tauOf(kappa: number): number {
  return kappa > 0 ? 1 / kappa : Number.POSITIVE_INFINITY
}

/** A rate to start from: a third of the one an exponential law would have. */
export function startRate(seconds: ArrayLike<number>, weights: ArrayLike<number>, shortest: number): number {
  const excess = weightedMean(seconds, weights) - shortest
  return excess > 0 ? 1 / (3 * excess) : 1 / shortest
}
