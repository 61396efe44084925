import { lnGamma } from './gamma.ts'

/** Regularised incomplete beta I_x(a, b), a, b > 0, 0 <= x <= 1 (continued fraction, DLMF 8.17.22). */
export function betaRegularised(a: number, b: number, x: number): number {
  if (!(a > 0) || !(b > 0) || !(x >= 0) || !(x <= 1)) return Number.NaN
  if (x === 0 || x === 1) return x
  if (x > (a + 1) / (a + b + 2)) return 1 - betaRegularised(b, a, 1 - x)
  const lnFront = lnGamma(a + b) - lnGamma(a) - lnGamma(b) + a * Math.log(x) + b * Math.log1p(-x)
  let c = 1
  let d = 1 / guard(1 - ((a + b) * x) / (a + 1))
  let h = d
  for (let m = 1; m < 10_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / guard(1 + even * d)
    c = guard(1 + even / c)
    h *= d * c
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / guard(1 + odd * d)
    c = guard(1 + odd / c)
    const step = d * c
    h *= step
    if (Math.abs(step - 1) < 1e-16) break
  }
  return (Math.exp(lnFront) * h) / a
}

function guard(value: number): number {
  return Math.abs(value) < 1e-300 ? 1e-300 : value
}

/** x with I_x(a, b) = p, by bisection. */
export function inverseBetaRegularised(a: number, b: number, p: number): number {
  if (!(p >= 0) || !(p <= 1)) return Number.NaN
  if (p === 0 || p === 1) return p
  let low = 0
  let high = 1
  for (let i = 0; i < 200; i++) {
    const middle = 0.5 * (low + high)
    if (middle === low || middle === high) break
    if (betaRegularised(a, b, middle) < p) low = middle
    else high = middle
  }
  return 0.5 * (low + high)
}
