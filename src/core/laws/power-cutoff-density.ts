import type { RandomSource } from '../numeric/random-source.ts'
import { lnExpIntegral } from '../numeric/upper-incomplete-gamma.ts'
import { exponentialVariate, gammaVariate } from '../numeric/variates.ts'
import { KAPPA, startRate, TAU, tauOf } from './cutoff.ts'
import type { Law } from './law.ts'
import { power, STEEPEST_ALPHA } from './power.ts'

const ALPHA = { name: 'alpha', symbol: 'α', unit: '', low: -2, high: STEEPEST_ALPHA } as const

/**
 * Power law with exponential cutoff of the density: f(t) = (t/s)^-alpha e^-kappa t / (s E_alpha(kappa s)), t >= s, with the
 * generalised exponential integral E (DLMF 8.19). alpha may be below 1 when kappa > 0. At kappa = 0 it is the power law,
 * reached continuously; there alpha <= 1 gives no duration a chance.
 */
export const powerCutoffDensity: Law = {
  name: 'power-cutoff-density',
  label: 'power law, cutoff in density form',
  formula: 'P(t) ∝ t^−α exp(−t/τ)',
  source: 'Clauset, Shalizi and Newman, SIAM Rev. 51, 661 (2009), table 2.1',
  parameters: [ALPHA, TAU],
  coordinates: [ALPHA, KAPPA],
  parametersOf: ([alpha, kappa]) => [alpha, tauOf(kappa)],
  coordinatesOf: ([alpha, tau]) => [alpha, 1 / tau],

  at([alpha, kappa], shortest) {
    if (!(kappa > 0)) return power.at([alpha], shortest)
    const lnShortest = Math.log(shortest)
    const lnNorm = lnExpIntegral(alpha, kappa * shortest)
    const lnFront = -lnShortest - lnNorm
    return {
      logDensity(t) {
        if (t < shortest) return Number.NEGATIVE_INFINITY
        if (t === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
        return lnFront - alpha * (Math.log(t) - lnShortest) - kappa * t
      },
      logSurvival(t) {
        if (t <= shortest) return 0
        if (t === Number.POSITIVE_INFINITY) return Number.NEGATIVE_INFINITY
        return (1 - alpha) * (Math.log(t) - lnShortest) + lnExpIntegral(alpha, kappa * t) - lnNorm
      },
    }
  },

  sample(random, [alpha, kappa], shortest) {
    if (!(kappa > 0)) return power.sample(random, [alpha], shortest)
    const x = kappa * shortest
    // Steep and slowly cut: most draws of the power law are kept, and nothing has to be set up.
    if (alpha > 1.05 && x < 0.5) {
      for (;;) {
        const t = power.sample(random, [alpha], shortest)
        if (random.uniform() < Math.exp(-kappa * (t - shortest))) return t
      }
    }
    return shortest * (alpha < 0 ? drawRising(random, -alpha, x) : drawFalling(random, alpha, x))
  },

  start(seconds, weights, shortest) {
    const [alpha] = power.start(seconds, weights, shortest)
    return [Math.max(0.5, alpha - 0.3), startRate(seconds, weights, shortest)]
  },
}

/**
 * y >= 1 with density proportional to y^-alpha e^(-x y), alpha >= 0, x > 0: rejection under y^-alpha e^-x up to the
 * knee c = max(1, 1/x) and c^-alpha e^(-x y) beyond it. At worst one draw in e (1 + alpha) is kept.
 */
function drawFalling(random: RandomSource, alpha: number, x: number): number {
  const knee = Math.max(1, 1 / x)
  const lnKnee = Math.log(knee)
  const a = 1 - alpha
  // Area below the knee, over e^-x, and beyond it; (knee^a - 1)/a is ln knee at alpha = 1.
  const near = a === 0 ? lnKnee : Math.expm1(a * lnKnee) / a
  const far = Math.exp(x - x * knee - alpha * lnKnee) / x
  for (;;) {
    if (random.uniform() * (near + far) < near) {
      const u = random.uniform()
      const y = a === 0 ? Math.exp(u * lnKnee) : Math.exp(Math.log1p(u * Math.expm1(a * lnKnee)) / a)
      if (random.uniform() < Math.exp(-x * (y - 1))) return y
    } else {
      const y = knee + exponentialVariate(random, 1 / x)
      if (random.uniform() < (y / knee) ** -alpha) return y
    }
  }
}

/**
 * y >= 1 with density proportional to y^rise e^(-x y), rise > 0: a gamma variate while most of them pass 1, else
 * rejection under the exponential that touches the density at 1 (the logarithm of the density is concave).
 */
function drawRising(random: RandomSource, rise: number, x: number): number {
  if (x < rise + 1) {
    for (;;) {
      const y = gammaVariate(random, rise + 1) / x
      if (y >= 1) return y
    }
  }
  for (;;) {
    const y = 1 + exponentialVariate(random, 1 / (x - rise))
    if (random.uniform() < Math.exp(rise * (Math.log(y) - (y - 1)))) return y
  }
}
