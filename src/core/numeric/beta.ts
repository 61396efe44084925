import { lnPoissonTerm } from './gamma.ts'

/**
 * Regularised incomplete beta I_x(a, b), a, b > 0, 0 <= x <= 1 (DLMF 8.17.2); NaN outside. Relative accuracy about
 * 1e-13 where the value is below one half, absolute above.
 */
export function betaRegularised(a: number, b: number, x: number): number {
  if (!(a > 0) || !(b > 0) || !(x >= 0) || !(x <= 1)) return Number.NaN
  if (x === 0 || x === 1) return x
  return share(a, b, x, 1 - x)
}

/** I_x(a, b) with y = 1 - x given, so that neither loses digits. */
function share(a: number, b: number, x: number, y: number): number {
  if (x <= (a + 1) / (a + b + 2)) return Math.exp(lnFront(a, b, x, y)) * fraction(a, b, x)
  return 1 - Math.exp(lnFront(b, a, y, x)) * fraction(b, a, y)
}

/**
 * ln of x^a y^b / (a B(a, b)): three Poisson terms, whose deviances do not cancel when a and b are large (Loader
 * 2000, as in `lnPoissonTerm`).
 */
function lnFront(a: number, b: number, x: number, y: number): number {
  const n = a + b
  return lnPoissonTerm(a, n * x) + lnPoissonTerm(b, n * y) - lnPoissonTerm(n, n) + Math.log(b / n)
}

/** Continued fraction DLMF 8.17.22 by the modified Lentz method. */
function fraction(a: number, b: number, x: number): number {
  let c = 1
  let d = 1 / guard(1 - ((a + b) * x) / (a + 1))
  let h = d
  for (let m = 1; m < 100_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / guard(1 + even * d)
    c = guard(1 + even / c)
    h *= d * c
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / guard(1 + odd * d)
    c = guard(1 + odd / c)
    const step = d * c
    h *= step
    if (Math.abs(step - 1) <= Number.EPSILON) break
  }
  return h
}

function guard(value: number): number {
  return Math.abs(value) < 1e-300 ? 1e-300 : value
}

/** x with I_x(a, b) = p for a, b > 0, 0 <= p <= 1 (NaN outside), by bisection to the last digit. */
export function inverseBetaRegularised(a: number, b: number, p: number): number {
  if (!(a > 0) || !(b > 0) || !(p >= 0) || !(p <= 1)) return Number.NaN
  if (p === 0 || p === 1) return p
  let low = 0
  let high = 1
  for (let i = 0; i < 1100; i++) {
    const middle = 0.5 * (low + high)
    if (middle === low || middle === high) break
    if (share(a, b, middle, 1 - middle) < p) low = middle
    else high = middle
  }
  return 0.5 * (low + high)
}
