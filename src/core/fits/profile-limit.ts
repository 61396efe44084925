import { findRoot } from '../numeric/root.ts'
import { climb, type Range } from './climb.ts'

/** One end of a profile-likelihood interval. */
export interface ProfileLimit {
  /** Coordinate value; null when the profile does not fall to the level inside the range. */
  readonly x: number | null
  readonly evaluations: number
}

const MOST_DOUBLINGS = 60

/**
 * Where the profile likelihood of coordinate `index` falls to `level`, going from the maximum towards `side`; the
 * other coordinate, if any, is maximised at every trial (warm start from the last). Profile-likelihood limits: Venzon
 * and Moolgavkar, Appl. Stat. 37, 87 (1988).
 */
export function profileLimit(
  f: (x: readonly number[]) => number,
  best: readonly number[],
  level: number,
  index: number,
  side: -1 | 1,
  ranges: readonly Range[],
  scales: readonly number[],
): ProfileLimit {
  let evaluations = 0
  const counted = (x: readonly number[]): number => {
    evaluations++
    return f(x)
  }
  const other = best.length === 2 ? 1 - index : null
  let warm = other === null ? 0 : best[other]
  const profile = (value: number): number => {
    if (other === null) return counted([value]) - level
    const full = ([free]: readonly number[]): number =>
      counted(index === 0 ? [value, free] : [free, value])
    const inner = climb(full, [warm], [ranges[other]], [scales[other]])
    if (Number.isFinite(inner.value)) warm = inner.x[0]
    return inner.value - level
  }
  const bound = side < 0 ? ranges[index].low : ranges[index].high
  const from = best[index]
  if (from === bound) return { x: null, evaluations }
  let inside = from
  let step = scales[index]
  for (let doubling = 0; doubling < MOST_DOUBLINGS; doubling++) {
    const trial = side < 0 ? Math.max(bound, inside - step) : Math.min(bound, inside + step)
    const height = profile(trial)
    if (!(height > 0)) {
      const found = findRoot(profile, inside, trial, {
        tolerance: 1e-4 * Math.max(scales[index], 1e-9),
        mostEvaluations: 40,
      })
      return { x: found.converged ? found.x : 0.5 * (inside + trial), evaluations }
    }
    if (trial === bound) return { x: null, evaluations }
    inside = trial
    step *= 2
  }
  return { x: null, evaluations }
}
