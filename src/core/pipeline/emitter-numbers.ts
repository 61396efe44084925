import type { Baseline } from '../baseline/baseline.ts'
import type { Estimate } from '../fits/fit.ts'
import type { StateFits } from './analysis-products.ts'
import type { BleachCheck } from './bleach-check.ts'
import type { LawComparison } from './law-comparisons.ts'
import type { MixedBins } from './mixed-bins.ts'
import type { ScanRow } from './scan-state.ts'
import type { StateDwells } from './state-dwells.ts'

/** Something a careful reader would want to know about this emitter. Flags inform; they never decide. */
export interface Flag {
  /** Stable key, as in the result document. */
  readonly key: string
  /** What was seen, why it matters, what to do; with the value that triggered it. */
  readonly sentence: string
}

/** Everything known of one state (off or on) at the settled threshold. */
export interface StateNumbers {
  readonly dwells: StateDwells
  readonly fits: StateFits
  readonly comparisons: readonly LawComparison[]
  /** Shown law's alpha (or its first parameter) against the shortest fitted dwell. */
  readonly scan: readonly ScanRow[]
}

/** The settled numbers of one emitter at one threshold, from the exact list of dwells. */
export interface BenchNumbers {
  /** Counts per bin on the levelled axis. */
  readonly threshold: number
  readonly countsAboveBaseline: number
  readonly falseOnPerBin: number
  readonly falseOffPerBin: number
  /** Seconds; null where threshold errors make no cutoff worth naming (longer than 10^6 records). */
  readonly artefactCutoffSeconds: { readonly on: number | null; readonly off: number | null }
  readonly levels: { readonly offCps: number; readonly onCps: number }
  readonly baseline: Pick<
    Baseline,
    'method' | 'supportedShare' | 'longestUnsupportedSeconds' | 'status' | 'message'
  >
  readonly onFraction: Estimate
  readonly mixedBins: MixedBins
  readonly bleach: BleachCheck | null
  /** [off, on] */
  readonly states: readonly [StateNumbers, StateNumbers]
  readonly flags: readonly Flag[]
}
