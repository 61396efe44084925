/** Lanczos coefficients (g = 607/128, n = 15), Godfrey 2001: relative error below 1e-15 for x > 0. */
const LANCZOS_G = 607 / 128
const LANCZOS = [
  0.99999999999999709182, 57.156235665862923517, -59.597960355475491248, 14.136097974741747174,
  -0.49191381609762019978, 0.33994649984811888699e-4, 0.46523628927048575665e-4, -0.98374475304879564677e-4,
  0.15808870322491248884e-3, -0.21026444172410488319e-3, 0.2174396181152126432e-3, -0.16431810653676389022e-3,
  0.84418223983852743293e-4, -0.2619083840158140867e-4, 0.36899182659531622704e-5,
]
const HALF_LN_TWO_PI = 0.91893853320467274178

/** ln |Gamma(x)| for real x that is not 0, -1, -2, ...; Infinity there. Lanczos, J. SIAM Numer. Anal. B 1, 86 (1964). */
export function lnGamma(x: number): number {
  if (x <= 0 && Number.isInteger(x)) return Number.POSITIVE_INFINITY
  if (x < 0.5) return Math.log(Math.PI / Math.abs(Math.sin(Math.PI * x))) - lnGamma(1 - x)
  if (x > 1e7) return (x - 0.5) * Math.log(x) - x + HALF_LN_TWO_PI + 1 / (12 * x)
  let sum = LANCZOS[0]
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i] / (x - 1 + i)
  const t = x - 0.5 + LANCZOS_G
  return HALF_LN_TWO_PI + Math.log(sum) + (x - 0.5) * Math.log(t) - t
}

const TINY = 1e-300
const EPSILON = 1e-16
const MOST_TERMS = 100_000

/** ln of x^a e^-x / Gamma(a + 1), computed without cancellation for large a. */
function lnFront(a: number, x: number): number {
  if (a < 20) return a * Math.log(x) - x - lnGamma(a + 1)
  // Deviance form (Loader 2000): a ln(x/a) + a - x, exact for x near a; Stirling's remainder for Gamma(a + 1).
  const d = (x - a) / a
  const deviance = Math.abs(d) < 0.1 ? a * log1pMinus(d) : a * Math.log(x / a) + (a - x)
  const a2 = a * a
  const stirling = (1 / 12 - (1 / 360 - (1 / 1260 - 1 / (1680 * a2)) / a2) / a2) / a
  return deviance - HALF_LN_TWO_PI - 0.5 * Math.log(a) - stirling
}

/** ln(1 + d) - d by series, |d| < 0.2. */
function log1pMinus(d: number): number {
  let term = d
  let sum = 0
  for (let k = 2; k < 200; k++) {
    term *= -d
    const add = term / k
    sum += add
    if (Math.abs(add) < 1e-18 * Math.abs(sum)) break
  }
  return sum
}

/** ln P(a, x) by the power series; for x < a + 1. */
function lnSeries(a: number, x: number): number {
  let term = 1
  let sum = 1
  for (let n = 1; n < MOST_TERMS; n++) {
    term *= x / (a + n)
    sum += term
    if (term < sum * EPSILON) break
  }
  return lnFront(a, x) + Math.log(sum)
}

/** ln Q(a, x) by the continued fraction (modified Lentz); for x >= a + 1. */
function lnFraction(a: number, x: number): number {
  let b = x + 1 - a
  let c = 1 / TINY
  let d = 1 / b
  let h = d
  for (let i = 1; i < MOST_TERMS; i++) {
    const an = -i * (i - a)
    b += 2
    d = an * d + b
    if (Math.abs(d) < TINY) d = TINY
    c = b + an / c
    if (Math.abs(c) < TINY) c = TINY
    d = 1 / d
    const step = d * c
    h *= step
    if (Math.abs(step - 1) < 1e-16) break
  }
  return lnFront(a, x) + Math.log(a) + Math.log(h)
}

/** ln P(a, x), regularised lower incomplete gamma; a > 0, x >= 0. NaN outside. DLMF 8.2.4. */
export function lnGammaP(a: number, x: number): number {
  if (!(a > 0) || !(x >= 0)) return Number.NaN
  if (x === 0) return Number.NEGATIVE_INFINITY
  if (x === Number.POSITIVE_INFINITY) return 0
  if (x < a + 1) return lnSeries(a, x)
  return Math.log1p(-Math.exp(lnFraction(a, x)))
}

/** ln Q(a, x), regularised upper incomplete gamma; a > 0, x >= 0. NaN outside. DLMF 8.2.4. */
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

/** x with P(a, x) = p, 0 <= p <= 1, by bisection in ln x to full precision. */
export function inverseGammaP(a: number, p: number): number {
  if (!(a > 0) || !(p >= 0) || !(p <= 1)) return Number.NaN
  if (p === 0) return 0
  if (p === 1) return Number.POSITIVE_INFINITY
  const upper = p > 0.5
  const target = upper ? Math.log1p(-p) : Math.log(p)
  const below = (x: number): boolean => (upper ? lnGammaQ(a, x) > target : lnGammaP(a, x) < target)
  let low = Math.log(a)
  let high = low
  while (!below(Math.exp(low))) low -= 1 + Math.abs(low) * 0.5
  while (below(Math.exp(high))) high += 1
  for (let i = 0; i < 200; i++) {
    const middle = 0.5 * (low + high)
    if (middle === low || middle === high) break
    if (below(Math.exp(middle))) low = middle
    else high = middle
  }
  return Math.exp(0.5 * (low + high))
}
