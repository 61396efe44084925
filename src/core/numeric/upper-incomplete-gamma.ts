import { lnGamma, lnGammaOnePlus, lnGammaP, lnGammaQ, upperGammaFraction } from './gamma.ts'

/** Above this the continued fraction settles fast; below, the series has lost no digits yet. */
const FRACTION_FROM = 1.5

/**
 * ln Gamma(s, x), the upper incomplete gamma function, for any real s and x > 0 (DLMF 8.2.2). Relative accuracy of
 * Gamma about 1e-13. NaN for x <= 0 or non-finite s; -Infinity for x = Infinity.
 */
export function lnUpperGamma(s: number, x: number): number {
  if (!(x > 0) || !Number.isFinite(s)) return Number.NaN
  if (x === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
  if (s > 0.5) return lnGamma(s) + lnGammaQ(s, x)
  return s * Math.log(x) + lnExpIntegral(1 - s, x)
}

/**
 * ln E_p(x), the generalised exponential integral, integral of t^-p e^(-x t) over t >= 1, for any real p and x >= 0
 * (DLMF 8.19). Continuous down to x = 0, where it is -ln(p - 1) for p > 1 and Infinity for p <= 1. NaN for x < 0 or
 * NaN.
 *
 * Large x: continued fraction. Small x: the series of Gautschi (ACM Trans. Math. Softw. 5, 466 (1979)) at the order
 * within 1/2 of 1, written so that nothing divides by zero at whole orders, then up in p by the recursion DLMF
 * 8.19.12, whose errors shrink because x is below about p.
 */
export function lnExpIntegral(p: number, x: number): number {
  if (!(x >= 0) || Number.isNaN(p)) return Number.NaN
  if (x === 0) return p > 1 ? -Math.log(p - 1) : Number.POSITIVE_INFINITY
  if (x === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
  if (p < 0.5) return lnGamma(1 - p) + lnGammaQ(1 - p, x) - (1 - p) * Math.log(x)
  if (x > FRACTION_FROM) return Math.log(upperGammaFraction(1 - p, x)) - x
  const steps = Math.round(p - 1)
  let order = p - steps
  let value = nearOrderOne(1 - order, x)
  const decay = Math.exp(-x)
  for (; steps > 0 && order < p - 0.5; order++) value = (decay - x * value) / order
  return Math.log(value)
}

/**
 * E_(1-s)(x) for |s| <= 1/2, x <= 1.5:
 * x^-s (Gamma(1 + s) - 1)/s + (x^-s - 1)/s - sum over n >= 1 of (-x)^n / (n! (s + n)); at s = 0, -gamma - ln x - sum.
 */
function nearOrderOne(s: number, x: number): number {
  const lnX = Math.log(x)
  const gammaPart = s === 0 ? -0.57721566490153286061 : Math.expm1(lnGammaOnePlus(s)) / s
  const logPart = s === 0 ? -lnX : Math.expm1(-s * lnX) / s
  let sum = Math.exp(-s * lnX) * gammaPart + logPart
  let term = 1
  for (let n = 1; n < 60; n++) {
    term *= -x / n
    const add = term / (s + n)
    sum -= add
    if (Math.abs(add) < 1e-18) break
  }
  return sum
}

/** ln of the lower function for s > 0, the other half of Gamma(s). */
export function lnLowerGamma(s: number, x: number): number {
  return lnGamma(s) + lnGammaP(s, x)
}
