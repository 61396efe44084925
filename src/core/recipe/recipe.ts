import type { LawName } from '../laws/law.ts'

/** All analysis choices as one JSON value. Defaults, ranges and units stand in `choices.ts`; this is the shape only. */
export interface Recipe {
  readonly version: 1
  readonly bin: {
    /** Bin width for arrival times, s. Traces are grouped to the nearest whole multiple of their own bin. */
    readonly seconds: number
  }
  readonly baseline: {
    readonly method: 'automatic' | 'constant' | 'drifting'
    /** Time over which the baseline may bend, s. */
    readonly stiffnessSeconds: number
    /** Spans [start, end) left out of everything, s. */
    readonly excludedSeconds: readonly (readonly [number, number])[]
  }
  readonly threshold: {
    readonly rule: 'half' | 'crossing' | 'sigma' | 'least-variance' | 'hand'
    /** For `sigma`: off level plus this many standard deviations. */
    readonly sigmas: number
    /** For `hand`: integer counts per bin at the mean baseline; null until set. */
    readonly handCounts: number | null
  }
  readonly dwells: {
    /** Which dwells are fitted: all, edges of gates ignored; or one gate class, cut at its edges. */
    readonly gate: 'all' | 'reference' | 'driven' | 'sham'
  }
  readonly fit: {
    readonly laws: readonly LawName[]
    /** Law whose line and numbers are shown; `best` is the one of greatest AICc weight. */
    readonly shown: { readonly on: LawName | 'best'; readonly off: LawName | 'best' }
    readonly shortest: {
      /** `largest`: the largest of 3 bins, the spurious-safe and the sub-bin-safe number. `hand`: as given. */
      readonly rule: 'largest' | 'hand'
      /** Sub-bin-safe number of bins; 1 to leave it out. */
      readonly subBinSafeBins: number
      readonly handBins: { readonly on: number | null; readonly off: number | null }
    }
    /** Confidence of all intervals, 0..1. */
    readonly confidence: number
  }
  readonly goodness: {
    /** Parametric bootstrap samples. */
    readonly samples: number
    readonly seed: number
  }
}
