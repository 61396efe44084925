import { baselineCounts } from '../baseline/baseline-at.ts'
import type { Baseline } from '../baseline/baseline.ts'
import { fitBaseline } from '../baseline/fit-baseline.ts'
import { unusableBins } from '../baseline/unusable-bins.ts'
import { binPhotons } from '../photons/bin-photons.ts'
import { gateCodes } from '../photons/gate-codes.ts'
import type { Gate } from '../photons/gate.ts'
import { groupBins } from '../photons/group-bins.ts'
import type { PhotonStream } from '../photons/photon-stream.ts'
import { buildPyramid } from '../photons/pyramid.ts'
import { suggestedBin } from '../photons/suggested-bin.ts'
import type { Trace } from '../photons/trace.ts'
import type { Recipe } from '../recipe/recipe.ts'
import { countHistogram } from '../states/count-histogram.ts'
import { levelTrace } from '../states/level-trace.ts'
import type { LevelledTrace } from '../states/levels.ts'
import type { TraceProduct } from './analysis-products.ts'

/** A record as a reader or the simulator hands it over. */
export interface RecordInHand {
  readonly record: PhotonStream | Trace
  readonly gate: Gate | null
}

/** A record at one bin width with its baseline: where every threshold starts from. */
export interface PreparedTrace {
  readonly trace: Trace
  readonly gate: Gate | null
  readonly gateCodes: Uint8Array | null
  readonly unusable: Uint8Array | null
  readonly baseline: Baseline
  readonly levelled: LevelledTrace
}

/**
 * The trace of a record at the recipe's bin width. A record that came as a trace is grouped to the nearest
 * whole multiple of its own bin, never below one.
 */
export function traceOf(record: PhotonStream | Trace, binSeconds: number): Trace {
  if (record.kind === 'photons') return binPhotons(record, binSeconds)
  const factor = Math.max(1, Math.round(binSeconds / record.binSeconds))
  return factor === 1 ? record : groupBins(record, factor)
}

/** Bin, find unusable bins, fit the baseline, level. Cost grows with photons (or bins); belongs in a worker. */
export function prepareTrace(inHand: RecordInHand, recipe: Recipe, binned?: Trace): PreparedTrace {
  const trace = binned ?? traceOf(inHand.record, recipe.bin.seconds)
  const unusable = unusableBins(trace, recipe.baseline.excludedSeconds)
  const baseline = fitBaseline(trace, recipe.baseline, unusable)
  const levelled = levelTrace(trace, baseline, unusable)
  const codes =
    inHand.gate === null
      ? null
      : gateCodes(inHand.gate, {
          binSeconds: trace.binSeconds,
          startSeconds: trace.startSeconds,
          bins: trace.counts.length,
        })
  return { trace, gate: inHand.gate, gateCodes: codes, unusable, baseline, levelled }
}

/** Mean baseline in counts per bin at every bin, for error rates under a moving baseline. */
export function baselinePerBin(prepared: PreparedTrace): Float64Array {
  return baselineCounts(prepared.baseline, prepared.trace)
}

/** What the Bench needs to draw the record. */
export function traceProductOf(prepared: PreparedTrace): TraceProduct {
  const { trace, levelled, baseline, gate, unusable } = prepared
  let photons = 0
  for (let i = 0; i < trace.counts.length; i++) photons += trace.counts[i]
  let usableBins = trace.counts.length
  if (unusable !== null) for (let i = 0; i < unusable.length; i++) usableBins -= unusable[i]
  const durationSeconds = trace.counts.length * trace.binSeconds
  return {
    levelled,
    bins: trace.counts.length,
    usableBins,
    photons,
    durationSeconds,
    dropped: trace.dropped,
    gate,
    baseline,
    histogram: countHistogram(levelled),
    pyramid: buildPyramid(levelled.values),
    suggestedBin: suggestedBin(
      levelled.offCounts / levelled.binSeconds,
      levelled.onCounts / levelled.binSeconds,
      durationSeconds,
    ),
  }
}
