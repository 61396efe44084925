import type { AppModel } from '../bridge/app-model.ts'
import type { Hover } from '../../state/view/view-store.ts'
import { benchNow, type BenchNow } from './bench-state.ts'

/** Longest walk to either side when looking for the ends of a dwell, bins; longer dwells are shown cut. */
const WALK_BINS = 20_000

/** Points at the dwell under a place of the trace (share of the visible window), or at none. */
export function pointAtTrace(app: AppModel, share: number | null): void {
  const now = benchNow(app)
  const hover = now === null || share === null ? null : dwellAt(now, share)
  const before = app.view.getState().hover
  if (before?.startSeconds === hover?.startSeconds && before?.state === hover?.state) return
  app.view.setState({ hover })
  app.loop.request('upper-live', 'dwells')
}

/** Visible bins beyond which dwells of a pointed-at duration are not looked for. */
const MOST_VISIBLE_BINS = 250_000
const MOST_SPANS = 400

/** Dwells in the visible window whose duration is pointed at in a plot, s; empty when too many bins are visible. */
export function hoveredSpans(
  { trace, threshold, window }: BenchNow,
  hover: Hover | null,
): [number, number][] {
  if (hover === null || threshold === null) return []
  if (hover.startSeconds !== null && hover.endSeconds !== null)
    return [[hover.startSeconds, hover.endSeconds]]
  const { values, offset, binSeconds, startSeconds } = trace.levelled
  const from = Math.max(0, Math.floor((window[0] - startSeconds) / binSeconds))
  const to = Math.min(values.length, Math.ceil((window[1] - startSeconds) / binSeconds))
  if (to - from > MOST_VISIBLE_BINS) return []
  const level = threshold - offset
  const spans: [number, number][] = []
  let start = from
  for (let i = from + 1; i <= to && spans.length < MOST_SPANS; i++) {
    const on = values[start] >= level
    if (i < to && values[i] >= level === on) continue
    const length = i - start
    if ((on ? 1 : 0) === hover.state && length >= hover.lowBins && length < hover.highBins) {
      spans.push([startSeconds + start * binSeconds, startSeconds + i * binSeconds])
    }
    start = i
  }
  return spans
}

function dwellAt({ trace, threshold, window }: BenchNow, share: number): Hover | null {
  if (threshold === null) return null
  const { values, offset, binSeconds, startSeconds } = trace.levelled
  const seconds = window[0] + share * (window[1] - window[0])
  const bin = Math.floor((seconds - startSeconds) / binSeconds)
  if (bin < 0 || bin >= values.length) return null
  const level = threshold - offset
  const state = values[bin] >= level ? 1 : 0
  const same = (i: number): boolean => (values[i] >= level ? 1 : 0) === state
  let from = bin
  let to = bin + 1
  const lowest = Math.max(0, bin - WALK_BINS)
  const highest = Math.min(values.length, bin + WALK_BINS)
  while (from > lowest && same(from - 1)) from--
  while (to < highest && same(to)) to++
  return {
    state,
    lowBins: to - from,
    highBins: to - from + 1,
    startSeconds: startSeconds + from * binSeconds,
    endSeconds: startSeconds + to * binSeconds,
  }
}
