import { gammaQ, inverseGammaP } from './gamma.ts'

/** x with P(chi2_df <= x) = p. */
export function chiSquareQuantile(p: number, df: number): number {
  return 2 * inverseGammaP(df / 2, p)
}

/** P(chi2_df > x). */
export function chiSquareUpperTail(x: number, df: number): number {
  return x <= 0 ? 1 : gammaQ(df / 2, x / 2)
}
