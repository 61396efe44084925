import { hurwitzZeta } from './zeta.ts'

/** Lanczos' sum with the coefficients of P. Godfrey (2001), g = 607/128, n = 15; relative error below 1e-15 for x > 0. */
const LANCZOS_G = 607 / 128
const LANCZOS = [
  0.99999999999999709182, 57.156235665862923517, -59.597960355475491248, 14.136097974741747174,
  -0.49191381609762019978, 0.33994649984811888699e-4, 0.46523628927048575665e-4, -0.98374475304879564677e-4,
  0.15808870322491248884e-3, -0.21026444172410488319e-3, 0.2174396181152126432e-3, -0.16431810653676389022e-3,
  0.84418223983852743293e-4, -0.2619083840158140867e-4, 0.36899182659531622704e-5,
]
const HALF_LN_TWO_PI = 0.91893853320467274178
const EULER = 0.57721566490153286061

/** (zeta(k) - 1)/k for k = 2..31, with the sign of the series of ln Gamma(2 + s). */
const SERIES_AT_TWO = Array.from(
  { length: 30 },
  (_, i) => ((i % 2 === 0 ? 1 : -1) * hurwitzZeta(i + 2, 2)) / (i + 2),
)

/**
 * ln |Gamma(x)| for real x; Infinity at 0, -1, -2, ... Lanczos, J. SIAM Numer. Anal. B 1, 86 (1964); near the zeros
 * at 1 and 2 by the series DLMF 5.7.3, so that relative accuracy (1e-14) holds there too.
 */
export function lnGamma(x: number): number {
  if (x <= 0 && Number.isInteger(x)) return Number.POSITIVE_INFINITY
  if (x < 0.5) {
    // Reflection, DLMF 5.5.3; the sine of the distance to the nearest pole keeps its digits.
    const away = Math.abs(x - Math.round(x))
    return Math.log(Math.PI / Math.sin(Math.PI * away)) - lnGamma(1 - x)
  }
  if (x <= 1.5) return lnGammaOnePlus(x - 1)
  if (x <= 2.5) return lnGammaTwoPlus(x - 2)
  if (x > 1e7) return (x - 0.5) * Math.log(x) - x + HALF_LN_TWO_PI + 1 / (12 * x)
  let sum = LANCZOS[0]
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i] / (x - 1 + i)
  const t = x - 0.5 + LANCZOS_G
  return HALF_LN_TWO_PI + Math.log(sum) + (x - 0.5) * Math.log(t) - t
}

/** ln Gamma(1 + s) for |s| <= 0.5, relative accuracy kept as s goes to 0. */
export function lnGammaOnePlus(s: number): number {
  // The logarithm and the series cancel to first order; its own series keeps the digits for small s.
  return Math.abs(s) < 0.01 ? smallOnePlus(s) : lnGammaTwoPlus(s) - Math.log1p(s)
}

function smallOnePlus(s: number): number {
  let sum = 0
  for (let k = 9; k >= 2; k--) sum = (k % 2 === 0 ? 1 : -1) * ((1 + hurwitzTail[k - 2]) / k) + s * sum
  return s * (-EULER + s * sum)
}

/** zeta(k) - 1, k = 2..9. */
const hurwitzTail = Array.from({ length: 8 }, (_, i) => hurwitzZeta(i + 2, 2))

function lnGammaTwoPlus(s: number): number {
  let sum = 0
  for (let i = SERIES_AT_TWO.length - 1; i >= 0; i--) sum = SERIES_AT_TWO[i] + s * sum
  return s * (1 - EULER + s * sum)
}

const TINY = 1e-300
const MOST_TERMS = 100_000

/**
 * ln(x^a e^-x / Gamma(a + 1)), a >= 0, x > 0: for whole a the logarithm of the Poisson probability of a counts at
 * mean x. Written with the deviance (C. Loader, "Fast and accurate computation of binomial probabilities", 2000), so
 * that nothing cancels for large a.
 */
export function lnPoissonTerm(a: number, x: number): number {
  if (a < 20) return a * Math.log(x) - x - lnGamma(a + 1)
  const d = (x - a) / a
  const deviance = Math.abs(d) < 0.3 ? a * log1pMinus(d) : a * Math.log(x / a) + (a - x)
  const a2 = a * a
  const stirling = (1 / 12 - (1 / 360 - (1 / 1260 - 1 / (1680 * a2)) / a2) / a2) / a
  return deviance - HALF_LN_TWO_PI - 0.5 * Math.log(a) - stirling
}

/** ln(1 + d) - d by series, |d| < 0.3. */
function log1pMinus(d: number): number {
  let term = d
  let sum = 0
  for (let k = 2; k < 200; k++) {
    term *= -d
    const add = term / k
    sum += add
    if (Math.abs(add) <= 1e-17 * Math.abs(sum)) break
  }
  return sum
}

/** ln P(a, x) by the power series (DLMF 8.11.4); for x < a + 1. */
function lnSeries(a: number, x: number): number {
  let term = 1
  let sum = 1
  for (let n = 1; n < MOST_TERMS; n++) {
    term *= x / (a + n)
    sum += term
    if (term < sum * 1e-17) break
  }
  return lnPoissonTerm(a, x) + Math.log(sum)
}

/**
 * Gamma(s, x) x^-s e^x by the continued fraction DLMF 8.9.2 (modified Lentz method, Thompson and Barnett, J. Comput.
 * Phys. 64, 490 (1986)), for any s and x above both 1 and s.
 */
export function upperGammaFraction(s: number, x: number): number {
  let b = x + 1 - s
  let c = 1 / TINY
  let d = 1 / b
  let h = d
  for (let i = 1; i < MOST_TERMS; i++) {
    const an = -i * (i - s)
    b += 2
    d = an * d + b
    if (Math.abs(d) < TINY) d = TINY
    c = b + an / c
    if (Math.abs(c) < TINY) c = TINY
    d = 1 / d
    const step = d * c
    h *= step
    if (Math.abs(step - 1) <= Number.EPSILON) break
  }
  return h
}

/** ln Q(a, x) by the continued fraction; for x >= a + 1. */
function lnFraction(a: number, x: number): number {
  return lnPoissonTerm(a, x) + Math.log(a * upperGammaFraction(a, x))
}

/**
 * ln P(a, x), regularised lower incomplete gamma (DLMF 8.2.4); a > 0, x >= 0, NaN outside. Relative accuracy of P
 * about 1e-13, in both tails.
 */
export function lnGammaP(a: number, x: number): number {
  if (!(a > 0) || !(x >= 0)) return Number.NaN
  if (x === 0) return Number.NEGATIVE_INFINITY
  if (x === Number.POSITIVE_INFINITY) return 0
  if (x < a + 1) return lnSeries(a, x)
  return Math.log1p(-Math.exp(lnFraction(a, x)))
}

/**
 * ln Q(a, x), regularised upper incomplete gamma (DLMF 8.2.4); a > 0, x >= 0, NaN outside. Relative accuracy of Q
 * about 1e-13 in both tails for a >= 0.1; below, 1e-14/a (there use `lnUpperGamma`, which has no such loss).
 */
export function lnGammaQ(a: number, x: number): number {
  if (!(a > 0) || !(x >= 0)) return Number.NaN
  if (x === 0) return 0
  if (x === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
  if (x >= a + 1) return lnFraction(a, x)
  return Math.log1p(-Math.exp(lnSeries(a, x)))
}

/** P(a, x), regularised lower incomplete gamma. */
export function gammaP(a: number, x: number): number {
  return Math.exp(lnGammaP(a, x))
}

/** Q(a, x), regularised upper incomplete gamma. */
export function gammaQ(a: number, x: number): number {
  return Math.exp(lnGammaQ(a, x))
}

/**
 * x with P(a, x) = p for a > 0, 0 <= p <= 1; NaN outside. Newton's method on the logarithm of the nearer tail against
 * ln x: that function is concave, so the steps settle from any start.
 */
export function inverseGammaP(a: number, p: number): number {
  if (!(a > 0) || !(p >= 0) || !(p <= 1)) return Number.NaN
  if (p === 0) return 0
  if (p === 1) return Number.POSITIVE_INFINITY
  const upper = p > 0.5
  const target = upper ? Math.log1p(-p) : Math.log(p)
  let u = startOfInverse(a, p, upper, target)
  for (let round = 0; round < 200; round++) {
    const x = Math.exp(u)
    // Below the smallest double.
    if (x === 0) return 0
    const lnTail = upper ? lnGammaQ(a, x) : lnGammaP(a, x)
    const slope = a * Math.exp(lnPoissonTerm(a, x) - lnTail)
    const step = (upper ? lnTail - target : target - lnTail) / slope
    u += Math.max(-2, Math.min(2, step))
    if (Math.abs(step) < 1e-14) break
  }
  return Math.exp(u)
}

/** ln x near the root: Wilson and Hilferty (Proc. Natl. Acad. Sci. 17, 684 (1931)), or the first term of P for small x. */
function startOfInverse(a: number, p: number, upper: boolean, lnTail: number): number {
  const t = Math.sqrt(-2 * lnTail)
  // Rough normal quantile, Abramowitz and Stegun 26.2.22.
  const z = (upper ? 1 : -1) * (t - (2.30753 + 0.27061 * t) / (1 + 0.99229 * t + 0.04481 * t * t))
  const root = 1 - 1 / (9 * a) + z / (3 * Math.sqrt(a))
  if (root > 0.3) return Math.log(a) + 3 * Math.log(root)
  return upper ? Math.log(a + 1 - lnTail) : (Math.log(p) + lnGamma(a + 1)) / a
}
