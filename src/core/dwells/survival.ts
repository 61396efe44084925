import { normalQuantile } from '../numeric/normal.ts'
import type { DwellSample } from './dwell-sample.ts'

/** Survival at each distinct complete duration, just after it. Columns of equal length. */
export interface SurvivalCurve {
  readonly seconds: Float64Array
  readonly survival: Float64Array
  /** Pointwise limits; NaN where they do not exist (survival 0). */
  readonly low: Float64Array
  readonly high: Float64Array
  /** Dwells at risk just before. */
  readonly atRisk: Float64Array
  readonly events: Float64Array
}

/**
 * Product-limit survival of dwell times (Kaplan & Meier, J. Am. Stat. Assoc. 53, 457 (1958)) with right
 * censoring and delayed entry; variance by Greenwood (1926), limits on the log(-log) scale, S^exp(-/+ z s / ln
 * S). At risk at m are dwells whose complete or censored duration is at least m and whose entry age is below m.
 * Under delayed entry a small risk set at short durations can take the curve to 0 by itself: look at `atRisk`.
 *
 * Durations in bins estimate the bin-averaged survival. Empty columns without complete dwells.
 *
 * @param confidence two-sided, 0..1
 */
export function kaplanMeier(sample: DwellSample, confidence: number): SurvivalCurve {
  const { completeBins, completeWeights, censoredBins, censoredWeights, enteredBins, enteredWeights } = sample
  const n = completeBins.length
  const z = normalQuantile((1 + confidence) / 2)
  const curve = {
    seconds: completeBins.map((m) => m * sample.binSeconds),
    survival: new Float64Array(n),
    low: new Float64Array(n),
    high: new Float64Array(n),
    atRisk: atRiskAt(
      completeBins,
      completeWeights,
      censoredBins,
      censoredWeights,
      enteredBins,
      enteredWeights,
    ),
    events: completeWeights.slice(),
  }
  let survival = 1
  let variance = 0
  for (let i = 0; i < n; i++) {
    const d = completeWeights[i]
    const r = Math.max(d, curve.atRisk[i])
    // A risk set that ends altogether: exactly 0, not a rounding trace.
    const left = r - d > 1e-9 * r ? r - d : 0
    survival *= left / r
    variance += left > 0 ? d / (r * left) : Number.POSITIVE_INFINITY
    curve.survival[i] = survival
    const spread = (z * Math.sqrt(variance)) / Math.log(survival)
    curve.low[i] = survival > 0 ? survival ** Math.exp(-spread) : Number.NaN
    curve.high[i] = survival > 0 ? survival ** Math.exp(spread) : Number.NaN
  }
  return curve
}

/** At every duration m of the first list: ends at or after m, less entries at or after m. All lists ascend. */
function atRiskAt(
  at: Float64Array,
  completeWeights: Float64Array,
  censoredBins: Float64Array,
  censoredWeights: Float64Array,
  enteredBins: Float64Array,
  enteredWeights: Float64Array,
): Float64Array {
  const risk = new Float64Array(at.length)
  let ends = 0
  let censored = censoredBins.length - 1
  let entered = enteredBins.length - 1
  for (let i = at.length - 1; i >= 0; i--) {
    ends += completeWeights[i]
    for (; censored >= 0 && censoredBins[censored] >= at[i]; censored--) ends += censoredWeights[censored]
    for (; entered >= 0 && enteredBins[entered] >= at[i]; entered--) ends -= enteredWeights[entered]
    risk[i] = ends
  }
  return risk
}
