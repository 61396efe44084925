import { exponentialVariate } from '../numeric/variates.ts'
import type { Law } from './law.ts'
import { weightedMean } from './weighted-mean.ts'

const BETA = { name: 'beta', symbol: 'β', unit: '', low: 0.01, high: 5 } as const

/**
 * Stretched exponential law cut at the shortest duration: S(t) = exp[(s/tau)^beta - (t/tau)^beta]; beta = 1 is the
 * exponential law. With tau far below s and small beta it imitates a power law of alpha - 1 = beta (s/tau)^beta, so the
 * difference of the powers is taken relative to the shortest duration, where it would cancel.
 */
export const stretched: Law = {
  name: 'stretched',
  label: 'stretched exponential',
  formula: 'S(t) ∝ exp[−(t/τ)^β]',
  source: 'Laherrère and Sornette, Eur. Phys. J. B 2, 525 (1998)',
  parameters: [{ name: 'tauSeconds', symbol: 'τ', unit: 's', low: 0, high: Number.POSITIVE_INFINITY }, BETA],
  // ln tau runs far below the bin when beta is small: that is how this law imitates a power law.
  coordinates: [{ name: 'lnTau', symbol: 'ln τ', unit: '', low: -600, high: 60 }, BETA],
  parametersOf: ([lnTau, beta]) => [Math.exp(lnTau), beta],
  coordinatesOf: ([tau, beta]) => [Math.log(tau), beta],

  at([lnTau, beta], shortest) {
    const lnShortest = Math.log(shortest)
    const x0 = beta * (lnShortest - lnTau)
    const atShortest = Math.exp(x0)
    const lnFront = Math.log(beta) + x0
    return {
      logDensity(t) {
        if (t < shortest || t === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
        const lnT = Math.log(t)
        const x = beta * (lnT - lnShortest)
        return lnFront + x - lnT - atShortest * Math.expm1(x)
      },
      logSurvival: (t) => (t <= shortest ? 0 : -atShortest * Math.expm1(beta * (Math.log(t) - lnShortest))),
    }
  },

  // Inverse of the survival function at a uniform number.
  sample(random, [lnTau, beta], shortest) {
    const atShortest = Math.exp(beta * (Math.log(shortest) - lnTau))
    return shortest * Math.exp(Math.log1p(exponentialVariate(random, 1) / atShortest) / beta)
  },

  start(seconds, weights) {
    return [Math.log(weightedMean(seconds, weights)), 0.5]
  },
}
