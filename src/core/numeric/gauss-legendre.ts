/** Nodes and weights on [-1, 1]. */
export interface QuadratureRule {
  readonly nodes: readonly number[]
  readonly weights: readonly number[]
}

const rules = new Map<number, QuadratureRule>()

/** Gauss-Legendre rule of n points (1..64), by Newton's method on the Legendre polynomial; kept after the first call. */
export function gaussLegendre(n: number): QuadratureRule {
  const kept = rules.get(n)
  if (kept !== undefined) return kept
  const nodes = new Array<number>(n)
  const weights = new Array<number>(n)
  for (let i = 0; i < n; i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5))
    let slope = 1
    for (let round = 0; round < 100; round++) {
      let [p0, p1] = [1, x]
      for (let k = 2; k <= n; k++) [p0, p1] = [p1, ((2 * k - 1) * x * p1 - (k - 1) * p0) / k]
      if (n === 1) [p0, p1] = [1, x]
      slope = (n * (x * p1 - p0)) / (x * x - 1)
      const step = p1 / slope
      x -= step
      if (Math.abs(step) < 1e-16) break
    }
    nodes[n - 1 - i] = x
    weights[n - 1 - i] = 2 / ((1 - x * x) * slope * slope)
  }
  const rule = { nodes, weights }
  rules.set(n, rule)
  return rule
}

/** Integral of f over [from, to] by the n-point rule. */
export function integrate(f: (x: number) => number, from: number, to: number, n = 16): number {
  const { nodes, weights } = gaussLegendre(n)
  const half = 0.5 * (to - from)
  const middle = 0.5 * (to + from)
  let sum = 0
  for (let i = 0; i < n; i++) sum += weights[i] * f(middle + half * nodes[i])
  return half * sum
}
