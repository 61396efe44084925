import type { RandomSource } from '../numeric/random-source.ts'
import { poissonVariate } from '../numeric/variates.ts'
import type { Trace } from '../photons/trace.ts'
import type { Recipe } from '../recipe/recipe.ts'
import type { Baseline } from './baseline.ts'
import { baselineCounts } from './baseline-at.ts'
import { fitBaseline } from './fit-baseline.ts'

export interface PlantWish {
  /** Start of the planted on-time, s; null for the middle of the longest off stretch. */
  readonly atSeconds: number | null
  readonly durationSeconds: number
  /** Threshold, counts per bin above the baseline: a bin is on when counts - baseline reaches it. */
  readonly countsAboveBaseline: number
}

/** What became of a synthetic on-time after the baseline was fitted again with unchanged choices. */
export interface PlantedEvent {
  readonly startSeconds: number
  /** Whole bins, so at most half a bin from the wish; shorter when the record ends first. */
  readonly plantedSeconds: number
  /** Longest run of planted bins called on above the new baseline. */
  readonly survivingSeconds: number
  /** Of the planted length, 0..1. */
  readonly survivingShare: number
  /** Longest run above the baseline as it was: what shot noise alone leaves. */
  readonly noiseOnlySeconds: number
  /** The record with the planted counts, and the baseline fitted to it, for drawing. */
  readonly trace: Trace
  readonly baseline: Baseline
  readonly message: string
}

/**
 * Puts an on-time into a record and reports how much of it the baseline leaves: does it eat an event of this length here?
 *
 * The counts of the planted bins are replaced by Poisson counts of mean (b + A) x bin, b the baseline as fitted and A its signal;
 * nothing else changes, and the trace given is not touched. Without a start the place is the middle of the longest
 * stretch of usable bins below the threshold (the first of equals); an event longer than that stretch reaches over both its ends.
 *
 * @param choices the choices the baseline was fitted with
 * @param unusable 1 at bins left out, or null; they break runs
 * @returns null when there is nothing to plant: no usable off bin to plant in, no signal, or a length below half a bin
 */
export function plantEvent(
  trace: Trace,
  baseline: Baseline,
  choices: Recipe['baseline'],
  unusable: Uint8Array | null,
  wish: PlantWish,
  random: RandomSource,
): PlantedEvent | null {
  const { binSeconds, startSeconds, counts } = trace
  const before = baselineCounts(baseline, trace)
  const length = Math.min(Math.round(wish.durationSeconds / binSeconds), counts.length)
  if (!(length >= 1 && baseline.onAboveCps > 0)) return null
  const wanted =
    wish.atSeconds === null
      ? middleOfLongestOff(counts, before, unusable, wish.countsAboveBaseline, length)
      : Math.round((wish.atSeconds - startSeconds) / binSeconds)
  if (wanted === null || !Number.isFinite(wanted)) return null
  const first = Math.min(Math.max(wanted, 0), counts.length - length)

  const planted = new Uint32Array(counts)
  const signal = baseline.onAboveCps * binSeconds
  for (let i = first; i < first + length; i++) planted[i] = poissonVariate(random, before[i] + signal)
  const plantedTrace: Trace = { ...trace, counts: planted }
  const fitted = fitBaseline(plantedTrace, choices, unusable)
  const after = baselineCounts(fitted, plantedTrace)
  const run = (levels: Float64Array): number =>
    longestRun(planted, levels, unusable, wish.countsAboveBaseline, first, first + length) * binSeconds
  const plantedSeconds = length * binSeconds
  const survivingSeconds = run(after)
  const noiseOnlySeconds = run(before)
  return {
    startSeconds: startSeconds + first * binSeconds,
    plantedSeconds,
    survivingSeconds,
    survivingShare: survivingSeconds / plantedSeconds,
    noiseOnlySeconds,
    trace: plantedTrace,
    baseline: fitted,
    message: sentence(startSeconds + first * binSeconds, plantedSeconds, survivingSeconds, noiseOnlySeconds),
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
  counts: Uint32Array,
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
