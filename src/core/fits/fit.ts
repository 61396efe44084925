import type { LawName } from '../laws/law.ts'

/** A number with its interval; null where it does not exist. `high: null` with a finite `low` is a one-sided bound. */
export interface Estimate {
  readonly estimate: number | null
  readonly low: number | null
  readonly high: number | null
  readonly unit: string
}

export type FitStatus =
  | 'ok'
  /** The optimum lies on the edge of the range (e.g. no cutoff): the estimate is a bound. */
  | 'at-bound'
  | 'too-few-dwells'
  | 'not-converged'
  | 'not-finite'
  /** Point estimate only: intervals were not asked for yet. */
  | 'no-interval'

/** A law fitted to the dwells of one state, conditional on durations of at least shortestBins. */
export interface Fit {
  readonly law: LawName
  /** Free coordinates at the optimum; empty when there is none. */
  readonly coordinates: readonly number[]
  /** Reported parameters by name, e.g. alpha, tauSeconds. */
  readonly parameters: Readonly<Record<string, Estimate>>
  readonly logLikelihood: number | null
  readonly aicc: number | null
  readonly bic: number | null
  /** AICc weight among the laws fitted to the same dwells; null until compared. */
  readonly weight: number | null
  /** Dwells used: complete and right-censored, at or above the shortest fitted dwell. */
  readonly complete: number
  readonly censored: number
  readonly shortestBins: number
  readonly shortestSeconds: number
  readonly evaluations: number
  readonly status: FitStatus
  /** One sentence a user can act on; empty when there is nothing to say. With status ok it warns of few dwells. */
  readonly message: string
}
