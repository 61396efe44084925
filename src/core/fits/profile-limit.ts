import type { Range } from './climb.ts'
import { ridge } from './ridge.ts'

/** What a profile walks on: ln L at a value of the profiled coordinate and of the other. */
export interface ProfileProblem {
  readonly f: (value: number, other: number) => number
  readonly range: Range
  /** Null when there is no other coordinate. */
  readonly otherRange: Range | null
  /** Where ln L is greatest, and that greatest value. */
  readonly best: { readonly value: number; readonly other: number; readonly height: number }
  /** Rough standard error of the profiled coordinate, > 0. */
  readonly error: number
  /** Rough width of ln L along the other coordinate at a fixed value of the profiled one, > 0. */
  readonly otherError: number
  /** Slope of the ridge: change of the other per change of the value. */
  readonly otherSlope: number
}

const MOST_TRIALS = 60
/** The root of twice the fall of ln L is met to this; interpolation then gains two more digits. */
const CLOSE = 0.02

/**
 * Where the profile likelihood falls by z^2/2 below its top, going from there towards `side`; the other coordinate is
 * maximised at every trial. Null when it does not fall that far inside the range. Profile-likelihood limits: Venzon
 * and Moolgavkar, Appl. Stat. 37, 87 (1988). The walk uses r = sqrt(2 (top - profile)), which is nearly
 * linear in the coordinate, so that few trials are needed.
 */
export function profileLimit(problem: ProfileProblem, z: number, side: -1 | 1): number | null {
  const { f, range, otherRange, best, error, otherError } = problem
  const bound = side < 0 ? range.low : range.high
  if (best.value === bound) return null
  // The other coordinate is looked for on the line through the last two places where it was found.
  let last = { value: best.value, other: best.other }
  let slope = problem.otherSlope
  const fall = (value: number): number => {
    let height: number
    if (otherRange === null) height = f(value, 0)
    else {
      const along = ridge(
        (other) => f(value, other),
        last.other + slope * (value - last.value),
        otherRange,
        otherError,
      )
      height = along.value
      if (Number.isFinite(height) && value !== last.value) {
        slope = (along.x - last.other) / (value - last.value)
        last = { value, other: along.x }
      }
    }
    return Number.isNaN(height) ? Infinity : Math.sqrt(2 * Math.max(0, best.height - height))
  }
  // Distances from the top, in units of the standard error, and the falls there.
  const room = Math.abs(bound - best.value) / error
  const valueAt = (distance: number): number =>
    distance >= room ? bound : best.value + side * distance * error
  const points: { d: number; r: number }[] = [{ d: 0, r: 0 }]
  let inside = 0
  let outside = Infinity
  let d = Math.min(z, room)
  for (let trial = 0; trial < MOST_TRIALS; trial++) {
    const r = fall(valueAt(d))
    if (r < z) {
      if (d >= room) return null
      inside = d
    } else outside = d
    if (Number.isFinite(r)) points.push({ d, r })
    const next = interpolated(points, z)
    if (Math.abs(r - z) < CLOSE) {
      const sound = next > inside * 0.99 && next < (outside === Infinity ? 1.1 * d : 1.01 * outside)
      return valueAt(Math.min(room, sound ? next : d))
    }
    if (outside === Infinity) {
      // Not bracketed yet: go where the line leads, but at most four times as far.
      d = Math.min(
        room,
        Math.min(4 * inside, Math.max(1.1 * inside, Number.isFinite(next) ? next : Infinity)),
      )
    } else {
      const margin = 0.02 * (outside - inside)
      // Bisection when interpolation points out of the bracket, and now and then for safety.
      const good = next > inside + margin && next < outside - margin && trial % 5 !== 4
      d = good ? next : 0.5 * (inside + outside)
      if (outside - inside < 1e-9 * outside) return valueAt(outside)
    }
  }
  return null
}

/** Distance at which r = z, from the two or three points whose r is nearest (inverse interpolation). */
function interpolated(points: readonly { d: number; r: number }[], z: number): number {
  const near = [...points].sort((a, b) => Math.abs(a.r - z) - Math.abs(b.r - z)).slice(0, 3)
  if (near.length < 2) return Number.NaN
  const [a, b, c] = near
  if (a.r === b.r) return Number.NaN
  const line = a.d + ((z - a.r) * (b.d - a.d)) / (b.r - a.r)
  if (c === undefined || c.r === a.r || c.r === b.r) return line
  const bend = ((c.d - a.d) / (c.r - a.r) - (b.d - a.d) / (b.r - a.r)) / (c.r - b.r)
  const curve = line + (z - a.r) * (z - b.r) * bend
  const lowest = Math.min(a.d, b.d, c.d)
  return curve > lowest - Math.abs(line - lowest) ? curve : line
}
