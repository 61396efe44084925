import type { RandomSource } from '../numeric/random-source.ts'
import { poissonVariate } from '../numeric/variates.ts'
import { fittingCounts, type Trace } from '../photons/trace.ts'
import type { Recipe } from '../recipe/recipe.ts'
import type { Baseline } from './baseline.ts'
import { baselineCounts } from './baseline-at.ts'
import { fitBaseline } from './fit-baseline.ts'
import { unusableBins } from './unusable-bins.ts'

export interface PlantWish {
  /** Start of the planted on-time, s; null for the middle of the longest off stretch. */
  readonly atSeconds: number | null
  readonly durationSeconds: number
  /** Counts per bin above the baseline: a bin is on when counts - baseline reaches it. */
  readonly thresholdAboveBaseline: number
  readonly random: RandomSource
}

/** What became of a synthetic on-time after the baseline was fitted again with unchanged choices. */
export interface PlantedEvent {
  readonly startSeconds: number
  /** Whole bins, so at most half a bin from the wish; the length of the record at most; 0 when nothing could be planted. */
  readonly plantedSeconds: number
  /** Longest run of planted bins called on above the new baseline. */
  readonly survivingSeconds: number
  /** Of the planted length, 0..1. */
  readonly survivingShare: number
  /** Longest run above the baseline as it was: what shot noise alone leaves. */
  readonly noiseOnlySeconds: number
  readonly message: string
}

/**
 * Puts an on-time into a record and reports how much of it the baseline leaves: does it eat an event of this length here?
 *
 * Without a start the place is the middle of the longest stretch of usable bins below the threshold (the first of equals); an
 * event longer than that stretch reaches over both its ends, and one that would leave the record is moved inside. The trace given is
 * not touched.
 *
 * @param choices the choices the baseline was fitted with; excluded and not wholly exposed bins break runs
 * @returns plantedSeconds 0, and why, when there is nothing to plant: no signal, no off bin, or a length below half a bin
 */
export function plantEvent(
  trace: Trace,
  baseline: Baseline,
  choices: Recipe['baseline'],
  wish: PlantWish,
): PlantedEvent {
  const { binSeconds, startSeconds, counts } = trace
  const threshold = wish.thresholdAboveBaseline
  const unusable = unusableBins(trace, choices.excludedSeconds)
  const before = baselineCounts(baseline, trace)
  const length = Math.min(Math.round(wish.durationSeconds / binSeconds), counts.length)
  if (!(length >= 1))
    return nothingPlanted(
      `An event must be at least one bin (${Number(binSeconds.toPrecision(3))} s) long. Enter a longer one.`,
    )
  if (!(baseline.onAboveCps > 0)) return nothingPlanted('This record has no on level to plant an event with.')
  const wanted =
    wish.atSeconds === null
      ? middleOfLongestOff(counts, before, unusable, threshold, length)
      : Math.round((wish.atSeconds - startSeconds) / binSeconds)
  if (wanted === null)
    return nothingPlanted('No usable bin lies below the threshold. Give a start, or raise the threshold.')
  const first = Math.min(Math.max(wanted, 0), counts.length - length)

  const planted = plantInto(trace, before, first, length, baseline.onAboveCps * binSeconds, wish.random)
  const after = baselineCounts(fitBaseline(planted, choices, unusable), planted)
  const run = (levels: Float64Array): number =>
    longestRun(planted.counts, levels, unusable, threshold, first, first + length) * binSeconds
  const start = startSeconds + first * binSeconds
  const plantedSeconds = length * binSeconds
  const survivingSeconds = run(after)
  const noiseOnlySeconds = run(before)
  return {
    startSeconds: start,
    plantedSeconds,
    survivingSeconds,
    survivingShare: survivingSeconds / plantedSeconds,
    noiseOnlySeconds,
    message: sentence(start, plantedSeconds, survivingSeconds, noiseOnlySeconds),
  }
}

/**
 * A copy of the trace in which `length` bins from `first` hold Poisson counts of mean baseline + signal; all others are as they were.
 *
 * @param baseline counts per bin, one entry a bin; signal in counts per bin
 */
export function plantInto(
  trace: Trace,
  baseline: Float64Array,
  first: number,
  length: number,
  signal: number,
  random: RandomSource,
): Trace {
  const counts = new Uint32Array(trace.counts)
  for (let i = first; i < first + length; i++) counts[i] = poissonVariate(random, baseline[i] + signal)
  return { ...trace, counts: fittingCounts(counts) }
}

function nothingPlanted(message: string): PlantedEvent {
  return {
    startSeconds: 0,
    plantedSeconds: 0,
    survivingSeconds: 0,
    survivingShare: 0,
    noiseOnlySeconds: 0,
    message: `Nothing was planted. ${message}`,
  }
}

/** First bin of an event centred in the longest run of usable off bins; null when there is no such bin. */
function middleOfLongestOff(
  counts: Uint16Array | Uint32Array,
  baseline: Float64Array,
  unusable: Uint8Array | null,
  threshold: number,
  length: number,
): number | null {
  let longest = 0
  let longestEnd = 0
  let run = 0
  for (let i = 0; i < counts.length; i++) {
    const off = counts[i] - baseline[i] < threshold && (unusable === null || unusable[i] === 0)
    run = off ? run + 1 : 0
    if (run > longest) {
      longest = run
      longestEnd = i + 1
    }
  }
  return longest === 0 ? null : Math.round(longestEnd - longest / 2 - length / 2)
}

function longestRun(
  counts: Uint16Array | Uint32Array,
  baseline: Float64Array,
  unusable: Uint8Array | null,
  threshold: number,
  from: number,
  to: number,
): number {
  let longest = 0
  let run = 0
  for (let i = from; i < to; i++) {
    const on = counts[i] - baseline[i] >= threshold && (unusable === null || unusable[i] === 0)
    run = on ? run + 1 : 0
    if (run > longest) longest = run
  }
  return longest
}

function sentence(start: number, planted: number, surviving: number, noiseOnly: number): string {
  const seconds = (value: number): string => `${Number(value.toPrecision(3))} s`
  const what = `Of an on-time of ${seconds(planted)} planted at ${seconds(start)}, ${seconds(surviving)} survive in one piece`
  if (surviving >= 0.95 * planted) return `${what}: the baseline does not eat it.`
  if (noiseOnly < 0.95 * planted && surviving >= 0.95 * noiseOnly)
    return `${what}; with the baseline left as it was, ${seconds(noiseOnly)}: it is split by shot noise at this threshold, not eaten.`
  return `${what}; with the baseline left as it was, ${seconds(noiseOnly)}: the baseline rises into it. Use a stiffer or a constant baseline.`
}
