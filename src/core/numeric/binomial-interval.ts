import { inverseBetaRegularised } from './beta.ts'
import { normalQuantile } from './normal.ts'

/** Exact limits of a share after x of n (Clopper and Pearson, Biometrika 26, 404 (1934)). */
export function clopperPearson(x: number, n: number, confidence: number): { low: number; high: number } {
  const tail = (1 - confidence) / 2
  return {
    low: x === 0 ? 0 : inverseBetaRegularised(x, n - x + 1, tail),
    high: x === n ? 1 : inverseBetaRegularised(x + 1, n - x, 1 - tail),
  }
}

/** Score limits of a share after x of n (Wilson, J. Am. Stat. Assoc. 22, 209 (1927)). */
export function wilson(x: number, n: number, confidence: number): { low: number; high: number } {
  if (n === 0) return { low: 0, high: 1 }
  const z = normalQuantile(1 - (1 - confidence) / 2)
  const share = x / n
  const centre = (share + (z * z) / (2 * n)) / (1 + (z * z) / n)
  const half = (z / (1 + (z * z) / n)) * Math.sqrt((share * (1 - share)) / n + (z * z) / (4 * n * n))
  return { low: Math.max(0, centre - half), high: Math.min(1, centre + half) }
}
