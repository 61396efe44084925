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
 * becomes two nodes of half its weight at mean -/+ standard deviation, which reproduces its weight, mean and
 * variance, so that the sum of any smooth g over the group is kept to third order in the group's width. For the
 * laws here the summed ln P changes by less than 1e-6 of itself, and by the same amount at neighbouring parameters.
 */
export function compressed({ bins, weights }: WeightedBins): WeightedBins {
  if (bins.length < WORTHWHILE) return { bins, weights }
  const longest = bins.reduce((most, m) => Math.max(most, m), EXACT_BELOW)
  if (!Number.isFinite(longest)) return { bins, weights }
  const groups = Math.floor(GROUPS_PER_EFOLD * Math.log(longest / EXACT_BELOW)) + 2
  const weight = new Float64Array(groups)
  const sum = new Float64Array(groups)
  const squares = new Float64Array(groups)
  const origin = new Float64Array(groups)
  const outBins: number[] = []
  const outWeights: number[] = []
  for (let i = 0; i < bins.length; i++) {
    const m = bins[i]
    if (!(m >= EXACT_BELOW)) {
      outBins.push(m)
      outWeights.push(weights[i])
      continue
    }
    const group = Math.floor(GROUPS_PER_EFOLD * Math.log(m / EXACT_BELOW))
    if (weight[group] === 0) origin[group] = m
    const y = m - origin[group]
    weight[group] += weights[i]
    sum[group] += weights[i] * y
    squares[group] += weights[i] * y * y
  }
  for (let group = 0; group < groups; group++) {
    if (weight[group] === 0) continue
    const mean = sum[group] / weight[group]
    const spread = Math.sqrt(Math.max(0, squares[group] / weight[group] - mean * mean))
    if (spread < 1e-9 * origin[group]) {
      outBins.push(origin[group] + mean)
      outWeights.push(weight[group])
    } else {
      outBins.push(origin[group] + mean - spread, origin[group] + mean + spread)
      outWeights.push(0.5 * weight[group], 0.5 * weight[group])
    }
  }
  return { bins: Float64Array.from(outBins), weights: Float64Array.from(outWeights) }
}
