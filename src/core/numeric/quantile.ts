/** Quantile p (0..1) with linear interpolation between order statistics (type 7 of Hyndman and Fan 1996). NaN when empty. */
export function quantile(values: ArrayLike<number>, p: number): number {
  const sorted = Float64Array.from(values).sort()
  if (sorted.length === 0) return Number.NaN
  const at = p * (sorted.length - 1)
  const i = Math.floor(at)
  const low = sorted[i]
  const high = sorted[Math.min(i + 1, sorted.length - 1)]
  return low + (at - i) * (high - low)
}

/** Median; NaN when empty. */
export function median(values: ArrayLike<number>): number {
  return quantile(values, 0.5)
}
