import { lnNormalUpperTail, normalUpperQuantile } from '../numeric/normal.ts'
import type { Law } from './law.ts'
import { meanLog, spreadLog } from './weighted-mean.ts'

const HALF_LN_TWO_PI = 0.91893853320467274178

const SIGMA = { name: 'sigma', symbol: 'σ', unit: '', low: 0.05, high: 30 } as const

/** Log-normal law cut at the shortest duration: ln t normal with mean ln(median) and standard deviation sigma. */
export const logNormal: Law = {
  name: 'log-normal',
  label: 'log-normal',
  formula: 'P(t) ∝ t^−1 exp[−(ln t/t_m)²/2σ²]',
  source: 'Crow and Shimizu, Lognormal Distributions, Dekker (1988)',
  parameters: [
    { name: 'medianSeconds', symbol: 't_m', unit: 's', low: 0, high: Number.POSITIVE_INFINITY },
    SIGMA,
  ],
  coordinates: [{ name: 'lnMedian', symbol: 'ln t_m', unit: '', low: -600, high: 60 }, SIGMA],
  parametersOf: ([mean, sigma]) => [Math.exp(mean), sigma],
  coordinatesOf: ([median, sigma]) => [Math.log(median), sigma],

  at([mean, sigma], shortest) {
    const lnTail = lnNormalUpperTail((Math.log(shortest) - mean) / sigma)
    const lnFront = -HALF_LN_TWO_PI - Math.log(sigma) - lnTail
    return {
      logDensity(t) {
        if (t < shortest) return Number.NEGATIVE_INFINITY
        const lnT = Math.log(t)
        const z = (lnT - mean) / sigma
        return lnFront - lnT - 0.5 * z * z
      },
      logSurvival: (t) => (t <= shortest ? 0 : lnNormalUpperTail((Math.log(t) - mean) / sigma) - lnTail),
    }
  },

  sample(random, [mean, sigma], shortest) {
    // Inverse of the upper tail by its logarithm: far out the tail itself would underflow.
    const lnTail = lnNormalUpperTail((Math.log(shortest) - mean) / sigma)
    const z = normalUpperQuantile(Math.log(random.uniform()) + lnTail)
    return Math.max(shortest, Math.exp(mean + sigma * z))
  },

  start(seconds, weights) {
    const spread = spreadLog(seconds, weights)
    return [meanLog(seconds, weights), Math.min(10, Math.max(0.3, spread))]
  },
}
