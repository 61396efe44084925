/** Bernoulli numbers B_2k / (2k)!, k = 1..10. */
const BERNOULLI_OVER_FACTORIAL = [
  1 / 12,
  -1 / 720,
  1 / 30240,
  -1 / 1209600,
  1 / 47900160,
  -691 / 1307674368000,
  1 / 74724249600,
  -3617 / 10670622842880000,
  43867 / 5109094217170944000,
  -174611 / 802857662698291200000,
]
const DIRECT_TERMS = 16

/** Hurwitz zeta sum_{k >= 0} (q + k)^-s for s > 1, q > 0 (Euler-Maclaurin, DLMF 25.11.5). NaN outside. */
export function hurwitzZeta(s: number, q: number): number {
  if (!(s > 1) || !(q > 0)) return Number.NaN
  let sum = 0
  for (let k = 0; k < DIRECT_TERMS; k++) sum += (q + k) ** -s
  const a = q + DIRECT_TERMS
  sum += a ** (1 - s) / (s - 1) + 0.5 * a ** -s
  let rising = s
  let power = a ** (-s - 1)
  for (let k = 0; k < BERNOULLI_OVER_FACTORIAL.length; k++) {
    sum += BERNOULLI_OVER_FACTORIAL[k] * rising * power
    rising *= (s + 2 * k + 1) * (s + 2 * k + 2)
    power /= a * a
  }
  return sum
}
