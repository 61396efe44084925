import { gammaP, lnGammaQ, upperGammaFraction } from './gamma.ts'

const HALF_LN_TWO_PI = 0.91893853320467274178

/** Complementary error function (DLMF 7.2.2); relative accuracy about 1e-13 to the end of the doubles. */
export function erfc(x: number): number {
  if (Number.isNaN(x)) return Number.NaN
  if (x >= 0) return Math.exp(lnErfc(x))
  return 1 + gammaP(0.5, x * x)
}

/** ln erfc(x), finite for any finite x. */
export function lnErfc(x: number): number {
  return x >= 0 ? lnGammaQ(0.5, x * x) : Math.log1p(gammaP(0.5, x * x))
}

/** P(Z <= z) of the standard normal distribution. */
export function normalCdf(z: number): number {
  return 0.5 * erfc(-z * Math.SQRT1_2)
}

/** ln P(Z > z) of the standard normal distribution, relative accuracy of the logarithm kept on both sides. */
export function lnNormalUpperTail(z: number): number {
  if (z < 0) return Math.log1p(-Math.exp(lnNormalUpperTail(-z)))
  return lnErfc(z * Math.SQRT1_2) - Math.LN2
}

/**
 * ln of Mills' ratio P(Z > z)/phi(z) (DLMF 7.8.1). Differences of log tails far out are taken with this and the exact
 * difference of squares, because the tails themselves would cancel.
 */
export function lnMills(z: number): number {
  const x = 0.5 * z * z
  // The fraction of Gamma(1/2, z^2/2) without its exponential is the ratio itself, up to z/2.
  if (z > 0 && x >= 1.5) return Math.log(0.5 * z * upperGammaFraction(0.5, x))
  return lnNormalUpperTail(z) + x + HALF_LN_TWO_PI
}

/** z with P(Z <= z) = p, 0 <= p <= 1; NaN outside. */
export function normalQuantile(p: number): number {
  if (!(p >= 0) || !(p <= 1)) return Number.NaN
  if (p === 0.5) return 0
  if (p < 0.5) return -normalUpperQuantile(Math.log(p))
  return normalUpperQuantile(Math.log1p(-p))
}

/**
 * z with ln P(Z > z) = lnTail, for any lnTail <= 0; the tail may be far below the smallest double. Newton's method on
 * the log tail, which is concave, so the steps settle from any start.
 */
export function normalUpperQuantile(lnTail: number): number {
  if (!(lnTail <= 0)) return Number.NaN
  if (lnTail === Number.NEGATIVE_INFINITY) return Number.POSITIVE_INFINITY
  if (lnTail === 0) return Number.NEGATIVE_INFINITY
  // Work in the smaller tail.
  if (lnTail > -Math.LN2) return -normalUpperQuantile(Math.log(-Math.expm1(lnTail)))
  const t = Math.sqrt(-2 * lnTail)
  // Rough start: Abramowitz and Stegun 26.2.22.
  let z = t - (2.30753 + 0.27061 * t) / (1 + 0.99229 * t + 0.04481 * t * t)
  for (let round = 0; round < 50; round++) {
    const mills = lnMills(z)
    const value = mills - 0.5 * z * z - HALF_LN_TWO_PI
    const step = (value - lnTail) * Math.exp(mills)
    z += step
    if (Math.abs(step) < 1e-15 * (1 + Math.abs(z))) break
  }
  return z
}
