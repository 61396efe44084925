import { createStore, type StoreApi } from 'zustand/vanilla'

/** A dwell pointed at: in the trace or as a column of durations in a plot. */
export interface Hover {
  readonly state: 0 | 1
  /** Range of durations, bins: [low, high). */
  readonly lowBins: number
  readonly highBins: number
  /** The dwell itself when one was pointed at in the trace, s. */
  readonly startSeconds: number | null
  readonly endSeconds: number | null
}

export type Theme = 'system' | 'light' | 'dark'

/** What is on screen but not saved with the session. */
export interface View {
  /** Threshold while it is dragged, counts; null when it is not. */
  readonly liveThreshold: number | null
  /** Shortest fitted dwell while its mark is dragged. */
  readonly liveShortest: { readonly state: 0 | 1; readonly bins: number } | null
  readonly hover: Hover | null
  readonly theme: Theme
  readonly helpEntry: string | null
  readonly helpOpen: boolean
}

export function viewStore(theme: Theme): StoreApi<View> {
  return createStore<View>(() => ({
    liveThreshold: null,
    liveShortest: null,
    hover: null,
    theme,
    helpEntry: null,
    helpOpen: false,
  }))
}
