import { lnUpperGamma } from '../numeric/upper-incomplete-gamma.ts'
import { exponentialVariate } from '../numeric/variates.ts'
import { KAPPA, startRate, TAU, tauOf } from './cutoff.ts'
import type { Law } from './law.ts'
import { power, STEEPEST_ALPHA } from './power.ts'

const ALPHA = { name: 'alpha', symbol: 'α', unit: '', low: -2, high: STEEPEST_ALPHA } as const

/**
 * Power law with exponential cutoff of the density: f(t) = t^-alpha e^-kappa t / (kappa^(alpha-1) Gamma(1-alpha, kappa s)),
 * t >= s. Without cutoff (kappa = 0) it is the power law and needs alpha > 1.
 */
export const powerCutoffDensity: Law = {
  name: 'power-cutoff-density',
  label: 'power law, cutoff in density form',
  formula: 'P(t) ∝ t^−α e^−t/τ',
  source: 'Clauset, Shalizi and Newman, SIAM Rev. 51, 661 (2009), table 2.1',
  parameters: [ALPHA, TAU],
  coordinates: [ALPHA, KAPPA],
  parametersOf: ([alpha, kappa]) => [alpha, tauOf(kappa)],
  coordinatesOf: ([alpha, tau]) => [alpha, 1 / tau],

  at([alpha, kappa], shortest) {
    // Below this kappa s the two laws agree to rounding when alpha > 1, and the incomplete gamma would overflow.
    if (kappa * shortest < 1e-12) {
      if (alpha > 1) return power.at([alpha], shortest)
      return { logDensity: () => Number.NEGATIVE_INFINITY, logSurvival: () => Number.NEGATIVE_INFINITY }
    }
    const lnTail = lnUpperGamma(1 - alpha, kappa * shortest)
    const lnFront = (1 - alpha) * Math.log(kappa) - lnTail
    return {
      logDensity: (t) =>
        t < shortest ? Number.NEGATIVE_INFINITY : lnFront - alpha * Math.log(t) - kappa * t,
      logSurvival: (t) => (t <= shortest ? 0 : lnUpperGamma(1 - alpha, kappa * t) - lnTail),
    }
  },

  // Rejection: from the power law where it is proper and cheap, else from the exponential (alpha >= 0) or by
  // inversion of the survival function.
  sample(random, [alpha, kappa], shortest) {
    if (alpha > 1.05) {
      for (let round = 0; round < 64; round++) {
        const t = power.sample(random, [alpha], shortest)
        if (random.uniform() < Math.exp(-kappa * (t - shortest))) return t
      }
    }
    if (alpha >= 0 && kappa * shortest > 0.2) {
      for (;;) {
        const t = shortest + exponentialVariate(random, 1 / kappa)
        if (random.uniform() < (t / shortest) ** -alpha) return t
      }
    }
    return invert(this.at([alpha, kappa], shortest).logSurvival, Math.log(random.uniform()), shortest, 1 / kappa)
  },

  start(seconds, weights, shortest) {
    const [alpha] = power.start(seconds, weights, shortest)
    return [Math.max(0.5, alpha - 0.3), startRate(seconds, weights, shortest)]
  },
}

/** t with ln S(t) = target, by bisection in ln t. */
function invert(logSurvival: (t: number) => number, target: number, shortest: number, scale: number): number {
  let low = Math.log(shortest)
  let high = Math.log(Math.max(shortest, scale)) + 1
  while (logSurvival(Math.exp(high)) > target) high += 1
  for (let i = 0; i < 80; i++) {
    const middle = 0.5 * (low + high)
    if (logSurvival(Math.exp(middle)) > target) low = middle
    else high = middle
  }
  return Math.exp(0.5 * (low + high))
}
