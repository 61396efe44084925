import type { Law } from './law.ts'
import { meanLog } from './weighted-mean.ts'

/** Largest exponent searched. */
export const STEEPEST_ALPHA = 8

const ALPHA = { name: 'alpha', symbol: 'α', unit: '', low: 1, high: STEEPEST_ALPHA } as const

/** Power law: f(t) = (alpha - 1)/s (t/s)^-alpha, t >= s, alpha > 1; at alpha <= 1 no duration has a chance. */
export const power: Law = {
  name: 'power',
  label: 'power law',
  formula: 'P(t) ∝ t^−α',
  source: 'Clauset, Shalizi and Newman, SIAM Rev. 51, 661 (2009)',
  parameters: [ALPHA],
  coordinates: [ALPHA],
  parametersOf: (coordinates) => [...coordinates],
  coordinatesOf: (parameters) => [...parameters],

  at([alpha], shortest) {
    const a = Math.max(0, alpha - 1)
    const lnShortest = Math.log(shortest)
    const lnFront = Math.log(a) - lnShortest
    return {
      logDensity: (t) =>
        t < shortest ? Number.NEGATIVE_INFINITY : lnFront - alpha * (Math.log(t) - lnShortest),
      // The branch for Infinity only matters at alpha = 1, where 0 times infinity would be no number.
      logSurvival: (t) => (t <= shortest || a === 0 ? 0 : -a * (Math.log(t) - lnShortest)),
    }
  },

  sample: (random, [alpha], shortest) => shortest * random.uniform() ** (-1 / (alpha - 1)),

  start(seconds, weights, shortest) {
    const excess = meanLog(seconds, weights) - Math.log(shortest)
    return [Math.min(STEEPEST_ALPHA - 0.1, 1 + 1 / Math.max(excess, 0.15))]
  },
}
