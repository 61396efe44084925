import type { StoreApi } from 'zustand/vanilla'
import type { RowFits, ThresholdProduct, TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'
import { rowOf, thresholdOf } from '../../core/pipeline/study-thresholds.ts'
import type { Recipe } from '../../core/recipe/recipe.ts'
import type { EmitterEntry } from '../../session/schema/session.ts'
import type { AnalysisRequest, Outcome } from '../../worker/protocol/service.ts'
import type { Choices } from '../choices/choices-store.ts'
import { currentEmitter, recipeOf } from '../choices/session-changes.ts'
import type { View } from '../view/view-store.ts'
import { NO_RESULTS, type Results, shown } from './results-store.ts'

/** The calls the conductor makes; in each, a newer one stops the one before. */
export interface ConductorCalls {
  trace(request: AnalysisRequest): Promise<Outcome<TraceProduct>>
  thresholds(request: AnalysisRequest): Promise<Outcome<ThresholdProduct>>
  rowFits(request: AnalysisRequest, rows: readonly number[]): Promise<Outcome<readonly RowFits[]>>
  settle(request: AnalysisRequest, threshold: number): Promise<Outcome<BenchNumbers>>
  rawFile(emitter: EmitterEntry): Promise<Blob | null>
}

export interface Conductor {
  /** Brings everything up to date with the choices; called on every change of them. */
  refresh(): void
  /** The threshold in force, counts; null before the table has come. */
  threshold(): number | null
  request(): Promise<AnalysisRequest | null>
  /** Computes everything once more, e.g. after a failure. */
  again(): void
}

const SETTLE_AFTER_MILLISECONDS = 180
/** Rows fitted in one call: short enough that a newer wish is heard soon. */
const CHUNK_MILLISECONDS = 45
const MOST_ROWS_PER_CALL = 24

interface Timer {
  milliseconds(): number
  after(milliseconds: number, callback: () => void): () => void
}

/**
 * Keeps results in step with choices.
 *
 *   choices change -> trace (if bins or baseline changed) -> thresholds -> rows of fits, nearest to the threshold first
 *                                                                      -> settled numbers, a moment after the last change
 *
 * Each stage has a key made of the choices it depends on; a stage whose key is unchanged is not computed again, and
 * what arrives for an old key is dropped.
 */
export function conductor(
  choices: StoreApi<Choices>,
  view: StoreApi<View>,
  results: StoreApi<Results>,
  calls: ConductorCalls,
  timer: Timer,
): Conductor {
  let traceKey = ''
  let thresholdsKey = ''
  let rowsKey = ''
  let settledKey = ''
  let rowsRunning = false
  let cancelSettle = (): void => {}
  let millisecondsPerRow = 20

  const keysOf = (emitter: EmitterEntry, recipe: Recipe) => {
    const trace = JSON.stringify([emitter.id, emitter.origin, recipe.bin, recipe.baseline])
    const thresholds = trace + JSON.stringify([recipe.threshold, recipe.dwells])
    const rows = trace + JSON.stringify([recipe.dwells, recipe.fit])
    return { trace, thresholds, rows }
  }

  const now = (): { emitter: EmitterEntry; recipe: Recipe } | null => {
    const { session } = choices.getState()
    const emitter = currentEmitter(session)
    return emitter === null ? null : { emitter, recipe: recipeOf(session, emitter) }
  }

  const requestFor = async (emitter: EmitterEntry, recipe: Recipe): Promise<AnalysisRequest> => ({
    origin: emitter.origin,
    name: emitter.name,
    recipe,
    file: emitter.origin.kind === 'file' ? await calls.rawFile(emitter) : null,
  })

  const threshold = (): number | null => {
    const here = now()
    const product = shown(results.getState().thresholds)
    if (here === null || product === null) return null
    const { rule, handCounts } = here.recipe.threshold
    const wanted = rule === 'hand' && handCounts !== null ? handCounts : product.byRule.counts
    // What is in force is a row of the table: a number set by hand beyond its ends, or between its steps, is not.
    return thresholdOf(product.table, rowOf(product.table, wanted))
  }

  const runTrace = async (emitter: EmitterEntry, recipe: Recipe, key: string): Promise<void> => {
    const before = results.getState()
    const last = before.emitterId === emitter.id ? shown(before.trace) : null
    results.setState({ ...NO_RESULTS, emitterId: emitter.id, trace: { status: 'running', last } })
    const outcome = await calls.trace(await requestFor(emitter, recipe))
    if (key !== traceKey || (!outcome.ok && outcome.stopped === true)) return
    if (!outcome.ok) {
      results.setState({ trace: { status: 'failed', sentence: outcome.sentence } })
      return
    }
    results.setState({ trace: { status: 'arrived', value: outcome.value } })
    refresh()
  }

  const runThresholds = async (emitter: EmitterEntry, recipe: Recipe, key: string): Promise<void> => {
    results.setState({ thresholds: { status: 'running', last: shown(results.getState().thresholds) } })
    const outcome = await calls.thresholds(await requestFor(emitter, recipe))
    if (key !== thresholdsKey || (!outcome.ok && outcome.stopped === true)) return
    results.setState({
      thresholds: outcome.ok
        ? { status: 'arrived', value: outcome.value }
        : { status: 'failed', sentence: outcome.sentence },
    })
    if (outcome.ok) refresh()
  }

  /** Rows still to fit, nearest to the threshold on screen first. */
  const nextRows = (product: ThresholdProduct): number[] => {
    const centre = rowOf(product.table, view.getState().liveThreshold ?? threshold() ?? 0)
    const { rows } = results.getState()
    const wanted: number[] = []
    const most = Math.max(
      1,
      Math.min(MOST_ROWS_PER_CALL, Math.round(CHUNK_MILLISECONDS / millisecondsPerRow)),
    )
    for (let away = 0; away < product.table.rows && wanted.length < most; away++) {
      for (const row of away === 0 ? [centre] : [centre - away, centre + away]) {
        if (row >= 0 && row < product.table.rows && !rows.has(row) && wanted.length < most) wanted.push(row)
      }
    }
    return wanted
  }

  const runRows = async (): Promise<void> => {
    if (rowsRunning) return
    rowsRunning = true
    try {
      for (;;) {
        const here = now()
        const product = shown(results.getState().thresholds)
        if (here === null || product === null || results.getState().thresholds.status !== 'arrived') return
        const rows = nextRows(product)
        if (rows.length === 0) return
        const key = rowsKey
        const began = timer.milliseconds()
        const outcome = await calls.rowFits(await requestFor(here.emitter, here.recipe), rows)
        if (key !== rowsKey) continue
        // Stopped though still wanted: nobody computes any more. The next change of choices asks again.
        if (!outcome.ok) return
        millisecondsPerRow = 0.5 * millisecondsPerRow + (0.5 * (timer.milliseconds() - began)) / rows.length
        const next = new Map(results.getState().rows)
        for (const fits of outcome.value) next.set(fits.row, fits)
        results.setState({ rows: next, rowsWithIntervals: next.size })
      }
    } finally {
      rowsRunning = false
    }
  }

  const runSettle = (emitter: EmitterEntry, recipe: Recipe, key: string, at: number): void => {
    cancelSettle()
    results.setState({ settled: { status: 'running', last: shown(results.getState().settled) } })
    cancelSettle = timer.after(SETTLE_AFTER_MILLISECONDS, () => {
      void (async () => {
        const outcome = await calls.settle(await requestFor(emitter, recipe), at)
        if (key !== settledKey || (!outcome.ok && outcome.stopped === true)) return
        results.setState({
          settled: outcome.ok
            ? { status: 'arrived', value: outcome.value }
            : { status: 'failed', sentence: outcome.sentence },
        })
      })()
    })
  }

  const refresh = (): void => {
    const here = now()
    if (here === null) {
      traceKey = thresholdsKey = rowsKey = settledKey = ''
      if (results.getState() !== NO_RESULTS) results.setState(NO_RESULTS)
      return
    }
    const { emitter, recipe } = here
    const keys = keysOf(emitter, recipe)
    if (keys.trace !== traceKey) {
      traceKey = keys.trace
      thresholdsKey = rowsKey = settledKey = ''
      void runTrace(emitter, recipe, keys.trace)
      return
    }
    if (results.getState().trace.status !== 'arrived') return
    if (keys.thresholds !== thresholdsKey) {
      thresholdsKey = keys.thresholds
      void runThresholds(emitter, recipe, keys.thresholds)
      return
    }
    if (results.getState().thresholds.status !== 'arrived') return
    if (keys.rows !== rowsKey) {
      rowsKey = keys.rows
      // Settled numbers of other choices must not pass for present ones, even at the same threshold.
      results.setState({ rows: new Map(), rowsWithIntervals: 0, goodness: {}, settled: { status: 'none' } })
    }
    void runRows()
    const at = threshold()
    if (at === null) return
    const key = `${keys.rows}@${at}`
    if (key !== settledKey) {
      settledKey = key
      results.setState({ goodness: {} })
      runSettle(emitter, recipe, key, at)
    }
  }

  return {
    refresh,
    threshold,
    again() {
      traceKey = ''
      refresh()
    },
    async request() {
      const here = now()
      return here === null ? null : requestFor(here.emitter, here.recipe)
    },
  }
}
