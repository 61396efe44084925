export interface RootFound {
  readonly x: number
  readonly converged: boolean
  readonly evaluations: number
}

interface RootOptions {
  /** Absolute tolerance on x. */
  readonly tolerance?: number
  readonly mostEvaluations?: number
}

/**
 * A root of f between low and high, where f changes sign (Chandrupatla, Adv. Eng. Softw. 28, 145 (1997)).
 * `converged` is false when there is no change of sign or a value is not a number.
 */
export function findRoot(
  f: (x: number) => number,
  low: number,
  high: number,
  options: RootOptions = {},
): RootFound {
  const most = options.mostEvaluations ?? 100
  let b = low
  let a = high
  let fb = f(b)
  let fa = f(a)
  let evaluations = 2
  if (fb === 0) return { x: b, converged: true, evaluations }
  if (fa === 0) return { x: a, converged: true, evaluations }
  if (!(fa * fb < 0)) return { x: Number.NaN, converged: false, evaluations }
  let c = a
  let fc = fa
  let t = 0.5
  while (evaluations < most) {
    const x = a + t * (b - a)
    const fx = f(x)
    evaluations++
    if (Number.isNaN(fx)) return { x, converged: false, evaluations }
    if (Math.sign(fx) === Math.sign(fa)) {
      c = a
      fc = fa
    } else {
      c = b
      b = a
      fc = fb
      fb = fa
    }
    a = x
    fa = fx
    const best = Math.abs(fa) < Math.abs(fb) ? a : b
    const tolerance = 2 * Number.EPSILON * Math.abs(best) + 0.5 * (options.tolerance ?? 0)
    const share = tolerance / Math.abs(b - c)
    if (share > 0.5 || fa === 0) return { x: best, converged: true, evaluations }
    const xi = (a - b) / (c - b)
    const phi = (fa - fb) / (fc - fb)
    t =
      phi * phi < xi && (1 - phi) * (1 - phi) < 1 - xi
        ? (fa / (fb - fa)) * (fc / (fb - fc)) + (((c - a) / (b - a)) * fa * fb) / ((fc - fa) * (fc - fb))
        : 0.5
    t = Math.min(1 - share, Math.max(share, t))
  }
  return { x: Math.abs(fa) < Math.abs(fb) ? a : b, converged: false, evaluations }
}
