/** Expected number of miscalled bins of either kind, over the whole record, that the half-way threshold may cost. */
export const MOST_FALSE_BINS = 0.05

interface TabledErrors {
  readonly firstThreshold: number
  readonly step: number
  /** Per tabled threshold. */
  readonly falseOnPerBin: ArrayLike<number>
  readonly falseOffPerBin: ArrayLike<number>
}

/**
 * The tabled threshold nearest to half way between the levels at which shot noise is expected to miscall fewer than
 * 0.05 bins of either kind in the record; NaN when there is none.
 *
 * Half way, a switch inside a bin is rounded without bias: noise-free durations are on average right and on and off
 * events of the same length are missed equally often, whereas the equal-likelihood crossing lies near a third of the
 * step, lengthens on-times and merges them over short off-times (derived here; see test/accuracy).
 *
 * @param bins usable bins of the record
 */
export function halfThreshold(
  errors: TabledErrors,
  { offCounts, onCounts }: { readonly offCounts: number; readonly onCounts: number },
  bins: number,
): number {
  if (!(onCounts > offCounts)) return Number.NaN
  const middle = 0.5 * (offCounts + onCounts)
  let best = Number.NaN
  for (let row = 0; row < errors.falseOnPerBin.length; row++) {
    const threshold = errors.firstThreshold + row * errors.step
    const worst = bins * Math.max(errors.falseOnPerBin[row], errors.falseOffPerBin[row])
    if (worst >= MOST_FALSE_BINS) continue
    if (Number.isNaN(best) || Math.abs(threshold - middle) < Math.abs(best - middle)) best = threshold
  }
  return best
}
