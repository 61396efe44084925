import type { DwellSample } from '../../core/dwells/dwell-sample.ts'
import type { Fit } from '../../core/fits/fit.ts'
import type { GoodnessSlice } from '../../core/fits/goodness-of-fit.ts'
import type { RowFits, ThresholdProduct, TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'
import type { EmitterResult } from '../../core/pipeline/result-document.ts'
import type { ImportAnswer } from '../../core/read/import-answer.ts'
import type { Preview } from '../../core/read/import-preview.ts'
import type { Recipe } from '../../core/recipe/recipe.ts'
import type { RecordOrigin } from '../../session/schema/record-origin.ts'

/** Expected failures are data; a thrown error in the worker means a defect. */
export type Outcome<T> =
  | { readonly ok: true; readonly value: T }
  | { readonly ok: false; readonly sentence: string; readonly stopped?: boolean }

/** One record found in a file. */
export interface OpenedRecord {
  readonly name: string
  readonly index: number
  readonly column: number | null
  readonly kind: 'photons' | 'trace'
  readonly photons: number
  readonly durationSeconds: number
}

export interface OpenedFile {
  readonly sha256: string
  readonly sizeBytes: number
  readonly records: readonly OpenedRecord[]
  readonly notes: readonly string[]
}

/** A record and the choices under which it is analysed. `file` is needed when the worker has not decoded it yet. */
export interface AnalysisRequest {
  readonly origin: RecordOrigin
  readonly name: string
  readonly recipe: Recipe
  readonly file: Blob | null
}

export type ProgressCallback = (fraction: number) => void

/** What the worker offers. Long calls stop at the next step after `stop(job)`. */
export interface AnalysisService {
  previewFile(file: Blob, name: string): Promise<Outcome<Preview>>
  openFile(
    job: number,
    file: Blob,
    name: string,
    answer: ImportAnswer,
    onProgress: ProgressCallback,
  ): Promise<Outcome<OpenedFile>>
  /** Bin, baseline, pyramid, histogram. */
  trace(job: number, request: AnalysisRequest): Promise<Outcome<TraceProduct>>
  /** All thresholds. Uses the same memo as `trace`. */
  thresholds(job: number, request: AnalysisRequest): Promise<Outcome<ThresholdProduct>>
  /** Fits of the given rows; without intervals for all laws when `intervals` is false. */
  rowFits(
    job: number,
    request: AnalysisRequest,
    rows: readonly number[],
    intervals: boolean,
  ): Promise<Outcome<readonly RowFits[]>>
  /** The settled numbers at one threshold from the exact list of dwells. */
  settle(job: number, request: AnalysisRequest, threshold: number): Promise<Outcome<BenchNumbers>>
  plantEvent(
    job: number,
    request: AnalysisRequest,
    threshold: number,
    atSeconds: number | null,
    durationSeconds: number,
    seed: string,
  ): Promise<Outcome<PlantReport>>
  /** What a parametric bootstrap needs; slices of it run in any worker. */
  goodnessTask(job: number, request: GoodnessRequest): Promise<Outcome<GoodnessTask>>
  goodnessSlice(task: GoodnessTask, from: number, to: number): Promise<GoodnessSlice>
  dwellsCsv(job: number, request: AnalysisRequest, threshold: number): Promise<Outcome<string>>
  resultDocument(job: number, request: AnalysisRequest, threshold: number): Promise<Outcome<EmitterResult>>
  stop(job: number): void
  /** Takes and keeps a lock, so that the page learns of this worker's death by getting it. */
  holdLock(name: string): Promise<boolean>
}

export interface PlantReport {
  readonly startSeconds: number
  readonly plantedSeconds: number
  readonly survivingSeconds: number
  readonly survivingShare: number
  readonly message: string
}

export interface GoodnessRequest {
  readonly analysis: AnalysisRequest
  readonly threshold: number
  readonly state: 0 | 1
  readonly law: string
}

/** The data of one goodness-of-fit test. */
export interface GoodnessTask {
  readonly sample: DwellSample
  readonly fit: Fit
  /** Distance of the observed dwells from the fit. */
  readonly distance: number
  readonly seed: number
  readonly samples: number
}
