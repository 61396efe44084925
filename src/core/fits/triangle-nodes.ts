import { gaussLegendre } from '../numeric/gauss-legendre.ts'

/**
 * Nodes for the mass of one observed duration: the integral of (1 - |x|) f(t_m + x Delta) over x in [-1, 1], with
 * t_m the centre of the kernel. Node n of dwell i has time `seconds[n]` and weight `weights[n]`, n in
 * [first[i], first[i + 1]).
 */
export interface TriangleNodes {
  readonly first: Uint32Array
  readonly seconds: Float64Array
  readonly weights: Float64Array
}

/** Long durations need fewer points: the density is smooth over one bin there. */
const RULES = [
  { below: 8, halfPoints: 8 },
  { below: 24, halfPoints: 4 },
] as const
/** Exact to fifth order for the triangle: nodes 0 and -+sqrt(0.4). Relative error below 1e-9 from 24 bins on. */
const THREE = { x: Math.sqrt(0.4), outer: 5 / 24, inner: 7 / 12 }
/** From here on the centre alone is right to 2e-6. */
const CENTRE_FROM = 512

/**
 * @param bins observed durations (may be fractional), each > 0
 * @param shiftBins t_m = (m - shiftBins) Delta
 * @param shortestSeconds the density is 0 below; nodes are placed above it only
 */
export function triangleNodes(
  bins: ArrayLike<number>,
  shiftBins: number,
  binSeconds: number,
  shortestSeconds: number,
): TriangleNodes {
  const first = new Uint32Array(bins.length + 1)
  const seconds: number[] = []
  const weights: number[] = []
  const half = (centre: number, from: number, to: number, points: number): void => {
    // The part of [from, to] (in bins from the centre, on one side of it) that lies above the shortest duration.
    const lowest = Math.max(from, shortestSeconds / binSeconds - centre)
    if (lowest >= to) return
    const rule = gaussLegendre(points)
    for (let i = 0; i < points; i++) {
      const x = lowest + 0.5 * (to - lowest) * (rule.nodes[i] + 1)
      seconds.push((centre + x) * binSeconds)
      weights.push(0.5 * (to - lowest) * rule.weights[i] * (1 - Math.abs(x)) * binSeconds)
    }
  }
  for (let i = 0; i < bins.length; i++) {
    const centre = bins[i] - shiftBins
    const rule = RULES.find(({ below }) => bins[i] < below)
    if (rule !== undefined) {
      half(centre, -1, 0, rule.halfPoints)
      half(centre, 0, 1, rule.halfPoints)
    } else if (bins[i] < CENTRE_FROM) {
      seconds.push((centre - THREE.x) * binSeconds, centre * binSeconds, (centre + THREE.x) * binSeconds)
      weights.push(THREE.outer * binSeconds, THREE.inner * binSeconds, THREE.outer * binSeconds)
    } else {
      seconds.push(centre * binSeconds)
      weights.push(binSeconds)
    }
    first[i + 1] = seconds.length
  }
  return { first, seconds: Float64Array.from(seconds), weights: Float64Array.from(weights) }
}
