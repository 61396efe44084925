import { gammaP, gammaQ, inverseGammaP, lnPoissonTerm } from './gamma.ts'

/** ln P(K = k) for a Poisson mean >= 0; -Infinity where impossible. Absolute accuracy about 1e-14 (1e-13 beyond 10^4 counts). */
export function lnPoisson(k: number, mean: number): number {
  if (k < 0) return Number.NEGATIVE_INFINITY
  if (mean === 0) return k === 0 ? 0 : Number.NEGATIVE_INFINITY
  return lnPoissonTerm(k, mean)
}

/** P(K >= c), the chance that a Poisson count reaches c; P = gammaP(c, mean) (DLMF 8.4.10). */
export function poissonUpperTail(c: number, mean: number): number {
  if (c <= 0) return 1
  return mean <= 0 ? 0 : gammaP(c, mean)
}

/** P(K <= c - 1), the chance that a Poisson count stays below c. */
export function poissonLowerTail(c: number, mean: number): number {
  if (c <= 0) return 0
  return mean <= 0 ? 1 : gammaQ(c, mean)
}

/**
 * Exact limits of a Poisson mean after n counts (Garwood, Biometrika 28, 437 (1936)).
 * @param confidence two-sided, 0..1
 */
export function garwood(n: number, confidence: number): { low: number; high: number } {
  const tail = (1 - confidence) / 2
  return { low: n === 0 ? 0 : inverseGammaP(n, tail), high: inverseGammaP(n + 1, 1 - tail) }
}
