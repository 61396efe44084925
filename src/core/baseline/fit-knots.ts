import { factorPentadiagonal, inverseDiagonal, solvePentadiagonal } from './pentadiagonal.ts'

export interface KnotFit {
  /** ln of the baseline at the knots, in the unit of counts / exposure. */
  readonly lnBaseline: Float64Array
  /** Variance of it: diagonal of the inverse penalised Hessian. Wide where there was no exposure. */
  readonly variance: Float64Array
  /** (mu / 2) sum of squared second differences + (rho / 2) sum of squared distances from eta_0. */
  readonly penalty: number
  readonly steps: number
}

const MOST_STEPS = 60
const CONVERGED = 1e-9
/** Longest Newton step in ln rate; a full step from far below the solution would overshoot by e^step. */
const LONGEST_STEP = 1.5

/**
 * Penalised Poisson likelihood on equally spaced knots, by Newton steps with a banded Hessian, O(knots) each. Maximises
 *
 *     sum_j [Y_j eta_j - e^eta_j W_j] - (mu / 2) sum_j (eta_(j-1) - 2 eta_j + eta_(j+1))^2 - (rho / 2) sum_j (eta_j - eta_0)^2
 *
 * which is concave, so the maximum is the only one. (Squared second differences as penalty: Whittaker 1923; with a Poisson
 * likelihood: Eilers & Marx 1996, Stat. Sci. 11, 89.)
 *
 * @param exposure W, >= 0; knots without exposure follow from the penalty alone
 * @param counts Y, >= 0
 * @param start eta to start from, one per knot (at least 1)
 * @param bend mu, >= 0
 * @param pull rho, > 0; keeps the solution finite where nothing was counted
 * @param lnOff eta_0
 */
export function fitKnots(
  exposure: Float64Array,
  counts: Float64Array,
  start: Float64Array,
  bend: number,
  pull: number,
  lnOff: number,
): KnotFit {
  const n = start.length
  const lnBaseline = Float64Array.from(start)
  const { diagonal: bendDiagonal, first, second } = secondDifferenceBands(n, bend)
  const diagonal = new Float64Array(n)
  const step = new Float64Array(n)
  for (let steps = 1; ; steps++) {
    for (let j = 0; j < n; j++) {
      const expected = Math.exp(lnBaseline[j]) * exposure[j]
      diagonal[j] = bendDiagonal[j] + expected + pull
      step[j] = counts[j] - expected - pull * (lnBaseline[j] - lnOff)
    }
    // The bend term of the gradient row by row, from the differences themselves: a straight line gives exactly none.
    for (let j = 1; j + 1 < n; j++) {
      const pulled = bend * (lnBaseline[j - 1] - 2 * lnBaseline[j] + lnBaseline[j + 1])
      step[j - 1] -= pulled
      step[j] += 2 * pulled
      step[j + 1] -= pulled
    }
    const factor = factorPentadiagonal(diagonal, first, second)
    solvePentadiagonal(factor, step)
    let longest = 0
    for (let j = 0; j < n; j++) longest = Math.max(longest, Math.abs(step[j]))
    const share = longest > LONGEST_STEP ? LONGEST_STEP / longest : 1
    for (let j = 0; j < n; j++) lnBaseline[j] += share * step[j]
    if (longest < CONVERGED || steps === MOST_STEPS)
      return {
        lnBaseline,
        variance: inverseDiagonal(factor),
        penalty: penaltyOf(lnBaseline, bend, pull, lnOff),
        steps,
      }
  }
}

/** Bands of bend x D'D, D the second-difference matrix. */
function secondDifferenceBands(
  n: number,
  bend: number,
): { diagonal: Float64Array; first: Float64Array; second: Float64Array } {
  const diagonal = new Float64Array(n)
  const first = new Float64Array(n)
  const second = new Float64Array(n)
  for (let j = 1; j + 1 < n; j++) {
    diagonal[j - 1] += bend
    diagonal[j] += 4 * bend
    diagonal[j + 1] += bend
    first[j - 1] -= 2 * bend
    first[j] -= 2 * bend
    second[j - 1] += bend
  }
  return { diagonal, first, second }
}

function penaltyOf(lnBaseline: Float64Array, bend: number, pull: number, lnOff: number): number {
  let bends = 0
  let pulls = 0
  for (let j = 0; j < lnBaseline.length; j++) {
    pulls += (lnBaseline[j] - lnOff) ** 2
    if (j > 0 && j + 1 < lnBaseline.length)
      bends += (lnBaseline[j - 1] - 2 * lnBaseline[j] + lnBaseline[j + 1]) ** 2
  }
  return (bend * bends + pull * pulls) / 2
}
