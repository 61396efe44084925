import { pathToFileURL } from 'node:url'
import { binLikelihood } from '../../src/core/fits/bin-likelihood.ts'
import { type FitOptions, fitLaw, fitLikelihood } from '../../src/core/fits/fit-law.ts'
import { observedBins } from '../../src/core/fits/simulate-dwells.ts'
import type { DwellSample } from '../../src/core/dwells/dwell-sample.ts'
import { LAWS } from '../../src/core/laws/all-laws.ts'
import type { Law, LawName } from '../../src/core/laws/law.ts'
import { seededRandom } from '../../src/core/numeric/seeded-random.ts'
import type { BenchRow } from './bench-row.ts'

const DISTINCT = 10_000
const BUDGET_MS = 5
const SHORTEST = 3
const REPEATS = 15
const BIN = { binSeconds: 0.01, edgeShare: 0.4 }
const WITH_INTERVALS: FitOptions = { confidence: 0.95, intervals: true }

/** Laws wide enough that 10^4 different durations come together, in 10 ms bins. */
const WIDE: Record<LawName, readonly number[]> = {
  power: [1.3],
  'power-cutoff-survival': [1.1, 1 / 200],
  'power-cutoff-density': [1.1, 1 / 500],
  exponential: [1 / 50],
  'log-normal': [2, 2],
  stretched: [3, 0.5],
}

/** Dwells drawn until 10^4 durations have been seen at least once; cut after 60 hours, as a record would. */
function wideSample(law: Law): { sample: DwellSample; dwells: number } {
  const random = seededRandom(`bench ${law.name}`)
  const tally = new Map<number, number>()
  const longest = 2.16e7
  let dwells = 0
  let cut = 0
  while (tally.size < DISTINCT) {
    const m = observedBins(law.sample(random, WIDE[law.name], 0.018), BIN, random)
    if (m < SHORTEST) continue
    dwells++
    if (m >= longest) cut++
    else tally.set(m, (tally.get(m) ?? 0) + 1)
  }
  return {
    dwells,
    sample: {
      ...BIN,
      completeBins: Float64Array.from(tally.keys()),
      completeWeights: Float64Array.from(tally.values()),
      censoredBins: Float64Array.of(longest),
      censoredWeights: Float64Array.of(cut),
      enteredBins: new Float64Array(0),
      enteredWeights: new Float64Array(0),
    },
  }
}

/** Median of several times, ms; the first runs, before compilation, are left out. */
function medianMs(work: () => void, repeats: number): number {
  const times: number[] = []
  for (let r = 0; r < repeats + 3; r++) {
    const start = performance.now()
    work()
    if (r >= 3) times.push(performance.now() - start)
  }
  return times.sort((a, b) => a - b)[repeats >> 1]
}

/** One fit with profile intervals at 10^4 distinct dwells, every law, against the same fit without compression. */
export async function run(): Promise<BenchRow[]> {
  return Object.values(LAWS).map((law) => {
    const { sample, dwells } = wideSample(law)
    const fast = fitLaw(law, sample, SHORTEST, WITH_INTERVALS)
    if (fast.status !== 'ok') throw new Error(`The ${law.name} fit failed: ${fast.status}. ${fast.message}`)
    const value = medianMs(() => fitLaw(law, sample, SHORTEST, WITH_INTERVALS), REPEATS)
    const theirs = medianMs(() => {
      const full = binLikelihood(law, sample, SHORTEST, { compress: false })
      fitLikelihood(law, sample, SHORTEST, full, WITH_INTERVALS)
    }, 5)
    return {
      what: `fit ${law.name} with intervals, ${DISTINCT} distinct of ${dwells} dwells`,
      value,
      unit: 'ms',
      rival: `without compression: ${theirs.toFixed(1)} ms`,
      ratio: value / theirs,
      budget: `at most ${BUDGET_MS} ms`,
      ok: value <= BUDGET_MS,
    }
  })
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href)
  console.table(await run())
