import { lnMills, lnNormalUpperTail } from '../numeric/normal.ts'
import { normalExcessVariate } from '../numeric/variates.ts'
import type { Law } from './law.ts'
import { meanLog, spreadLog } from './weighted-mean.ts'

const SIGMA = { name: 'sigma', symbol: 'σ', unit: '', low: 0.05, high: 30 } as const

/**
 * Log-normal law cut at the shortest duration: ln t normal with mean ln(median) and standard deviation sigma, given
 * t >= s. With the median far below s it imitates a power law, and the best fit can run off to a median of 0; the
 * density is written relative to the shortest duration so that nothing cancels on the way.
 */
export const logNormal: Law = {
  name: 'log-normal',
  label: 'log-normal',
  formula: 'P(t) ∝ t^−1 exp[−(ln(t/t_m))²/(2σ²)]',
  source: 'Crow and Shimizu, Lognormal Distributions, Dekker (1988)',
  parameters: [
    { name: 'medianSeconds', symbol: 't_m', unit: 's', low: 0, high: Number.POSITIVE_INFINITY },
    SIGMA,
  ],
  coordinates: [{ name: 'lnMedian', symbol: 'ln t_m', unit: '', low: -600, high: 60 }, SIGMA],
  parametersOf: ([mean, sigma]) => [Math.exp(mean), sigma],
  coordinatesOf: ([median, sigma]) => [Math.log(median), sigma],

  at([mean, sigma], shortest) {
    const lnShortest = Math.log(shortest)
    const z0 = (lnShortest - mean) / sigma
    const lnMills0 = lnMills(z0)
    const lnFront = -Math.log(sigma) - lnMills0
    // With the median above s the tails themselves are the accurate form, with s far above it their ratios to phi.
    const lnTail0 = lnNormalUpperTail(z0)
    return {
      logDensity(t) {
        if (t < shortest || t === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
        const lnT = Math.log(t)
        const d = (lnT - lnShortest) / sigma
        return lnFront - lnT - d * (z0 + 0.5 * d)
      },
      logSurvival(t) {
        if (t <= shortest) return 0
        if (t === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
        const d = (Math.log(t) - lnShortest) / sigma
        if (z0 < 1) return lnNormalUpperTail(z0 + d) - lnTail0
        return lnMills(z0 + d) - lnMills0 - d * (z0 + 0.5 * d)
      },
    }
  },

  sample(random, [mean, sigma], shortest) {
    const z0 = (Math.log(shortest) - mean) / sigma
    return shortest * Math.exp(sigma * normalExcessVariate(random, z0))
  },

  start(seconds, weights) {
    const spread = spreadLog(seconds, weights)
    return [meanLog(seconds, weights), Math.min(10, Math.max(0.3, spread))]
  },
}
