/** Largest distance between the steps of a sample and a continuous distribution function. */
export function kolmogorovDistance(sample: ArrayLike<number>, cdf: (x: number) => number): number {
  const sorted = Float64Array.from(sample).sort()
  let worst = 0
  for (let i = 0; i < sorted.length; i++) {
    const at = cdf(sorted[i])
    // A value that is no number must fail the comparison, not slip through it.
    if (Number.isNaN(at)) return Number.NaN
    worst = Math.max(worst, at - i / sorted.length, (i + 1) / sorted.length - at)
  }
  return worst
}

/**
 * Distance that a true sample of n exceeds at most with the given chance, for every n: Dvoretzky, Kiefer and Wolfowitz
 * with the constant of Massart (Ann. Probab. 18, 1269 (1990)).
 */
export function kolmogorovLimit(n: number, falseAlarm: number): number {
  return Math.sqrt(Math.log(2 / falseAlarm) / (2 * n))
}
