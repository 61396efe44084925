import { lnGamma, lnGammaP, lnGammaQ } from './gamma.ts'
import { gaussLegendre } from './gauss-legendre.ts'

/** Integrand below e^-SPAN of its peak is left out. */
const SPAN = 42
const PANELS = 12
const POINTS = 20

/**
 * ln Gamma(s, x), the upper incomplete gamma function, for any real s and x > 0 (DLMF 8.2.2).
 *
 * s > 0: from the regularised function. s <= 0: large x by the continued fraction (DLMF 8.9.2); small x by
 * quadrature of e^(s u - e^u) over u = ln t, whose integrand is smooth and falls faster than any exponential; the
 * peak sits at the left end because s <= 0. Relative accuracy about 1e-13.
 * NaN for x <= 0 or non-finite s; -Infinity for x = Infinity.
 */
export function lnUpperGamma(s: number, x: number): number {
  if (!(x > 0) || !Number.isFinite(s)) return Number.NaN
  if (x === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
  if (s > 0) return lnGamma(s) + lnGammaQ(s, x)
  if (x > 1.5) return lnByFraction(s, x)
  // Recursion divides by s, s + 1, ...: near whole numbers, and far down, quadrature is the safe way.
  if (s > -3 && Math.abs(s - Math.round(s)) > 0.05) return lnByRecursion(s, x)
  return lnByQuadrature(s, x)
}

/** Gamma(s, x) = [Gamma(s + 1, x) - x^s e^-x] / s (DLMF 8.8.2), up to the first positive order. */
function lnByRecursion(s: number, x: number): number {
  const next = s + 1 > 0 ? lnGamma(s + 1) + lnGammaQ(s + 1, x) : lnByRecursion(s + 1, x)
  const edge = s * Math.log(x) - x
  return edge + Math.log(-Math.expm1(next - edge)) - Math.log(-s)
}

/** Gamma(s, x) = e^-x x^s / (x + 1 - s - 1(1 - s)/(x + 3 - s - ...)). */
function lnByFraction(s: number, x: number): number {
  let b = x + 1 - s
  let c = 1e300
  let d = 1 / b
  let h = d
  for (let i = 1; i < 5000; i++) {
    const an = -i * (i - s)
    b += 2
    d = 1 / (an * d + b)
    c = b + an / c
    const step = c * d
    h *= step
    if (Math.abs(step - 1) < 1e-16) break
  }
  return s * Math.log(x) - x + Math.log(h)
}

function lnByQuadrature(s: number, x: number): number {
  const from = Math.log(x)
  // e^(s u) decays at rate -s; e^(-e^u) cuts at u = ln(SPAN). Whichever is first ends the range.
  const end = Math.min(Math.log(SPAN + x), s < 0 ? from + SPAN / -s : Number.POSITIVE_INFINITY)
  const { nodes, weights } = gaussLegendre(POINTS)
  const half = (end - from) / (2 * PANELS)
  let sum = 0
  for (let panel = 0; panel < PANELS; panel++) {
    const middle = from + (2 * panel + 1) * half
    for (let i = 0; i < POINTS; i++) {
      const u = middle + half * nodes[i]
      sum += weights[i] * Math.exp(s * (u - from) - (Math.exp(u) - x))
    }
  }
  return s * from - x + Math.log(sum * half)
}

/** ln of the lower function for s > 0, for completeness of pairs. */
export function lnLowerGamma(s: number, x: number): number {
  return lnGamma(s) + lnGammaP(s, x)
}
