/** Measures kept per name: a long session of dragging must not fill the browser's performance buffer. */
const KEPT = 2000

const left = new Map<string, number>()

/** Leaves a User Timing measure from `start` (ms, performance clock) to now. */
export function leaveMeasure(name: string, start: number): void {
  const count = (left.get(name) ?? 0) + 1
  if (count > KEPT) {
    performance.clearMeasures(name)
    left.set(name, 0)
  } else left.set(name, count)
  try {
    performance.measure(name, { start, end: performance.now() })
  } catch {
    // A clock that went backwards leaves no measure.
  }
}
