import { exponentialVariate } from '../numeric/variates.ts'
import { KAPPA, startRate, TAU, tauOf } from './cutoff.ts'
import type { Law } from './law.ts'
import { power, STEEPEST_ALPHA } from './power.ts'

const ALPHA = { name: 'alpha', symbol: 'α', unit: '', low: 1, high: STEEPEST_ALPHA } as const

/**
 * Power law with a competing constant rate: S(t) = (t/s)^-(alpha-1) e^-kappa(t-s), hazard (alpha-1)/t + kappa.
 * The form that threshold errors make. kappa = 0 is the power law, alpha = 1 the exponential law.
 */
export const powerCutoffSurvival: Law = {
  name: 'power-cutoff-survival',
  label: 'power law, cutoff in survival form',
  formula: 'S(t) ∝ t^−(α−1) exp(−t/τ)',
  source: 'hazards of competing causes add: Cox, J. R. Stat. Soc. B 34, 187 (1972)',
  parameters: [ALPHA, TAU],
  coordinates: [ALPHA, KAPPA],
  parametersOf: ([alpha, kappa]) => [alpha, tauOf(kappa)],
  coordinatesOf: ([alpha, tau]) => [alpha, 1 / tau],

  at([alpha, kappa], shortest) {
    const a = Math.max(0, alpha - 1)
    const rate = Math.max(0, kappa)
    const lnShortest = Math.log(shortest)
    return {
      logDensity(t) {
        if (t < shortest || t === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
        return Math.log(a / t + rate) - a * (Math.log(t) - lnShortest) - rate * (t - shortest)
      },
      logSurvival(t) {
        if (t <= shortest) return 0
        const ofPower = a === 0 ? 0 : -a * (Math.log(t) - lnShortest)
        return rate === 0 ? ofPower : ofPower - rate * (t - shortest)
      },
    }
  },

  // The earlier of two independent endings.
  sample(random, [alpha, kappa], shortest) {
    const scaleFree = alpha > 1 ? power.sample(random, [alpha], shortest) : Number.POSITIVE_INFINITY
    return kappa > 0 ? Math.min(scaleFree, shortest + exponentialVariate(random, 1 / kappa)) : scaleFree
  },

  start(seconds, weights, shortest) {
    const [alpha] = power.start(seconds, weights, shortest)
    return [Math.max(1.05, alpha - 0.2), startRate(seconds, weights, shortest)]
  },
}
