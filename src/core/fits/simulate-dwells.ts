import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law } from '../laws/law.ts'
import type { RandomSource } from '../numeric/random-source.ts'
import { atLeast } from './bin-likelihood.ts'
import { edgeShift, referenceSeconds } from './mean-survival.ts'

/** Tries at a duration of the length asked for, before the length itself is taken. */
const MOST_DRAWS = 10_000

/**
 * Observed bins of a true duration whose phase against the bins is uniform. The chance of m is a triangle about
 * t/Delta + 1 - 2 theta, so it lies in one of the two whole numbers around that centre.
 */
export function observedBins(
  seconds: number,
  sample: Pick<DwellSample, 'binSeconds' | 'edgeShare'>,
  random: RandomSource,
): number {
  const centre = seconds / sample.binSeconds + edgeShift(sample)
  const low = Math.floor(centre)
  return random.uniform() < centre - low ? low + 1 : low
}

/** What was observed, dwell by dwell, in bins. `cut[i]` is the age at which dwell i was cut, Infinity when it ended first. */
interface Dwells {
  readonly entered: Float64Array
  readonly ended: Float64Array
  readonly cut: Float64Array
  /** Ages at which dwells were cut, ascending, and the product-limit chance of not being cut up to and including each. */
  readonly cutAges: Float64Array
  readonly uncut: Float64Array
}

/** Prepared once per sample: draws data sets like the observed one from a law. */
export interface DwellSimulator {
  readonly dwells: number
  /** One data set from the law at these coordinates. */
  draw(coordinates: readonly number[], random: RandomSource): DwellSample
}

/**
 * Data sets with the number of dwells, entries and cuts of the observed sample (the conditional bootstrap of censored
 * data: Hjort, Bayesian and Empirical Bayesian Bootstrapping, Oslo (1985); Davison and Hinkley, Bootstrap Methods and
 * their Application, Cambridge (1997), section 3.5). Every dwell is drawn from the law, rounded to bins, given that it
 * lasts for at least the shortest fitted dwell and for the age at which it was entered. A dwell that was cut keeps its age
 * at the cut. A complete one would have been cut at some later age: that age is drawn from the product-limit
 * distribution of the cuts, given that it lies beyond the dwell's end (often: never). A drawn dwell as long as its
 * cut or longer is cut there.
 *
 * The sample holds no link between entries and ends; the latest entries are given to the longest dwells.
 */
export function dwellSimulator(law: Law, sample: DwellSample, shortestBins: number): DwellSimulator {
  const dwells = dwellsOf(sample, shortestBins)
  const { entered, ended, cut, cutAges, uncut } = dwells
  const drawnBins = (coordinates: readonly number[], least: number, random: RandomSource): number => {
    const reference = referenceSeconds(sample, least)
    for (let tries = 0; tries < MOST_DRAWS; tries++) {
      const m = observedBins(law.sample(random, coordinates, reference), sample, random)
      if (m >= least) return m
    }
    return least
  }
  const drawnCut = (i: number, random: RandomSource): number => {
    if (cut[i] !== Number.POSITIVE_INFINITY || cutAges.length === 0) return cut[i]
    const first = firstAbove(cutAges, ended[i])
    const now = first === 0 ? 1 : uncut[first - 1]
    const wanted = random.uniform() * now
    // Smallest later cut age whose remaining chance falls below the drawn one.
    let low = first
    let high = cutAges.length
    while (low < high) {
      const middle = (low + high) >> 1
      if (uncut[middle] < wanted) high = middle
      else low = middle + 1
    }
    return low < cutAges.length ? cutAges[low] : Number.POSITIVE_INFINITY
  }
  return {
    dwells: entered.length,
    draw(coordinates, random) {
      const complete = new Map<number, number>()
      const censored = new Map<number, number>()
      for (let i = 0; i < entered.length; i++) {
        const m = drawnBins(coordinates, Math.max(shortestBins, entered[i]), random)
        const age = drawnCut(i, random)
        const into = m >= age ? censored : complete
        const key = Math.min(m, age)
        into.set(key, (into.get(key) ?? 0) + 1)
      }
      return {
        binSeconds: sample.binSeconds,
        edgeShare: sample.edgeShare,
        completeBins: Float64Array.from(complete.keys()),
        completeWeights: Float64Array.from(complete.values()),
        censoredBins: Float64Array.from(censored.keys()),
        censoredWeights: Float64Array.from(censored.values()),
        enteredBins: sample.enteredBins,
        enteredWeights: sample.enteredWeights,
      }
    },
  }
}

function dwellsOf(sample: DwellSample, shortestBins: number): Dwells {
  const ends = spread(sample.completeBins, sample.completeWeights, shortestBins)
  const cuts = spread(sample.censoredBins, sample.censoredWeights, shortestBins)
  const entries = spread(sample.enteredBins, sample.enteredWeights, shortestBins)
  const all = [...ends.map((m) => ({ m, wasCut: false })), ...cuts.map((m) => ({ m, wasCut: true }))]
  all.sort((a, b) => a.m - b.m)
  // Latest entry to the longest dwell: ages are met if any pairing meets them.
  const entered = new Float64Array(all.length)
  const given = Math.min(entries.length, all.length)
  for (let k = 1; k <= given; k++) entered[all.length - k] = entries[entries.length - k]
  const cutAges: number[] = []
  const uncut: number[] = []
  let chance = 1
  for (let k = 0; k < cuts.length; ) {
    const age = cuts[k]
    let here = 0
    while (k < cuts.length && cuts[k] === age) {
      here++
      k++
    }
    const atRisk = all.length - firstAtLeast(all, age) - entries.filter((entry) => entry > age).length
    chance *= Math.max(0, 1 - here / Math.max(here, atRisk))
    cutAges.push(age)
    uncut.push(chance)
  }
  return {
    entered,
    ended: Float64Array.from(all, ({ m }) => m),
    cut: Float64Array.from(all, ({ m, wasCut }) => (wasCut ? m : Number.POSITIVE_INFINITY)),
    cutAges: Float64Array.from(cutAges),
    uncut: Float64Array.from(uncut),
  }
}

/** Durations one by one, ascending; weights that are not whole numbers are rounded so that their sum is kept. */
function spread(bins: Float64Array, weights: Float64Array, shortestBins: number): number[] {
  const chosen = atLeast(bins, weights, shortestBins)
  const order = Array.from(chosen.bins.keys()).sort((a, b) => chosen.bins[a] - chosen.bins[b])
  const list: number[] = []
  let sum = 0
  for (const i of order) {
    sum += chosen.weights[i]
    while (list.length < Math.round(sum)) list.push(chosen.bins[i])
  }
  return list
}

function firstAtLeast(all: readonly { readonly m: number }[], age: number): number {
  let low = 0
  let high = all.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (all[middle].m >= age) high = middle
    else low = middle + 1
  }
  return low
}

function firstAbove(ages: Float64Array, age: number): number {
  let low = 0
  let high = ages.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (ages[middle] > age) high = middle
    else low = middle + 1
  }
  return low
}
