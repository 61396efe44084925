import type { DwellSample } from '../../../src/core/dwells/dwell-sample.ts'
import type { LawAt } from '../../../src/core/laws/law.ts'
import { observedBins } from '../../../src/core/fits/simulate-dwells.ts'
import type { Law } from '../../../src/core/laws/law.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'

/** Simpson's rule on n double steps: the slow reference for every integral here. */
export function simpson(f: (x: number) => number, from: number, to: number, n = 400): number {
  if (!(to > from)) return 0
  const h = (to - from) / (2 * n)
  let sum = f(from) + f(to)
  for (let i = 1; i < 2 * n; i++) sum += (i % 2 === 1 ? 4 : 2) * f(from + i * h)
  return (sum * h) / 3
}

/** Chance of m observed bins, by integrating kernel times density; time in bins, `support` the law's shortest duration. */
export function plainMass(
  at: LawAt,
  m: number,
  edgeShare: number,
  binSeconds: number,
  support: number,
): number {
  const centre = m - 1 + 2 * edgeShare
  const g = (t: number): number =>
    (1 - Math.abs(t - centre)) * Math.exp(at.logDensity(t * binSeconds)) * binSeconds
  const low = Math.max(support, centre - 1)
  return simpson(g, low, Math.max(low, centre)) + simpson(g, Math.max(support, centre), centre + 1)
}

/** Chance of at least m observed bins, by averaging the survival over one bin. */
export function plainMeanSurvival(
  at: LawAt,
  m: number,
  edgeShare: number,
  binSeconds: number,
  support: number,
): number {
  const from = m - 2 + 2 * edgeShare
  const s = (t: number): number => Math.exp(at.logSurvival(Math.max(t, 1e-12) * binSeconds))
  const kink = Math.min(from + 1, Math.max(from, support))
  return simpson(s, from, kink) + simpson(s, kink, from + 1)
}

/** The likelihood of science 3f written out dwell by dwell. */
export function plainLikelihood(
  law: Law,
  coordinates: readonly number[],
  sample: DwellSample,
  shortest: number,
): number {
  const { binSeconds, edgeShare } = sample
  const support = Math.max(0.05, shortest - 2 + 2 * edgeShare)
  const at = law.at(coordinates, support * binSeconds)
  const tail = (m: number): number => plainMeanSurvival(at, m, edgeShare, binSeconds, support)
  let sum = 0
  let anchored = 0
  sample.completeBins.forEach((m, i) => {
    if (m < shortest) return
    sum += sample.completeWeights[i] * Math.log(plainMass(at, m, edgeShare, binSeconds, support))
    anchored += sample.completeWeights[i]
  })
  sample.censoredBins.forEach((m, i) => {
    if (m < shortest) return
    sum += sample.censoredWeights[i] * Math.log(tail(m))
    anchored += sample.censoredWeights[i]
  })
  sample.enteredBins.forEach((m, i) => {
    if (m < shortest) return
    sum -= sample.enteredWeights[i] * Math.log(tail(m))
    anchored -= sample.enteredWeights[i]
  })
  return sum - anchored * Math.log(tail(shortest))
}

/** A sample from lists of durations in bins. */
export function sampleOf(
  complete: ArrayLike<number>,
  {
    censored = [],
    entered = [],
    binSeconds = 0.01,
    edgeShare = 0.4,
  }: {
    readonly censored?: readonly number[]
    readonly entered?: readonly number[]
    readonly binSeconds?: number
    readonly edgeShare?: number
  } = {},
): DwellSample {
  const nodes = (list: ArrayLike<number>): [Float64Array, Float64Array] => {
    const tally = new Map<number, number>()
    for (let i = 0; i < list.length; i++) tally.set(list[i], (tally.get(list[i]) ?? 0) + 1)
    const values = [...tally.keys()].sort((a, b) => a - b)
    return [Float64Array.from(values), Float64Array.from(values, (v) => tally.get(v) ?? 0)]
  }
  const [completeBins, completeWeights] = nodes(complete)
  const [censoredBins, censoredWeights] = nodes(censored)
  const [enteredBins, enteredWeights] = nodes(entered)
  return {
    binSeconds,
    edgeShare,
    completeBins,
    completeWeights,
    censoredBins,
    censoredWeights,
    enteredBins,
    enteredWeights,
  }
}

/** n observed durations of at least `least` bins from a law that begins at one bin, in bins. */
export function drawnBins(
  law: Law,
  coordinates: readonly number[],
  n: number,
  seed: string,
  { least = 3, binSeconds = 0.01, edgeShare = 0.4 } = {},
): Float64Array {
  const random = seededRandom(seed)
  const bins = new Float64Array(n)
  for (let i = 0; i < n; ) {
    const m = observedBins(law.sample(random, coordinates, binSeconds), { binSeconds, edgeShare }, random)
    if (m >= least) bins[i++] = m
  }
  return bins
}

/** Coordinates of each law on a scale of 10 ms bins, in their plain region. */
export const TYPICAL = {
  power: [1.6],
  'power-cutoff-survival': [1.5, 0.2],
  'power-cutoff-density': [1.5, 0.2],
  exponential: [2],
  'log-normal': [-2, 1.5],
  stretched: [-2, 0.5],
} as const
