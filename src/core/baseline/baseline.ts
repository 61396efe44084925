/** Baseline (off level, background included) of one trace, at knots equally spaced in time. */
export interface Baseline {
  readonly method: 'constant' | 'drifting'
  /** True when the method was chosen by the rule rather than by the user. */
  readonly automatic: boolean
  /** Why this method: one sentence with the numbers of the rule. */
  readonly reason: string
  readonly knotSeconds: number
  /** Time of the first knot's centre, s. */
  readonly firstKnotSeconds: number
  /** Baseline rate at the knots, counts per second; linear in between, flat outside. */
  readonly rateCps: Float64Array
  /** 95 % band at the knots, counts per second. */
  readonly lowCps: Float64Array
  readonly highCps: Float64Array
  /** Weighted number of confidently-off bins at each knot. */
  readonly supportBins: Float64Array
  /** Share of knots with at least 5 bins of support, 0..1. */
  readonly supportedShare: number
  readonly longestUnsupportedSeconds: number
  /** Signal of the on level above the baseline, counts per second. */
  readonly onAboveCps: number
  /** Share of bins in the on component of the mixture, 0..1. */
  readonly onShare: number
  readonly rounds: number
  readonly status: 'ok' | 'not-separable' | 'no-off-bins' | 'no-on-bins'
  readonly message: string
}
