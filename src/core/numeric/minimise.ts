export interface Minimum1d {
  readonly x: number
  readonly value: number
  readonly evaluations: number
  readonly converged: boolean
}

interface MinimiseOptions {
  readonly tolerance?: number
  readonly mostEvaluations?: number
}

const GOLDEN = 0.3819660112501051

/** Minimum of f on [low, high]: golden section with parabolic steps (Brent 1973, Algorithms for Minimization). */
export function minimise1d(
  f: (x: number) => number,
  low: number,
  high: number,
  options: MinimiseOptions = {},
): Minimum1d {
  const tolerance = options.tolerance ?? 1e-8
  const most = options.mostEvaluations ?? 200
  let a = low
  let b = high
  let x = a + GOLDEN * (b - a)
  let fx = f(x)
  let [w, fw, v, fv] = [x, fx, x, fx]
  let evaluations = 1
  let step = 0
  let before = 0
  while (evaluations < most) {
    const middle = 0.5 * (a + b)
    const tiny = 1e-10 * Math.abs(x) + tolerance / 3
    if (Math.abs(x - middle) <= 2 * tiny - 0.5 * (b - a))
      return { x, value: fx, evaluations, converged: true }
    let golden = true
    if (Math.abs(before) > tiny) {
      const r = (x - w) * (fx - fv)
      let q = (x - v) * (fx - fw)
      let p = (x - v) * q - (x - w) * r
      q = 2 * (q - r)
      if (q > 0) p = -p
      q = Math.abs(q)
      if (Math.abs(p) < Math.abs(0.5 * q * before) && p > q * (a - x) && p < q * (b - x)) {
        before = step
        step = p / q
        if (x + step - a < 2 * tiny || b - (x + step) < 2 * tiny) step = x < middle ? tiny : -tiny
        golden = false
      }
    }
    if (golden) {
      before = x < middle ? b - x : a - x
      step = GOLDEN * before
    }
    const u = x + (Math.abs(step) >= tiny ? step : step > 0 ? tiny : -tiny)
    const fu = f(u)
    evaluations++
    if (fu <= fx) {
      if (u < x) b = x
      else a = x
      ;[v, fv, w, fw, x, fx] = [w, fw, x, fx, u, fu]
    } else {
      if (u < x) a = u
      else b = u
      if (fu <= fw || w === x) [v, fv, w, fw] = [w, fw, u, fu]
      else if (fu <= fv || v === x || v === w) [v, fv] = [u, fu]
    }
  }
  return { x, value: fx, evaluations, converged: false }
}

export interface MinimumNd {
  readonly x: number[]
  readonly value: number
  readonly evaluations: number
  readonly converged: boolean
}

/**
 * Minimum by the simplex of Nelder and Mead (Comput. J. 7, 308 (1965)). Points where f is not a number count as
 * Infinity, which also is how bounds are imposed.
 * @param steps first displacement along each coordinate
 */
export function minimiseNelderMead(
  f: (x: readonly number[]) => number,
  start: readonly number[],
  steps: readonly number[],
  options: MinimiseOptions = {},
): MinimumNd {
  const n = start.length
  const tolerance = options.tolerance ?? 1e-10
  const most = options.mostEvaluations ?? 400 * n
  let evaluations = 0
  const at = (x: number[]): { x: number[]; value: number } => {
    evaluations++
    const value = f(x)
    return { x, value: Number.isNaN(value) ? Number.POSITIVE_INFINITY : value }
  }
  const simplex = [at([...start])]
  for (let i = 0; i < n; i++) simplex.push(at(start.map((s, j) => (j === i ? s + steps[i] : s))))
  const order = (): void => {
    simplex.sort((p, q) => p.value - q.value)
  }
  order()
  while (evaluations < most) {
    const best = simplex[0]
    const worst = simplex[n]
    if (worst.value - best.value <= tolerance * (1 + Math.abs(best.value)) && Number.isFinite(worst.value)) {
      return { x: best.x, value: best.value, evaluations, converged: true }
    }
    const centre = start.map((_, j) => simplex.slice(0, n).reduce((sum, p) => sum + p.x[j], 0) / n)
    const along = (t: number) => at(centre.map((c, j) => c + t * (worst.x[j] - c)))
    const reflected = along(-1)
    if (reflected.value < best.value) {
      const further = along(-2)
      simplex[n] = further.value < reflected.value ? further : reflected
    } else if (reflected.value < simplex[n - 1].value) {
      simplex[n] = reflected
    } else {
      const inner = along(reflected.value < worst.value ? -0.5 : 0.5)
      if (inner.value < Math.min(reflected.value, worst.value)) simplex[n] = inner
      else {
        for (let i = 1; i <= n; i++)
          simplex[i] = at(simplex[i].x.map((v, j) => best.x[j] + 0.5 * (v - best.x[j])))
      }
    }
    order()
  }
  return { x: simplex[0].x, value: simplex[0].value, evaluations, converged: false }
}
