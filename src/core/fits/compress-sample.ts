/** Weighted positions on the duration axis, in bins, possibly fractional. */
export interface WeightedBins {
  readonly bins: Float64Array
  readonly weights: Float64Array
}

/** Below this duration every whole number keeps its own node. */
const EXACT_BELOW = 64
/** Groups per e-fold above. */
const GROUPS_PER_EFOLD = 8
/** Lists shorter than this are left as they are. */
const WORTHWHILE = 160

/**
 * The same dwells on fewer nodes. Durations of at least 64 bins are gathered in groups of equal ratio; each group
 * becomes two nodes of half its weight at mean -+ standard deviation, which reproduces its weight, mean and
 * variance, so that the sum of any smooth g over the group is kept to third order in the group's width: for
 * g = ln P of the laws here, better than 1e-4 of one dwell's contribution a group.
 */
export function compressed({ bins, weights }: WeightedBins): WeightedBins {
  if (bins.length < WORTHWHILE) return { bins, weights }
  const sums = new Map<number, { weight: number; sum: number; squares: number; origin: number }>()
  const outBins: number[] = []
  const outWeights: number[] = []
  for (let i = 0; i < bins.length; i++) {
    const m = bins[i]
    if (m < EXACT_BELOW) {
      outBins.push(m)
      outWeights.push(weights[i])
      continue
    }
    const key = Math.floor(GROUPS_PER_EFOLD * Math.log(m / EXACT_BELOW))
    let group = sums.get(key)
    if (group === undefined) {
      group = { weight: 0, sum: 0, squares: 0, origin: m }
      sums.set(key, group)
    }
    const y = m - group.origin
    group.weight += weights[i]
    group.sum += weights[i] * y
    group.squares += weights[i] * y * y
  }
  for (const { weight, sum, squares, origin } of sums.values()) {
    const mean = sum / weight
    const spread = Math.sqrt(Math.max(0, squares / weight - mean * mean))
    if (spread < 1e-9 * origin) {
      outBins.push(origin + mean)
      outWeights.push(weight)
    } else {
      outBins.push(origin + mean - spread, origin + mean + spread)
      outWeights.push(0.5 * weight, 0.5 * weight)
    }
  }
  return { bins: Float64Array.from(outBins), weights: Float64Array.from(outWeights) }
}
