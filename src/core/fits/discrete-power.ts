import { minimise1d } from '../numeric/minimise.ts'
import { hurwitzZeta } from '../numeric/zeta.ts'

/** A discrete power law P(k) ~ k^-alpha, k = shortest, shortest + 1, ... */
export interface DiscretePower {
  readonly alpha: number
  readonly shortest: number
  readonly n: number
  readonly logLikelihood: number
  readonly distance: number
}

/** Values with their multiplicities, ascending. */
export type Multiplicities = readonly (readonly [value: number, count: number])[]

/** Maximum likelihood from a given shortest value (Clauset, Shalizi and Newman, SIAM Rev. 51, 661 (2009), eq. 3.5). */
export function fitDiscretePower(values: Multiplicities, shortest: number): DiscretePower {
  const tail = values.filter(([value]) => value >= shortest)
  let n = 0
  let logs = 0
  for (const [value, count] of tail) {
    n += count
    logs += count * Math.log(value)
  }
  const minusLogLikelihood = (alpha: number): number =>
    n * Math.log(hurwitzZeta(alpha, shortest)) + alpha * logs
  const { x: alpha, value } = minimise1d(minusLogLikelihood, 1.01, 8, { tolerance: 1e-9 })
  const whole = hurwitzZeta(alpha, shortest)
  let seen = 0
  let distance = 0
  for (const [at, count] of tail) {
    seen += count
    distance = Math.max(distance, Math.abs(seen / n - (1 - hurwitzZeta(alpha, at + 1) / whole)))
  }
  return { alpha, shortest, n, logLikelihood: -value, distance }
}

/**
 * The shortest value at which the Kolmogorov-Smirnov distance of the fit is least (same source, section 3.3), leaving at
 * least ten values and two distinct ones. Null when there are fewer.
 */
export function discretePowerByDistance(values: Multiplicities): DiscretePower | null {
  let best: DiscretePower | null = null
  for (const [shortest] of values.slice(0, -1)) {
    const fit = fitDiscretePower(values, shortest)
    if (fit.n < 10) break
    if (best === null || fit.distance < best.distance) best = fit
  }
  return best
}
