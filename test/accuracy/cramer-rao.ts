import type { DwellTable } from '../../src/core/dwells/dwell-table.ts'
import { lawNamed } from '../../src/core/laws/all-laws.ts'
import { gaussLegendre } from '../../src/core/numeric/gauss-legendre.ts'
import type { DurationModel } from '../../src/core/simulate/emitter-model.ts'

const NODES = 4
/** Beyond this survival nothing is left to learn. */
const NEGLIGIBLE = -35

/** Fisher information of one dwell, per longest duration that can be seen complete; 2 x 2 packed, or 1 x 1. */
export interface InformationTable {
  readonly size: number
  /** Row u, u bins of record left after the first bin of the dwell: information of that dwell given it is used. */
  readonly byRoom: Float64Array
  readonly rooms: number
  readonly shortestBins: number
}

/**
 * Expected Fisher information, at the true parameters, of the bin-exact likelihood (durations
 * rounded by a triangle at a fractional threshold) of one dwell of at least shortestBins that starts with u more
 * bins of record to come: complete when it lasts at most u bins, right-censored at u + 1 otherwise. Derivatives are
 * central differences; the coordinates are those of the law (alpha, kappa).
 */
export function informationTable(
  truth: DurationModel,
  binSeconds: number,
  edgeShare: number,
  shortestBins: number,
  longestBins: number,
): InformationTable {
  const law = lawNamed(truth.law)
  const at = law.coordinatesOf(law.parameters.map(({ name }) => truth.parameters[name]))
  const size = at.length
  const lag = 1 - 2 * edgeShare
  const bars = (coordinates: readonly number[]): Float64Array =>
    barSurvival(
      (t) => law.at(coordinates, truth.shortestSeconds).logSurvival(t),
      binSeconds,
      lag,
      shortestBins,
      longestBins,
    )
  const steps = at.map((value) => 1e-4 * Math.max(Math.abs(value), 1e-3))
  const middle = bars(at)
  const sides = at.map((_, i) =>
    [-1, 1].map((sign) => bars(at.map((value, j) => (j === i ? value + sign * steps[i] : value)))),
  )
  // Entry k of a bar array is Sbar at shortestBins - 1 + k, so P(shortestBins + k) is entry k minus the next, over entry 0.
  const score = new Float64Array(size)
  const scoreOf = (lnChance: (b: Float64Array) => number): boolean => {
    for (let i = 0; i < size; i++) score[i] = (lnChance(sides[i][1]) - lnChance(sides[i][0])) / (2 * steps[i])
    return score.every(Number.isFinite)
  }
  const rooms = longestBins
  const byRoom = new Float64Array(rooms * size * size)
  const running = new Float64Array(size * size)
  for (let u = shortestBins; u < rooms; u++) {
    const k = u - shortestBins
    const complete = (middle[k] - middle[k + 1]) / middle[0]
    if (complete > 0 && scoreOf((b) => Math.log((b[k] - b[k + 1]) / b[0])))
      addOuter(running, 0, score, complete)
    const row = u * size * size
    byRoom.set(running, row)
    // Longer than u: censored at u + 1 bins, chance Sbar_u.
    const longer = middle[k + 1] / middle[0]
    if (longer > 0 && scoreOf((b) => Math.log(b[k + 1] / b[0]))) addOuter(byRoom, row, score, longer)
  }
  return { size, byRoom, rooms, shortestBins }
}

/** Cramér-Rao bound (standard deviations of the coordinates) for the dwells of one state that a fit uses; null if none. */
export function cramerRao(
  table: InformationTable,
  dwells: DwellTable,
  state: 0 | 1,
  recordBins: number,
): number[] | null {
  const { size, byRoom, rooms, shortestBins } = table
  const sum = new Float64Array(size * size)
  for (let row = 0; row < dwells.rows; row++) {
    if (dwells.state[row] !== state || dwells.durationBins[row] < shortestBins) continue
    // Codes 0 complete and 2 end unseen are in the likelihood.
    if (dwells.censoring[row] !== 0 && dwells.censoring[row] !== 2) continue
    const start = Math.round(dwells.startSeconds[row] / dwells.binSeconds)
    const room = Math.min(rooms - 1, recordBins - start - 1)
    for (let i = 0; i < sum.length; i++) sum[i] += byRoom[room * sum.length + i]
  }
  if (size === 1) return sum[0] > 0 ? [1 / Math.sqrt(sum[0])] : null
  const determinant = sum[0] * sum[3] - sum[1] * sum[2]
  if (!(determinant > 0)) return null
  return [Math.sqrt(sum[3] / determinant), Math.sqrt(sum[0] / determinant)]
}

/** Sbar_m, m from shortestBins - 1 to longestBins: survival averaged over [m - lag, m + 1 - lag] bins. */
function barSurvival(
  logSurvival: (seconds: number) => number,
  binSeconds: number,
  lag: number,
  shortestBins: number,
  longestBins: number,
): Float64Array {
  const { nodes, weights } = gaussLegendre(NODES)
  const bars = new Float64Array(longestBins - shortestBins + 2)
  const anchor = logSurvival((shortestBins - 1 - lag) * binSeconds)
  for (let k = 0; k < bars.length; k++) {
    const from = k + shortestBins - 1 - lag
    if (logSurvival(from * binSeconds) - anchor < NEGLIGIBLE) break
    for (let i = 0; i < nodes.length; i++)
      bars[k] += 0.5 * weights[i] * Math.exp(logSurvival((from + 0.5 * (1 + nodes[i])) * binSeconds) - anchor)
  }
  return bars
}

function addOuter(into: Float64Array, offset: number, score: Float64Array, weight: number): void {
  for (let i = 0; i < score.length; i++)
    for (let j = 0; j < score.length; j++) into[offset + i * score.length + j] += weight * score[i] * score[j]
}
