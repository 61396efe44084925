import { garwood } from '../numeric/poisson.ts'
import type { DwellSample } from './dwell-sample.ts'
import { durationEdges } from './duration-edges.ts'

/** Hazard of a dwell's end, times its age, over ages from lowBins - 1/2 to highBins - 1/2. */
export interface HazardPoint {
  readonly lowBins: number
  readonly highBins: number
  /** Geometric mean of the ends of the stretch of ages, s. */
  readonly seconds: number
  /** t h(t), no unit. */
  readonly value: number
  readonly low: number
  readonly high: number
  readonly events: number
}

/**
 * t x h(t) on logarithmic stretches of age: ends over time at risk, with exact Poisson limits of the number of
 * ends (Garwood 1936). A power law is flat at alpha - 1, a cutoff rises, a stretched exponential is a straight
 * line of slope beta; points are independent, unlike those of a density. Censored time counts in full, delayed
 * entry is honoured.
 *
 * Time at risk is counted as in the survival curve: a dwell of m bins ended at age m; one cut at m, or taken up
 * at m, was at risk, or taken up, up to m + 1/2, because its next bin could be m + 1 at the earliest. Stretches
 * without time at risk are left out.
 *
 * @param perDecade stretches per decade of age
 * @param confidence of the limits, 0..1
 */
export function hazardTimesAge(sample: DwellSample, perDecade: number, confidence = 0.95): HazardPoint[] {
  const { completeBins, completeWeights, censoredBins, censoredWeights, enteredBins, enteredWeights } = sample
  const longest = Math.max(completeBins.at(-1) ?? 0, censoredBins.at(-1) ?? 0)
  if (longest < 1) return []
  const edges = durationEdges(longest, perDecade)
  const points: HazardPoint[] = []
  for (let j = 0; j + 1 < edges.length; j++) {
    const from = edges[j] - 0.5
    const to = edges[j + 1] - 0.5
    let events = 0
    for (let i = 0; i < completeBins.length; i++)
      if (completeBins[i] >= edges[j] && completeBins[i] < edges[j + 1]) events += completeWeights[i]
    if (Math.abs(events - Math.round(events)) < 1e-6) events = Math.round(events)
    const riskBins =
      timeWithin(completeBins, completeWeights, 0, from, to) +
      timeWithin(censoredBins, censoredWeights, 0.5, from, to) -
      timeWithin(enteredBins, enteredWeights, 0.5, from, to)
    if (!(riskBins > 0)) continue
    const ageBins = Math.sqrt(from * to)
    const limits = garwood(events, confidence)
    points.push({
      lowBins: edges[j],
      highBins: edges[j + 1],
      seconds: ageBins * sample.binSeconds,
      value: (ageBins * events) / riskBins,
      low: (ageBins * limits.low) / riskBins,
      high: (ageBins * limits.high) / riskBins,
      events,
    })
  }
  return points
}

/** Bins that stays from age 0 to each duration + later spend between two ages. */
function timeWithin(
  durations: Float64Array,
  weights: Float64Array,
  later: number,
  from: number,
  to: number,
): number {
  let sum = 0
  for (let i = durations.length - 1; i >= 0 && durations[i] + later > from; i--)
    sum += weights[i] * (Math.min(to, durations[i] + later) - from)
  return sum
}
