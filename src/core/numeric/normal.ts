import { gammaP, lnGammaQ } from './gamma.ts'

/** Complementary error function, full double accuracy including the far tail. */
export function erfc(x: number): number {
  if (Number.isNaN(x)) return Number.NaN
  if (x >= 0) return Math.exp(lnErfc(x))
  return 1 + gammaP(0.5, x * x)
}

/** ln erfc(x), finite for any finite x. */
export function lnErfc(x: number): number {
  return x >= 0 ? lnGammaQ(0.5, x * x) : Math.log(1 + gammaP(0.5, x * x))
}

/** P(Z <= z) of the standard normal distribution. */
export function normalCdf(z: number): number {
  return 0.5 * erfc(-z * Math.SQRT1_2)
}

/** ln P(Z > z) of the standard normal distribution. */
export function lnNormalUpperTail(z: number): number {
  return lnErfc(z * Math.SQRT1_2) - Math.LN2
}

/** z with P(Z <= z) = p, by bisection on the logarithm of the nearer tail. */
export function normalQuantile(p: number): number {
  if (!(p >= 0) || !(p <= 1)) return Number.NaN
  if (p === 0.5) return 0
  if (p < 0.5) return -normalUpperQuantile(Math.log(p))
  return normalUpperQuantile(Math.log1p(-p))
}

/** z with ln P(Z > z) = lnTail, for any lnTail < 0; the tail may be far below the smallest double. */
export function normalUpperQuantile(lnTail: number): number {
  if (lnTail === Number.NEGATIVE_INFINITY) return Number.POSITIVE_INFINITY
  let low = -40
  let high = 40
  while (lnNormalUpperTail(high) > lnTail) high *= 2
  for (let i = 0; i < 100; i++) {
    const middle = 0.5 * (low + high)
    if (middle === low || middle === high) break
    if (lnNormalUpperTail(middle) > lnTail) low = middle
    else high = middle
  }
  return 0.5 * (low + high)
}
