import { lnGamma } from './gamma.ts'
import type { RandomSource } from './random-source.ts'

/** Exponential variate of given mean. */
export function exponentialVariate(random: RandomSource, mean: number): number {
  return -mean * Math.log(random.uniform())
}

/** Normal variate (Marsaglia and Bray 1964, polar method; the second value is not kept, so calls are independent). */
export function normalVariate(random: RandomSource, mean = 0, sd = 1): number {
  for (;;) {
    const u = 2 * random.uniform() - 1
    const v = 2 * random.uniform() - 1
    const s = u * u + v * v
    if (s > 0 && s < 1) return mean + sd * u * Math.sqrt((-2 * Math.log(s)) / s)
  }
}

/**
 * Z - z0 for a standard normal Z given Z >= z0: rejection from the normal law below z0 = 1, from the exponential law
 * that touches the tail above (Marsaglia,
 * Technometrics 6, 101 (1964)).
 */
export function normalExcessVariate(random: RandomSource, z0: number): number {
  if (z0 < 1) {
    for (;;) {
      const excess = normalVariate(random) - z0
      if (excess >= 0) return excess
    }
  }
  for (;;) {
    const excess = exponentialVariate(random, 1 / z0)
    if (exponentialVariate(random, 1) > 0.5 * excess * excess) return excess
  }
}

/** Gamma variate of given shape and scale 1 (Marsaglia and Tsang, ACM Trans. Math. Softw. 26, 363 (2000)). */
export function gammaVariate(random: RandomSource, shape: number): number {
  if (shape < 1) return gammaVariate(random, shape + 1) * random.uniform() ** (1 / shape)
  const d = shape - 1 / 3
  const c = 1 / Math.sqrt(9 * d)
  for (;;) {
    const x = normalVariate(random)
    const v = (1 + c * x) ** 3
    if (v > 0 && Math.log(random.uniform()) < 0.5 * x * x + d - d * v + d * Math.log(v)) return d * v
  }
}

/**
 * Poisson variate, exact for any mean >= 0: inversion by products below 10, transformed rejection above
 * (Hörmann, Insur. Math. Econ. 12, 39 (1993)).
 */
export function poissonVariate(random: RandomSource, mean: number): number {
  if (!(mean > 0)) return 0
  if (mean < 10) {
    const limit = Math.exp(-mean)
    let k = 0
    for (let product = random.uniform(); product > limit; product *= random.uniform()) k++
    return k
  }
  const root = Math.sqrt(mean)
  const lnMean = Math.log(mean)
  const b = 0.931 + 2.53 * root
  const a = -0.059 + 0.02483 * b
  const inverseAlpha = 1.1239 + 1.1328 / (b - 3.4)
  const vr = 0.9277 - 3.6224 / (b - 2)
  for (;;) {
    const u = random.uniform() - 0.5
    const v = random.uniform()
    const us = 0.5 - Math.abs(u)
    const k = Math.floor(((2 * a) / us + b) * u + mean + 0.43)
    if (us >= 0.07 && v <= vr) return k
    if (k < 0 || (us < 0.013 && v > us)) continue
    if (Math.log((v * inverseAlpha) / (a / (us * us) + b)) <= k * lnMean - mean - lnGamma(k + 1)) return k
  }
}
