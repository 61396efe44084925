import type { Estimate, Fit } from '../fits/fit.ts'
import type { LawName } from '../laws/law.ts'
import type { Recipe } from '../recipe/recipe.ts'
import { recipeHash } from '../recipe/recipe-hash.ts'
import type { ThresholdProduct, TraceProduct } from './analysis-products.ts'
import type { BenchNumbers, StateNumbers } from './emitter-numbers.ts'
import { rowOf, thresholdOf } from './study-thresholds.ts'

/** Estimate as it stands in the document: null where it does not exist. */
type DocumentEstimate = Pick<Estimate, 'estimate' | 'low' | 'high'>

interface DocumentFit {
  readonly law: LawName
  readonly parameters: Readonly<Record<string, DocumentEstimate>>
  readonly logLikelihood: number | null
  readonly aicc: number | null
  readonly weight: number | null
  readonly status: string
  readonly message: string
}

interface DocumentDwells {
  readonly complete: number
  readonly censored: number
  readonly startUnseen: number
  readonly longestSeconds: number | null
  readonly shortestFittedSeconds: number | null
  readonly preferredLaw: LawName | null
  readonly fits: readonly DocumentFit[]
}

/** One emitter of the result document (JSON). Field names are fixed: other programs read them. */
export interface EmitterResult {
  readonly name: string
  readonly source: { readonly file: string; readonly sha256: string | null; readonly column: number | null }
  readonly record: {
    readonly durationSeconds: number
    readonly binSeconds: number
    readonly bins: number
    readonly usableBins: number
    readonly photons: number
    readonly dropped: Readonly<Record<string, number>>
  }
  readonly levels: {
    readonly off: { readonly countsPerSecond: number }
    readonly on: { readonly countsPerSecond: number }
  }
  readonly baseline: {
    readonly method: string
    readonly supportedShare: number
    readonly longestUnsupportedSeconds: number
  }
  readonly threshold: {
    readonly rule: string
    readonly countsPerBin: number
    readonly countsAboveBaseline: number
    readonly falseOnPerBin: number
    readonly falseOffPerBin: number
    readonly artefactCutoffSeconds: { readonly on: number | null; readonly off: number | null }
  }
  readonly onFraction: DocumentEstimate
  readonly dwells: { readonly on: DocumentDwells; readonly off: DocumentDwells }
  readonly flags: readonly string[]
}

/** The whole document. `alpha` is the exponent of the density; the law's name tells the form of the cutoff. */
export interface ResultDocument {
  readonly heliograph: { readonly version: string; readonly recipeHash: string; readonly recipe: Recipe }
  readonly emitters: readonly EmitterResult[]
}

function plain({ estimate, low, high }: Estimate): DocumentEstimate {
  return { estimate, low, high }
}

function documentFit(fit: Fit): DocumentFit {
  return {
    law: fit.law,
    parameters: Object.fromEntries(
      Object.entries(fit.parameters).map(([name, value]) => [name, plain(value)]),
    ),
    logLikelihood: fit.logLikelihood,
    aicc: fit.aicc,
    weight: fit.weight,
    status: fit.status,
    message: fit.message,
  }
}

function documentDwells({ dwells, fits }: StateNumbers, binSeconds: number): DocumentDwells {
  const best = fits.fits.reduce<Fit | null>(
    (top, fit) => (fit.weight !== null && fit.weight > (top?.weight ?? -1) ? fit : top),
    null,
  )
  return {
    complete: dwells.complete,
    censored: dwells.censored,
    startUnseen: dwells.startUnseen,
    longestSeconds: dwells.longestSeconds,
    shortestFittedSeconds: fits.fits.length === 0 ? null : fits.shortest.bins * binSeconds,
    preferredLaw: best?.law ?? null,
    fits: fits.fits.map(documentFit),
  }
}

/** One emitter's entry from its settled numbers. */
export function emitterResult(
  name: string,
  source: EmitterResult['source'],
  trace: TraceProduct,
  product: Pick<ThresholdProduct, 'byRule' | 'table'>,
  numbers: BenchNumbers,
): EmitterResult {
  const { binSeconds } = trace.levelled
  // Where the table has steps of several counts, numbers are those of the row nearest to the rule's threshold.
  const ruled = thresholdOf(product.table, rowOf(product.table, product.byRule.counts))
  return {
    name,
    source,
    record: {
      durationSeconds: trace.durationSeconds,
      binSeconds,
      bins: trace.bins,
      usableBins: trace.usableBins,
      photons: trace.photons,
      dropped: trace.dropped,
    },
    levels: {
      off: { countsPerSecond: numbers.levels.offCps },
      on: { countsPerSecond: numbers.levels.onCps },
    },
    baseline: {
      method: numbers.baseline.method,
      supportedShare: numbers.baseline.supportedShare,
      longestUnsupportedSeconds: numbers.baseline.longestUnsupportedSeconds,
    },
    threshold: {
      rule: ruled === numbers.threshold ? product.byRule.rule : 'hand',
      countsPerBin: numbers.threshold,
      countsAboveBaseline: numbers.countsAboveBaseline,
      falseOnPerBin: numbers.falseOnPerBin,
      falseOffPerBin: numbers.falseOffPerBin,
      artefactCutoffSeconds: numbers.artefactCutoffSeconds,
    },
    onFraction: plain(numbers.onFraction),
    dwells: {
      on: documentDwells(numbers.states[1], binSeconds),
      off: documentDwells(numbers.states[0], binSeconds),
    },
    flags: numbers.flags.map((flag) => flag.key),
  }
}

/** The document of a run. */
export function resultDocument(
  version: string,
  recipe: Recipe,
  emitters: readonly EmitterResult[],
): ResultDocument {
  return { heliograph: { version, recipeHash: recipeHash(recipe), recipe }, emitters }
}
