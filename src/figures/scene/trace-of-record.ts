import { baselineBandCps, baselineCps } from '../../core/baseline/baseline-at.ts'
import type { Gate, GateClass } from '../../core/photons/gate.ts'
import { envelope } from '../../core/photons/pyramid.ts'
import type { TraceProduct } from '../../core/pipeline/analysis-products.ts'
import { roundTo, siDuration } from '../../core/numeric/units.ts'
import type { Frame, Mark, Panel } from './scene.ts'
import { thresholdMarks, tracePanel } from './trace-panel.ts'

/** One column per device pixel: what a trace painter needs, kept between frames. */
export interface TraceColumns {
  readonly columns: number
  /** Levelled values, lowest and highest per column. */
  readonly lows: Float32Array
  readonly highs: Float32Array
  /** The same at the counts that were recorded: the baseline's departure from its mean added. */
  readonly drawnLows: Float32Array
  readonly drawnHighs: Float32Array
  /** Departure of the baseline from its mean at column centres, counts per bin. */
  readonly shift: Float32Array
  readonly states: Uint8Array
}

export function traceColumns(columns: number): TraceColumns {
  const floats = (): Float32Array => new Float32Array(columns)
  return {
    columns,
    lows: floats(),
    highs: floats(),
    drawnLows: floats(),
    drawnHighs: floats(),
    shift: floats(),
    states: new Uint8Array(columns),
  }
}

/** Fills the columns for a window of time; cost bounded by the number of columns. */
export function fillColumns(
  into: TraceColumns,
  product: TraceProduct,
  window: readonly [number, number],
): void {
  const { levelled, pyramid, baseline } = product
  const { binSeconds, startSeconds, offset, offCounts } = levelled
  const from = (window[0] - startSeconds) / binSeconds
  const to = (window[1] - startSeconds) / binSeconds
  envelope(pyramid, levelled.values, from, to, into.columns, into.lows, into.highs)
  const moving = baseline.method === 'drifting'
  for (let column = 0; column < into.columns; column++) {
    into.lows[column] += offset
    into.highs[column] += offset
    let shift = 0
    if (moving) {
      const seconds = window[0] + ((column + 0.5) / into.columns) * (window[1] - window[0])
      shift = baselineCps(baseline, seconds) * binSeconds - offCounts
    }
    into.shift[column] = shift
    into.drawnLows[column] = into.lows[column] + shift
    into.drawnHighs[column] = into.highs[column] + shift
  }
}

/** States of the columns at a threshold: 0 off, 1 on, 2 both in one column, 255 nothing recorded. */
export function fillStates(into: TraceColumns, threshold: number): void {
  for (let column = 0; column < into.columns; column++) {
    const low = into.lows[column]
    into.states[column] = Number.isNaN(low)
      ? 255
      : low >= threshold
        ? 1
        : into.highs[column] < threshold
          ? 0
          : 2
  }
}

/** First and last dwell of the record are cut by it: their columns, where visible, become hollow. */
function markCut(
  into: TraceColumns,
  { levelled, bins }: TraceProduct,
  window: readonly [number, number],
): void {
  const { states, columns } = into
  const end = levelled.startSeconds + bins * levelled.binSeconds
  if (window[0] <= levelled.startSeconds) {
    const state = states[0]
    for (let i = 0; i < columns && states[i] === state && state <= 1; i++) states[i] = 3 + state
  }
  if (window[1] >= end - 1e-9) {
    const state = states[columns - 1]
    for (let i = columns - 1; i >= 0 && states[i] === state && state <= 1; i--) states[i] = 3 + state
  }
}

/** Count axis of a record: room above the highest bin, 0 at the bottom. */
export function countsDomain({ levelled }: TraceProduct): [number, number] {
  return [Math.min(0, levelled.offset), Math.max(5, levelled.highest * 1.04 + 1)]
}

const CURVE_POINTS = 240

/** Baseline, band and departure from the mean over a window, counts per bin. */
export function baselineCurve(product: TraceProduct, window: readonly [number, number]) {
  const { levelled, baseline } = product
  const points = baseline.method === 'constant' ? 2 : CURVE_POINTS
  const seconds = new Float64Array(points)
  const counts = new Float64Array(points)
  const low = new Float64Array(points)
  const high = new Float64Array(points)
  for (let i = 0; i < points; i++) {
    const at = window[0] + (i / (points - 1)) * (window[1] - window[0])
    const band = baselineBandCps(baseline, at)
    seconds[i] = at
    counts[i] = baselineCps(baseline, at) * levelled.binSeconds
    low[i] = band.low * levelled.binSeconds
    high[i] = Math.min(band.high * levelled.binSeconds, 4 * levelled.highest + 10)
  }
  return { seconds, counts, low, high }
}

/** Stretches of at least two knots without support, s. */
export function unsupportedSpans({ baseline }: TraceProduct): [number, number][] {
  const spans: [number, number][] = []
  if (baseline.method === 'constant') return spans
  const { supportBins, firstKnotSeconds, knotSeconds } = baseline
  let from = -1
  for (let knot = 0; knot <= supportBins.length; knot++) {
    const bare = knot < supportBins.length && supportBins[knot] < 5
    if (bare && from < 0) from = knot
    if (!bare && from >= 0) {
      if (knot - from >= 2) {
        spans.push([
          firstKnotSeconds + (from - 0.5) * knotSeconds,
          firstKnotSeconds + (knot - 0.5) * knotSeconds,
        ])
      }
      from = -1
    }
  }
  return spans
}

/** Windows of one class that reach into what is shown, s. */
function windowsOf(gate: Gate | null, wanted: GateClass, [from, to]: readonly [number, number]) {
  const spans: [number, number][] = []
  for (const { gateClass, startSeconds, endSeconds } of gate?.windows ?? []) {
    if (gateClass === wanted && endSeconds > from && startSeconds < to) spans.push([startSeconds, endSeconds])
  }
  return spans
}

export interface RecordPanelOptions {
  readonly frame: Frame
  readonly window: readonly [number, number]
  readonly columns: TraceColumns
  readonly excluded: readonly (readonly [number, number])[]
  readonly letter: string
  /** Room for one number of the time axis, figure units. */
  readonly spacing: number
}

/** The trace panel of a record; `columns` must hold the window. */
export function recordPanel(product: TraceProduct, options: RecordPanelOptions): Panel {
  const { levelled, gate, baseline } = product
  const { columns, window } = options
  return tracePanel({
    frame: options.frame,
    window,
    counts: countsDomain(product),
    countsLabel: `counts / ${siDuration(levelled.binSeconds)}`,
    timeLabel: 'time  (s)',
    lows: columns.drawnLows,
    highs: columns.drawnHighs,
    columns: columns.columns,
    baseline: baselineCurve(product, window),
    driven: windowsOf(gate, 'driven', window),
    sham: windowsOf(gate, 'sham', window),
    unsupported: unsupportedSpans(product),
    excluded: options.excluded,
    letter: options.letter,
    timeTicks: Math.max(3, Math.round(options.frame.width / options.spacing)),
    description: `Trace from ${roundTo(window[0], null, 4)} to ${roundTo(window[1], null, 4)} s in bins of ${siDuration(levelled.binSeconds)}, ${baseline.method} baseline at ${roundTo(levelled.offCounts, null, 3)} counts per bin, on level ${roundTo(levelled.onCounts, null, 3)}.`,
  })
}

/** Threshold line (following the baseline) and states for the window held by the columns. */
export function recordThresholdMarks(
  product: TraceProduct,
  columns: TraceColumns,
  window: readonly [number, number],
  threshold: number,
  stripThickness: number,
): Mark[] {
  fillStates(columns, threshold)
  markCut(columns, product, window)
  const line =
    product.baseline.method === 'constant'
      ? null
      : (() => {
          const curve = baselineCurve(product, window)
          return {
            seconds: curve.seconds,
            counts: curve.counts.map((counts) => counts - product.levelled.offCounts + threshold),
          }
        })()
  return thresholdMarks(threshold, line, {
    states: columns.states,
    columns: columns.columns,
    thickness: stripThickness,
  })
}
