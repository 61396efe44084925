import { gaussLegendre, type QuadratureRule } from '../numeric/gauss-legendre.ts'
import { findRoot } from '../numeric/root.ts'

const rules = new Map<number, QuadratureRule>()

/**
 * Gauss rule of n points (1..12) for the weight 1 - |x| on [-1, 1]; the weights add up to 1. Exact for polynomials up
 * to degree 2n - 1. Recurrence by Stieltjes' procedure, nodes as roots between those of the polynomial before,
 * weights from the orthonormal polynomials (Gautschi, Orthogonal Polynomials, Oxford (2004), sections 1.3, 2.2, 3.1).
 */
export function triangleRule(n: number): QuadratureRule {
  const kept = rules.get(n)
  if (kept !== undefined) return kept
  // The weight in each half is a polynomial, so 32 Legendre points a half make every inner product here exact.
  const half = gaussLegendre(32)
  const points = half.nodes.flatMap((x) => [0.5 * (x + 1), -0.5 * (x + 1)])
  const measure = half.weights.flatMap((w, i) => {
    const weight = 0.5 * w * (1 - 0.5 * (half.nodes[i] + 1))
    return [weight, weight]
  })
  // Monic p_(k+1) = x p_k - beta_k p_(k-1); the middle coefficient is 0 by symmetry.
  const norms: number[] = []
  const betas: number[] = []
  const value = (degree: number, x: number): number => {
    let before = 0
    let now = 1
    for (let k = 0; k < degree; k++) [before, now] = [now, x * now - (k === 0 ? 0 : betas[k] * before)]
    return now
  }
  for (let k = 0; k <= n; k++) {
    norms.push(points.reduce((sum, x, i) => sum + measure[i] * value(k, x) ** 2, 0))
    betas.push(k === 0 ? 0 : norms[k] / norms[k - 1])
  }
  let nodes: number[] = []
  for (let degree = 1; degree <= n; degree++) {
    const fences = [-1, ...nodes, 1]
    nodes = Array.from({ length: degree }, (_, i) =>
      degree % 2 === 1 && 2 * i + 1 === degree
        ? 0
        : findRoot((x) => value(degree, x), fences[i], fences[i + 1], { tolerance: 1e-16 }).x,
    )
  }
  const weights = nodes.map((x) => {
    let sum = 0
    for (let k = 0; k < n; k++) sum += value(k, x) ** 2 / norms[k]
    return 1 / sum
  })
  const rule = { nodes, weights }
  rules.set(n, rule)
  return rule
}
