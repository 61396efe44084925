import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { LawAt } from '../laws/law.ts'
import { gaussLegendre } from '../numeric/gauss-legendre.ts'

/** Points per panel; one panel reaches from its lower end to at most this multiple of it. */
const POINTS = 8
const PANEL_RATIO = 2.05
/** The reference duration may not fall below this share of a bin. */
const LEAST_REFERENCE = 0.05

/** Bins by which the kernel of an observed duration sits below it: 1 - 2 theta. */
export function edgeShift(sample: Pick<DwellSample, 'edgeShare'>): number {
  return 1 - 2 * sample.edgeShare
}

/**
 * Duration, s, at which the law is anchored: the lowest true duration that can be seen as `shortestBins`. For one or
 * two bins this may be nothing at all; true durations below a twentieth of a bin are then left out of the law.
 */
export function referenceSeconds(
  sample: Pick<DwellSample, 'edgeShare' | 'binSeconds'>,
  shortestBins: number,
): number {
  return Math.max(LEAST_REFERENCE, shortestBins - edgeShift(sample) - 1) * sample.binSeconds
}

/**
 * ln of the chance that a dwell is observed for at least m bins: the mean of the survival over
 * [(m - 1) Delta - delta, m Delta - delta], delta = (1 - 2 theta) Delta = shiftBins Delta. By parts, with t0 the lower end,
 * it is S(t0) minus the integral of (1 - x) f(t0 + x Delta) Delta over x in [0, 1], which needs one survival only; the
 * integral begins at the support of the law where that lies inside.
 * @param supportSeconds shortest duration of the law, where S = 1
 */
export function lnMeanSurvival(
  at: LawAt,
  m: number,
  shiftBins: number,
  binSeconds: number,
  supportSeconds: number,
): number {
  const from = m - shiftBins - 1
  const to = from + 1
  const support = supportSeconds / binSeconds
  if (to <= support) return 0
  const lnStart = at.logSurvival(from > 0 ? from * binSeconds : 0)
  if (lnStart === Number.NEGATIVE_INFINITY) return lnStart
  const { nodes, weights } = gaussLegendre(POINTS)
  let lost = 0
  for (let low = Math.max(from, support); low < to; ) {
    const high = low * PANEL_RATIO < to ? low * PANEL_RATIO : to
    const half = 0.5 * (high - low)
    for (let i = 0; i < POINTS; i++) {
      const t = low + half * (nodes[i] + 1)
      lost += half * weights[i] * (to - t) * Math.exp(at.logDensity(t * binSeconds) - lnStart)
    }
    low = high
  }
  return lnStart + Math.log1p(-Math.min(lost * binSeconds, 1 - 1e-15))
}
