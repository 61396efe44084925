import { exponentialVariate } from '../numeric/variates.ts'
import { KAPPA, startRate, TAU, tauOf } from './cutoff.ts'
import type { Law } from './law.ts'
import { power, STEEPEST_ALPHA } from './power.ts'

const ALPHA = { name: 'alpha', symbol: 'α', unit: '', low: 1, high: STEEPEST_ALPHA } as const

/**
 * Power law with a competing constant rate: S(t) = (t/s)^-(alpha-1) e^-kappa(t-s), hazard (alpha-1)/t + kappa.
 * The form that threshold errors make.
 */
export const powerCutoffSurvival: Law = {
  name: 'power-cutoff-survival',
  label: 'power law, cutoff in survival form',
  formula: 'S(t) ∝ t^−(α−1) e^−t/τ',
  source: 'competing constant hazard; compare Cox, J. R. Stat. Soc. B 34, 187 (1972)',
  parameters: [ALPHA, TAU],
  coordinates: [ALPHA, KAPPA],
  parametersOf: ([alpha, kappa]) => [alpha, tauOf(kappa)],
  coordinatesOf: ([alpha, tau]) => [alpha, 1 / tau],

  at([alpha, kappa], shortest) {
    const a = alpha - 1
    const lnShortest = Math.log(shortest)
    const logSurvival = (t: number): number =>
      t <= shortest ? 0 : -a * (Math.log(t) - lnShortest) - kappa * (t - shortest)
    return {
      logDensity: (t) => (t < shortest ? Number.NEGATIVE_INFINITY : Math.log(a / t + kappa) + logSurvival(t)),
      logSurvival,
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
