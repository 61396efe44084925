/** A visible stretch of a record, s. */
export interface TimeWindow {
  readonly from: number
  readonly to: number
}

/** Fewest bins shown. */
const FEWEST_BINS = 20

/** The window moved inside the record and never shorter than a few bins nor longer than the record. */
export function clipWindow(window: TimeWindow, record: TimeWindow, binSeconds: number): TimeWindow {
  const whole = record.to - record.from
  const span = Math.min(whole, Math.max(window.to - window.from, FEWEST_BINS * binSeconds))
  const middle = (window.from + window.to) / 2
  const from = Math.min(record.to - span, Math.max(record.from, middle - span / 2))
  return { from, to: from + span }
}

/** Zoomed by `factor` (> 1 shows more) about `at`, a share 0..1 of the window that stays in place. */
export function zoomWindow(window: TimeWindow, factor: number, at: number): TimeWindow {
  const span = window.to - window.from
  const anchor = window.from + at * span
  const next = span * factor
  return { from: anchor - at * next, to: anchor + (1 - at) * next }
}

/** Moved by a share of its own span; positive is later. The span is kept at the record's ends. */
export function panWindow(window: TimeWindow, share: number, record: TimeWindow): TimeWindow {
  const span = window.to - window.from
  const from = Math.min(record.to - span, Math.max(record.from, window.from + share * span))
  return { from, to: from + span }
}
