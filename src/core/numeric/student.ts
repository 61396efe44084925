import { betaRegularised, inverseBetaRegularised } from './beta.ts'

/** P(|T| > t) of Student's distribution with df > 0 degrees of freedom (DLMF 8.17 gives the beta function). */
export function tTwoSidedTail(t: number, df: number): number {
  return betaRegularised(df / 2, 0.5, df / (df + t * t))
}

/** t with P(T <= t) = p for df > 0 degrees of freedom (Student, Biometrika 6, 1 (1908)); NaN outside 0 <= p <= 1. */
export function tQuantile(p: number, df: number): number {
  if (!(p >= 0) || !(p <= 1) || !(df > 0)) return Number.NaN
  if (p === 0.5) return 0
  const tail = Math.min(p, 1 - p)
  // Two beta functions describe the same tail; the one with the smaller argument keeps the digits.
  const y = inverseBetaRegularised(0.5, df / 2, 1 - 2 * tail)
  const x = y > 0.5 ? inverseBetaRegularised(df / 2, 0.5, 2 * tail) : 1 - y
  const t = Math.sqrt(df * (y > 0.5 ? (1 - x) / x : y / (1 - y)))
  return p < 0.5 ? -t : t
}
