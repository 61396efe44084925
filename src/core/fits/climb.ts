import { minimiseNelderMead } from '../numeric/minimise.ts'

export interface Range {
  readonly low: number
  readonly high: number
}

export interface Summit {
  readonly x: number[]
  readonly value: number
  readonly evaluations: number
  readonly converged: boolean
}

/** A gain in ln L smaller than this changes no number that is shown. */
const LEAST_GAIN = 1e-7
const MOST_ROUNDS = 60
/** Step of the differences as a share of the width of the dome along its coordinate. */
const DOME_SHARE = 0.1

function clip(x: number, { low, high }: Range): number {
  return Math.min(high, Math.max(low, x))
}

/**
 * Maximum of a smooth function of one or two coordinates inside a box: damped Newton steps with central differences,
 * steps clipped to the box, and a simplex search (Nelder and Mead 1965) where Newton's model fails. Values that are
 * not numbers count as -Infinity.
 * @param scales rough size of a change that matters, per coordinate, > 0
 */
export function climb(
  f: (x: readonly number[]) => number,
  start: readonly number[],
  ranges: readonly Range[],
  scales: readonly number[],
): Summit {
  let evaluations = 0
  const at = (x: readonly number[]): number => {
    evaluations++
    const value = f(x)
    return Number.isNaN(value) ? Number.NEGATIVE_INFINITY : value
  }
  let x = start.map((value, i) => clip(value, ranges[i]))
  let best = at(x)
  let steps = [...scales]
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const model = localModel(at, x, best, ranges, steps)
    const step = model === null ? null : newtonStep(model, x, ranges)
    let moved = false
    if (step !== null && model !== null) {
      // Differences over a small part of the width of the dome are right; wide ones mislead.
      const wanted = steps.map((size, i) =>
        model.hessian[i][i] < 0 ? Math.min(scales[i], DOME_SHARE / Math.sqrt(-model.hessian[i][i])) : size,
      )
      const fine = steps.every((size, i) => size < 2.5 * wanted[i])
      steps = wanted
      // Predicted gain of the full step: nothing to win means that this is the summit.
      const predicted = 0.5 * model.gradient.reduce((sum, slope, i) => sum + slope * step[i], 0)
      if (fine && predicted < LEAST_GAIN && Number.isFinite(best))
        return { x, value: best, evaluations, converged: true }
      for (let damping = 1; damping > 1e-4; damping *= 0.35) {
        const trial = x.map((value, i) => clip(value + damping * step[i], ranges[i]))
        const value = at(trial)
        if (value > best) {
          moved = value - best > LEAST_GAIN
          x = trial
          best = value
          break
        }
      }
      // Newton finds nothing better with sound differences: a summit, if no neighbour is higher.
      if (!moved && fine && isSummit(at, x, best, ranges, steps))
        return { x, value: best, evaluations, converged: Number.isFinite(best) }
      if (!moved && !fine) continue
    }
    if (!moved) {
      const simplex = minimiseNelderMead(
        (trial) =>
          trial.some((value, i) => value < ranges[i].low || value > ranges[i].high) ? Infinity : -at(trial),
        x,
        scales.map((size, i) => (x[i] + size > ranges[i].high ? -size : size)),
        { tolerance: 1e-10, mostEvaluations: 300 },
      )
      const gain = -simplex.value - best
      if (gain > 0) {
        x = simplex.x
        best = -simplex.value
      }
      if (!(gain > LEAST_GAIN))
        return { x, value: best, evaluations, converged: Number.isFinite(best) && simplex.converged }
    }
  }
  return { x, value: best, evaluations, converged: false }
}

/** Second-order model of a function around a point. */
export interface LocalModel {
  readonly gradient: readonly number[]
  readonly hessian: readonly (readonly number[])[]
}

/** Gradient and second differences; one-sided at a bound. Null where f is not finite nearby. */
export function localModel(
  at: (x: readonly number[]) => number,
  x: readonly number[],
  value: number,
  ranges: readonly Range[],
  steps: readonly number[],
): LocalModel | null {
  const n = x.length
  const gradient: number[] = []
  const diagonal: number[] = []
  const used: number[] = []
  for (let i = 0; i < n; i++) {
    const h = steps[i] * 0.5
    // Shift the three points inside the box where x sits on its edge.
    const shift = x[i] - h < ranges[i].low ? 1 : x[i] + h > ranges[i].high ? -1 : 0
    const point = (offset: number): number => at(x.map((v, j) => (j === i ? v + offset : v)))
    const f1 = shift === 0 ? point(-h) : point(shift * h)
    const f2 = shift === 0 ? point(h) : point(2 * shift * h)
    if (!Number.isFinite(f1) || !Number.isFinite(f2) || !Number.isFinite(value)) return null
    if (shift === 0) {
      gradient.push((f2 - f1) / (2 * h))
      diagonal.push((f1 - 2 * value + f2) / (h * h))
    } else {
      gradient.push((shift * (4 * f1 - f2 - 3 * value)) / (2 * h))
      diagonal.push((f2 - 2 * f1 + value) / (h * h))
    }
    used.push(shift === 0 ? h : shift * h)
  }
  if (n === 1) return { gradient, hessian: [[diagonal[0]]] }
  const corner = at([x[0] + used[0], x[1] + used[1]])
  const cross =
    (corner -
      value -
      gradient[0] * used[0] -
      gradient[1] * used[1] -
      0.5 * diagonal[0] * used[0] * used[0] -
      0.5 * diagonal[1] * used[1] * used[1]) /
    (used[0] * used[1])
  if (!Number.isFinite(cross)) return null
  return {
    gradient,
    hessian: [
      [diagonal[0], cross],
      [cross, diagonal[1]],
    ],
  }
}

/** The Newton step of a dome; coordinates pressed against their bound are left out. Null when it is not a dome. */
function newtonStep(
  { gradient, hessian }: LocalModel,
  x: readonly number[],
  ranges: readonly Range[],
): number[] | null {
  const free = x.map(
    (value, i) =>
      !((value <= ranges[i].low && gradient[i] < 0) || (value >= ranges[i].high && gradient[i] > 0)),
  )
  const live = free.flatMap((isFree, i) => (isFree ? [i] : []))
  if (live.length === 0) return x.map(() => 0)
  if (live.length === 1) {
    const i = live[0]
    if (!(hessian[i][i] < 0)) return null
    return x.map((_, j) => (j === i ? -gradient[i] / hessian[i][i] : 0))
  }
  const [[a, b], [, d]] = hessian
  const determinant = a * d - b * b
  if (!(a < 0) || !(determinant > 0)) return null
  return [
    (-d * gradient[0] + b * gradient[1]) / determinant,
    (b * gradient[0] - a * gradient[1]) / determinant,
  ]
}

/** No neighbour half a step away along a coordinate is higher by more than matters. */
function isSummit(
  at: (x: readonly number[]) => number,
  x: readonly number[],
  value: number,
  ranges: readonly Range[],
  steps: readonly number[],
): boolean {
  for (let i = 0; i < x.length; i++) {
    for (const sign of [-1, 1]) {
      const trial = x.map((v, j) => (j === i ? clip(v + sign * 0.5 * steps[i], ranges[i]) : v))
      if (at(trial) > value + LEAST_GAIN) return false
    }
  }
  return true
}
