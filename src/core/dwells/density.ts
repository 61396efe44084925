import { garwood } from '../numeric/poisson.ts'
import type { DwellSample } from './dwell-sample.ts'
import { durationEdges } from './duration-edges.ts'

/** Probability density of complete dwells over one stretch of durations, lowBins <= m < highBins. */
export interface DensityPoint {
  readonly lowBins: number
  readonly highBins: number
  /** Geometric mean of the first and last duration of the stretch, s. */
  readonly seconds: number
  readonly count: number
  /** 1/s; 0 in an empty stretch, whose `high` is then an upper limit. */
  readonly density: number
  readonly low: number
  readonly high: number
}

/**
 * Density of complete dwells on logarithmic stretches of whole numbers of bins, P = N_j / (N w_j), with exact Poisson
 * limits of N_j (Garwood, Biometrika 28, 437 (1936)). Empty stretches between the shortest and the longest dwell are
 * kept. Complete dwells only: long ones are under-represented by what the record or gate windows cut; the survival
 * curve and the fits account for that. Empty without complete dwells.
 *
 * @param perDecade stretches per decade of duration
 * @param confidence of the bars, 0..1
 */
export function binnedDensity(sample: DwellSample, perDecade = 7, confidence = 0.95): DensityPoint[] {
  const { completeBins, completeWeights, binSeconds } = sample
  const n = completeBins.length
  if (n === 0) return []
  const edges = durationEdges(Math.floor(completeBins[n - 1]), perDecade)
  const counts = new Float64Array(edges.length - 1)
  let total = 0
  for (let i = 0, j = 0; i < n; i++) {
    while (completeBins[i] >= edges[j + 1]) j++
    counts[j] += completeWeights[i]
    total += completeWeights[i]
  }
  const first = counts.findIndex((count) => count > 0)
  return Array.from(counts, (raw, j): DensityPoint => {
    const lowBins = edges[j]
    const highBins = edges[j + 1]
    // Two nodes of one column carry weights that add up to a whole number only to rounding.
    const count = Math.abs(raw - Math.round(raw)) < 1e-6 ? Math.round(raw) : raw
    const perCount = 1 / (total * (highBins - lowBins) * binSeconds)
    const limits = garwood(count, confidence)
    return {
      lowBins,
      highBins,
      seconds: Math.sqrt(lowBins * (highBins - 1)) * binSeconds,
      count,
      density: count * perCount,
      low: limits.low * perCount,
      high: limits.high * perCount,
    }
  }).slice(first)
}

/** Density at one duration that occurs. */
export interface NeighbourPoint {
  readonly seconds: number
  readonly count: number
  /** 1/s */
  readonly density: number
}

/**
 * Density at every distinct duration, weighted by the distance to its neighbours: P(t_i) = (N_i / N) 2 /
 * (t_(i+1) - t_(i-1)), one-sided at the ends (Kuno, Fromm, Hamann, Gallagher & Nesbitt, J. Chem. Phys. 115,
 * 1028 (2001)). A picture of a wide tail, not for fitting: the slope of a regression on it is biased low. One
 * duration only: one bin wide.
 *
 * @param sample from the list of dwells (nodes at durations that occur)
 */
export function neighbourDensity(sample: DwellSample): NeighbourPoint[] {
  const { completeBins, completeWeights, binSeconds } = sample
  const n = completeBins.length
  const total = completeWeights.reduce((all, weight) => all + weight, 0)
  return Array.from(completeBins, (m, i) => {
    const before = i > 0 ? m - completeBins[i - 1] : Number.NaN
    const after = i + 1 < n ? completeBins[i + 1] - m : Number.NaN
    const width = n === 1 ? 1 : i === 0 ? after : i === n - 1 ? before : (before + after) / 2
    return {
      seconds: m * binSeconds,
      count: completeWeights[i],
      density: completeWeights[i] / (total * width * binSeconds),
    }
  })
}
