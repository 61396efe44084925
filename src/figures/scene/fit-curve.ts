import type { Fit } from '../../core/fits/fit.ts'
import { lawNamed } from '../../core/laws/all-laws.ts'

export interface FitCurve {
  readonly seconds: Float64Array
  readonly values: Float64Array
  readonly fittedFrom: number
  readonly fittedTo: number
}

const POINTS = 72

/**
 * The fitted law for drawing. Density is scaled by the share of complete dwells that were fitted, survival by the
 * observed survival at the shortest fitted dwell, so that curve and points can be compared; t x hazard needs no scale.
 * @param share of all complete dwells (density), or survival (survival plot), at the shortest fitted dwell
 * @param from, to range to draw, s
 * @param longest longest dwell in the fit, s
 */
export function fitCurve(
  fit: Fit,
  plot: 'density' | 'neighbour' | 'survival' | 'hazard',
  share: number,
  from: number,
  to: number,
  longest: number,
): FitCurve | null {
  if (fit.coordinates.length === 0 || !(to > from)) return null
  // Anchored at the lower end of what is drawn, then normalised to 1 at the shortest fitted dwell.
  const anchor = Math.min(from, fit.shortestSeconds)
  const law = lawNamed(fit.law).at(fit.coordinates, anchor)
  // A dwell seen as m bins lasted m - 1/2 bins at least, on average.
  const start = fit.shortestSeconds * (1 - 0.5 / fit.shortestBins)
  const atStart = law.logSurvival(start)
  const seconds = new Float64Array(POINTS)
  const values = new Float64Array(POINTS)
  const ratio = Math.log(to / from) / (POINTS - 1)
  for (let i = 0; i < POINTS; i++) {
    const t = from * Math.exp(i * ratio)
    seconds[i] = t
    const lnDensity = law.logDensity(t)
    const lnSurvival = law.logSurvival(t)
    values[i] =
      plot === 'density' || plot === 'neighbour'
        ? share * Math.exp(lnDensity - atStart)
        : plot === 'survival'
          ? share * Math.exp(lnSurvival - atStart)
          : t * Math.exp(lnDensity - lnSurvival)
  }
  return { seconds, values, fittedFrom: fit.shortestSeconds, fittedTo: longest }
}
