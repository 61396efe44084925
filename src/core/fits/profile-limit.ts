import { findRoot } from '../numeric/root.ts'
import type { Range } from './climb.ts'
import { ridge } from './ridge.ts'

/** One end of a profile-likelihood interval. */
export interface ProfileLimit {
  /** Coordinate value; null when the profile does not fall to the level inside the range. */
  readonly x: number | null
  readonly evaluations: number
}

const MOST_STEPS = 40
/** Limits are found to this share of a standard error. */
const PRECISION = 1e-3

/**
 * Where the profile likelihood of coordinate `index` falls to `level`, going from the maximum towards `side`; the
 * other coordinate, if any, is maximised at every trial (warm start from the last). Profile-likelihood limits: Venzon
 * and Moolgavkar, Appl. Stat. 37, 87 (1988).
 * @param errors rough standard error of each coordinate, > 0: the first trial is two of them away
 */
export function profileLimit(
  f: (x: readonly number[]) => number,
  best: readonly number[],
  level: number,
  index: number,
  side: -1 | 1,
  ranges: readonly Range[],
  errors: readonly number[],
): ProfileLimit {
  let evaluations = 0
  const counted = (x: readonly number[]): number => {
    evaluations++
    const value = f(x)
    return Number.isNaN(value) ? Number.NEGATIVE_INFINITY : value
  }
  const other = best.length === 2 ? 1 - index : null
  let warm = other === null ? 0 : best[other]
  const profile = (value: number): number => {
    if (other === null) return counted([value]) - level
    const inner = ridge(
      (free) => counted(index === 0 ? [value, free] : [free, value]),
      warm,
      ranges[other],
      errors[other],
    )
    if (Number.isFinite(inner.value)) warm = inner.x
    return inner.value - level
  }
  const bound = side < 0 ? ranges[index].low : ranges[index].high
  if (best[index] === bound) return { x: null, evaluations }
  let inside = best[index]
  let step = 2 * errors[index]
  for (let round = 0; round < MOST_STEPS; round++) {
    const trial = side < 0 ? Math.max(bound, inside - step) : Math.min(bound, inside + step)
    const height = profile(trial)
    if (!(height > 0)) {
      const found = findRoot(profile, inside, trial, {
        tolerance: PRECISION * errors[index],
        mostEvaluations: 30,
      })
      return { x: Number.isFinite(found.x) ? found.x : 0.5 * (inside + trial), evaluations }
    }
    if (trial === bound) return { x: null, evaluations }
    inside = trial
    step = round < 3 ? 0.5 * errors[index] * (round + 1) : 2 * step
  }
  return { x: null, evaluations }
}
