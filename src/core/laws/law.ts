import type { RandomSource } from '../numeric/random-source.ts'

/** Names as they stand in the result document. */
export type LawName =
  | 'power'
  | 'power-cutoff-survival'
  | 'power-cutoff-density'
  | 'exponential'
  | 'log-normal'
  | 'stretched'

/** One parameter of a law as the optimiser and the reader of a result see it. */
export interface ParameterSpec {
  /** Key in results, e.g. `alpha`, `tauSeconds`. */
  readonly name: string
  /** Sign shown to people, e.g. `α`, `τ`. */
  readonly symbol: string
  /** `''` for pure numbers, `'s'`, ... */
  readonly unit: string
  /** Open or closed range allowed. */
  readonly low: number
  readonly high: number
}

/** A law at fixed parameters, conditional on t >= shortestSeconds. Density and survival share one normalisation. */
export interface LawAt {
  /** ln f(t), 1/s; -Infinity below the shortest duration. */
  logDensity(seconds: number): number
  /** ln S(t), S(shortestSeconds) = 1; 0 below the shortest duration. */
  logSurvival(seconds: number): number
}

/**
 * A dwell-time law. All laws have this face; every file in this room reads in the same order:
 * description, parameters, at (density, survival), integrated survival if closed, sampler, start values.
 *
 * Inside the fit each law is driven by *free coordinates* on which the likelihood is well behaved;
 * for cutoff laws these are (alpha, kappa = 1/tau) so that "no cutoff" is the point kappa = 0.
 */
export interface Law {
  readonly name: LawName
  /** Two to five plain words for people. */
  readonly label: string
  /** Plain-text formula of the density, with the form of the cutoff named. */
  readonly formula: string
  /** Published source of the form. */
  readonly source: string
  /** Parameters as reported. */
  readonly parameters: readonly ParameterSpec[]
  /** Names and ranges of the free coordinates, one per parameter and in the same order. */
  readonly coordinates: readonly ParameterSpec[]
  /** Reported parameters from free coordinates; a cutoff coordinate of 0 gives tauSeconds = Infinity. */
  parametersOf(coordinates: readonly number[]): number[]
  coordinatesOf(parameters: readonly number[]): number[]
  /** The law at free coordinates, conditional on t >= shortestSeconds > 0. */
  at(coordinates: readonly number[], shortestSeconds: number): LawAt
  /** One duration, s, t >= shortestSeconds. */
  sample(random: RandomSource, coordinates: readonly number[], shortestSeconds: number): number
  /** Rough free coordinates from weighted complete durations (s), to start a search. Finite for any non-empty input. */
  start(seconds: ArrayLike<number>, weights: ArrayLike<number>, shortestSeconds: number): number[]
}
