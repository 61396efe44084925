/** Sum with Neumaier's compensation (Z. Angew. Math. Mech. 54, 39 (1974)); empty gives 0. */
export function exactSum(values: ArrayLike<number>): number {
  let sum = 0
  let lost = 0
  for (let i = 0; i < values.length; i++) {
    const value = values[i]
    const next = sum + value
    lost += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum
    sum = next
  }
  return sum + lost
}

/** ln(1 - e^-x) for x > 0, accurate at both ends (Mächler 2012). */
export function log1mexp(x: number): number {
  return x <= Math.LN2 ? Math.log(-Math.expm1(-x)) : Math.log1p(-Math.exp(-x))
}

/** ln(e^a + e^b). */
export function logAddExp(a: number, b: number): number {
  if (a === Number.NEGATIVE_INFINITY) return b
  if (b === Number.NEGATIVE_INFINITY) return a
  return Math.max(a, b) + Math.log1p(Math.exp(-Math.abs(a - b)))
}
