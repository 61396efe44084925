import { gaussLegendre } from '../numeric/gauss-legendre.ts'
import { triangleRule } from './triangle-rule.ts'

/**
 * Nodes for the mass of one observed duration: the integral of (1 - |x|) f(t_m + x Delta) Delta over x in [-1, 1], with
 * t_m the centre of the kernel. Node n of dwell i has time `seconds[n]` and weight `weights[n]` (s), n in
 * [first[i], first[i + 1]).
 */
export interface TriangleNodes {
  readonly first: Uint32Array
  readonly seconds: Float64Array
  readonly weights: Float64Array
}

/**
 * Points of the Gauss rule by the lower end of the kernel, in bins. The farther a kernel lies from t = 0, where power
 * laws are singular, the smoother the density over it; relative error below 1e-9 for exponents up to 3 and for
 * rates up to one per bin where dwells of that rate occur.
 */
const POINTS = [
  { from: 1, points: 10 },
  { from: 6, points: 5 },
  { from: 21, points: 4 },
  { from: 40, points: 3 },
  { from: 180, points: 2 },
] as const
/** Kernels that reach below one bin, or below the shortest duration, are cut into panels of this many points. */
const PANEL_POINTS = 10
const PANEL_RATIO = 2

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
  const support = shortestSeconds / binSeconds
  const panels = (centre: number, from: number, to: number): void => {
    const { nodes, weights: shares } = gaussLegendre(PANEL_POINTS)
    for (let low = from; low < to; ) {
      const high = low * PANEL_RATIO < to ? low * PANEL_RATIO : to
      const half = 0.5 * (high - low)
      for (let i = 0; i < PANEL_POINTS; i++) {
        const t = low + half * (nodes[i] + 1)
        seconds.push(t * binSeconds)
        weights.push(half * shares[i] * (1 - Math.abs(t - centre)) * binSeconds)
      }
      low = high
    }
  }
  for (let i = 0; i < bins.length; i++) {
    const centre = bins[i] - shiftBins
    const low = centre - 1
    // The reference duration of a fit is the lower end of the shortest kernel, up to rounding.
    if (low < 1 - 1e-9 || low < support - 1e-9) {
      panels(centre, Math.max(low, support), centre)
      panels(centre, Math.max(centre, support), centre + 1)
    } else {
      let points: number = POINTS[0].points
      for (const step of POINTS) if (low >= step.from) points = step.points
      const rule = triangleRule(points)
      for (let k = 0; k < points; k++) {
        seconds.push((centre + rule.nodes[k]) * binSeconds)
        weights.push(rule.weights[k] * binSeconds)
      }
    }
    first[i + 1] = seconds.length
  }
  return { first, seconds: Float64Array.from(seconds), weights: Float64Array.from(weights) }
}
