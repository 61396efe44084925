/**
 * What a fit needs of the dwells of one state: weighted durations in bins. Node positions may be fractional:
 * see DurationGrid. log-likelihood = sum over complete of ln P(m) + sum over censored of ln S(m)
 * - sum over entered of ln S(age), all conditional on m >= shortestBins.
 */
export interface DwellSample {
  readonly binSeconds: number
  /** Fractional threshold of *this state*, 0..1: an edge bin counts when more than this share of it is in the state. */
  readonly edgeShare: number
  readonly completeBins: Float64Array
  readonly completeWeights: Float64Array
  readonly censoredBins: Float64Array
  readonly censoredWeights: Float64Array
  readonly enteredBins: Float64Array
  readonly enteredWeights: Float64Array
}
