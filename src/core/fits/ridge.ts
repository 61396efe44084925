import { minimise1d } from '../numeric/minimise.ts'
import type { Range } from './climb.ts'

/** A predicted gain in ln L below this needs no check: the parabola is right to a small part of it. */
const LEAST_GAIN = 3e-4
/** A parabola that foretold the height this well needs no second one. */
const TRUSTED = 2e-5
/** Longest step, in widths of the dome. */
const MOST_STEP = 10
const MOST_ROUNDS = 25
const MOST_WINDOWS = 6

/**
 * Maximum of a smooth function of one coordinate near a good start: parabolas through three points, clipped to the
 * range; Brent's method around the start where the function is not a dome. Heights are right to about 1e-5.
 * @param error rough width of the dome
 */
export function ridge(
  f: (x: number) => number,
  start: number,
  range: Range,
  error: number,
): { x: number; value: number } {
  let x = Math.min(range.high, Math.max(range.low, start))
  let value = f(x)
  let h = 0.2 * error
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const left = x - h < range.low ? x + 2 * h : x - h
    const right = x + h > range.high ? x - 2 * h : x + h
    const fl = f(left)
    const fr = f(right)
    // Newton's divided differences of the parabola through (x, left, right).
    const d1 = (fl - value) / (left - x)
    const d2 = ((fr - value) / (right - x) - d1) / (right - left)
    const slope = d1 - d2 * (left - x)
    if (!(d2 < 0) || !Number.isFinite(slope)) return wide(f, x, value, range, error)
    const full = -slope / (2 * d2)
    const step = Math.max(-MOST_STEP * error, Math.min(MOST_STEP * error, full))
    const next = Math.min(range.high, Math.max(range.low, x + step))
    const gain = slope * (next - x) + d2 * (next - x) ** 2
    if (gain < LEAST_GAIN && step === full) return { x: next, value: value + Math.max(0, gain) }
    const reached = f(next)
    if (!(reached >= value)) {
      h *= 0.3
      if (h < 1e-4 * error) return wide(f, x, value, range, error)
      continue
    }
    const surprise = Math.abs(reached - value - gain)
    h = Math.max(0.02 * error, Math.min(0.2 * error, 0.3 * Math.abs(next - x)))
    x = next
    value = reached
    if (surprise < TRUSTED && step === full) return { x, value }
  }
  return { x, value }
}

/** Brent's method on a window around x that is moved and widened until the maximum lies inside. */
function wide(f: (x: number) => number, x: number, value: number, range: Range, error: number) {
  let best = { x, value }
  for (let width = 30 * error, tries = 0; tries < MOST_WINDOWS; width *= 4, tries++) {
    const low = Math.max(range.low, best.x - width)
    const high = Math.min(range.high, best.x + width)
    const found = minimise1d((at) => -f(at), low, high, { tolerance: 1e-3 * error, mostEvaluations: 60 })
    if (-found.value > best.value) best = { x: found.x, value: -found.value }
    const margin = 0.02 * (high - low)
    const atLow = best.x < low + margin && low > range.low
    const atHigh = best.x > high - margin && high < range.high
    if (!atLow && !atHigh) break
  }
  return best
}
