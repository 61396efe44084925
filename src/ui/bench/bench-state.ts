import type { ThresholdProduct, TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'
import { rowOf, thresholdOf } from '../../core/pipeline/study-thresholds.ts'
import type { EmitterEntry } from '../../session/schema/session.ts'
import { currentEmitter } from '../../state/choices/session-changes.ts'
import { shown } from '../../state/results/results-store.ts'
import type { AppModel } from '../bridge/app-model.ts'

/** What painters need of the present moment; read from the stores, nothing is kept. */
export interface BenchNow {
  readonly emitter: EmitterEntry
  readonly trace: TraceProduct
  readonly product: ThresholdProduct | null
  /** Threshold on screen: the dragged one, or the one in force; on the table's grid. */
  readonly threshold: number | null
  readonly settled: BenchNumbers | null
  readonly record: readonly [number, number]
  readonly window: readonly [number, number]
}

export function benchNow(app: AppModel): BenchNow | null {
  const { session } = app.choices.store.getState()
  const emitter = currentEmitter(session)
  const results = app.results.getState()
  const trace = shown(results.trace)
  if (emitter === null || trace === null || results.emitterId !== emitter.id) return null
  const product = shown(results.thresholds)
  const { startSeconds, binSeconds } = trace.levelled
  const record = [startSeconds, startSeconds + trace.bins * binSeconds] as const
  const wanted = app.view.getState().liveThreshold ?? app.conductor.threshold()
  return {
    emitter,
    trace,
    product,
    threshold:
      wanted === null || product === null ? null : thresholdOf(product.table, rowOf(product.table, wanted)),
    settled: shown(results.settled),
    record,
    window: session.view.windows[emitter.id] ?? record,
  }
}
