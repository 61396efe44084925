import type { Law } from './law.ts'
import { weightedMean } from './weighted-mean.ts'

const BETA = { name: 'beta', symbol: 'β', unit: '', low: 0.01, high: 5 } as const

/** Stretched exponential law cut at the shortest duration: S(t) = exp[-(t/tau)^beta + (s/tau)^beta]. */
export const stretched: Law = {
  name: 'stretched',
  label: 'stretched exponential',
  formula: 'S(t) ∝ exp[−(t/τ)^β]',
  source: 'Laherrère and Sornette, Eur. Phys. J. B 2, 525 (1998)',
  parameters: [
    { name: 'tauSeconds', symbol: 'τ', unit: 's', low: 0, high: Number.POSITIVE_INFINITY },
    BETA,
  ],
  // ln tau runs far below the bin when beta is small: that is how this law imitates a power law.
  coordinates: [{ name: 'lnTau', symbol: 'ln τ', unit: '', low: -600, high: 60 }, BETA],
  parametersOf: ([lnTau, beta]) => [Math.exp(lnTau), beta],
  coordinatesOf: ([tau, beta]) => [Math.log(tau), beta],

  at([lnTau, beta], shortest) {
    const atShortest = Math.exp(beta * (Math.log(shortest) - lnTau))
    const lnBeta = Math.log(beta)
    return {
      logDensity(t) {
        if (t < shortest) return Number.NEGATIVE_INFINITY
        const lnT = Math.log(t)
        const x = beta * (lnT - lnTau)
        return lnBeta + x - lnT - (Math.exp(x) - atShortest)
      },
      logSurvival: (t) => (t <= shortest ? 0 : atShortest - Math.exp(beta * (Math.log(t) - lnTau))),
    }
  },

  sample(random, [lnTau, beta], shortest) {
    const atShortest = Math.exp(beta * (Math.log(shortest) - lnTau))
    return Math.exp(lnTau + Math.log(atShortest - Math.log(random.uniform())) / beta)
  },

  start(seconds, weights) {
    return [Math.log(weightedMean(seconds, weights)), 0.5]
  },
}
