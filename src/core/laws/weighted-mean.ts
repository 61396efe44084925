/** Weighted mean of the durations; NaN when the weights sum to 0. */
export function weightedMean(seconds: ArrayLike<number>, weights: ArrayLike<number>): number {
  let sum = 0
  let weight = 0
  for (let i = 0; i < seconds.length; i++) {
    sum += weights[i] * seconds[i]
    weight += weights[i]
  }
  return sum / weight
}

/** Weighted mean of ln t. */
export function meanLog(seconds: ArrayLike<number>, weights: ArrayLike<number>): number {
  let sum = 0
  let weight = 0
  for (let i = 0; i < seconds.length; i++) {
    sum += weights[i] * Math.log(seconds[i])
    weight += weights[i]
  }
  return sum / weight
}

/** Weighted standard deviation of ln t. */
export function spreadLog(seconds: ArrayLike<number>, weights: ArrayLike<number>): number {
  const mean = meanLog(seconds, weights)
  let sum = 0
  let weight = 0
  for (let i = 0; i < seconds.length; i++) {
    sum += weights[i] * (Math.log(seconds[i]) - mean) ** 2
    weight += weights[i]
  }
  return Math.sqrt(sum / weight)
}
