import { createStore, type StoreApi } from 'zustand/vanilla'
import type { Goodness } from '../../core/fits/goodness-of-fit.ts'
import type { RowFits, ThresholdProduct, TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'

/** Something computed elsewhere: not there, on its way, there, out of date, or failed with a sentence. */
export type Arrival<T> =
  | { readonly status: 'none' }
  | { readonly status: 'running'; readonly last: T | null }
  | { readonly status: 'arrived'; readonly value: T }
  | { readonly status: 'failed'; readonly sentence: string }

/** Results for the emitter on the bench. */
export interface Results {
  readonly emitterId: string | null
  readonly trace: Arrival<TraceProduct>
  readonly thresholds: Arrival<ThresholdProduct>
  /** Fits by row of the threshold table; the map is replaced when rows arrive. */
  readonly rows: ReadonlyMap<number, RowFits>
  /** Rows whose shown law has its intervals. */
  readonly rowsWithIntervals: number
  readonly settled: Arrival<BenchNumbers>
  readonly goodness: Readonly<Record<string, Arrival<Goodness>>>
  readonly goodnessProgress: number
}

export const NO_RESULTS: Results = {
  emitterId: null,
  trace: { status: 'none' },
  thresholds: { status: 'none' },
  rows: new Map(),
  rowsWithIntervals: 0,
  settled: { status: 'none' },
  goodness: {},
  goodnessProgress: 0,
}

export function resultsStore(): StoreApi<Results> {
  return createStore<Results>(() => NO_RESULTS)
}

/** The value to show: the one that arrived, or the last one while a newer is on its way. */
export function shown<T>(arrival: Arrival<T>): T | null {
  if (arrival.status === 'arrived') return arrival.value
  return arrival.status === 'running' ? arrival.last : null
}
