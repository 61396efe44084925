import type { Law } from '../laws/law.ts'
import { chiSquareQuantile } from '../numeric/chi-square.ts'
import { climb, localModel, type Range } from './climb.ts'
import type { Estimate, FitStatus } from './fit.ts'
import { profileLimit } from './profile-limit.ts'

/** Best coordinates of a law under some likelihood, with intervals of the reported parameters. */
export interface LawMaximum {
  readonly coordinates: readonly number[]
  readonly parameters: Readonly<Record<string, Estimate>>
  readonly logLikelihood: number
  readonly evaluations: number
  readonly status: FitStatus
  readonly message: string
}

export interface MaximiseOptions {
  readonly confidence: number
  readonly intervals: boolean
}

/** Rates above this many per shortest duration describe nothing that could be seen. */
const FASTEST = 50

/** Search ranges: those of the law, and for rates an upper end tied to the shortest duration. */
export function searchRanges(law: Law, shortestSeconds: number): Range[] {
  return law.coordinates.map(({ name, low, high }) =>
    name === 'kappa' || name === 'rate'
      ? { low: name === 'rate' ? 1e-12 / shortestSeconds : 0, high: FASTEST / shortestSeconds }
      : { low: name === 'alpha' && low === 1 ? 1 + 1e-9 : low, high },
  )
}

function scalesOf(law: Law, at: readonly number[], dwells: number): number[] {
  const share = Math.max(0.02, 1 / Math.sqrt(Math.max(dwells, 1)))
  return law.coordinates.map(({ name }, i) => {
    if (name === 'kappa' || name === 'rate') return Math.max(0.5 * share * at[i], 1e-300)
    if (name === 'lnMedian' || name === 'lnTau') return 2 * share
    return share
  })
}

/**
 * Maximum likelihood with profile-likelihood intervals.
 * @param logLikelihood of the free coordinates
 * @param dwells number of complete dwells, for the first step sizes
 */
export function maximiseLaw(
  law: Law,
  logLikelihood: (coordinates: readonly number[]) => number,
  start: readonly number[],
  dwells: number,
  shortestSeconds: number,
  options: MaximiseOptions,
): LawMaximum {
  const ranges = searchRanges(law, shortestSeconds)
  const summit = climb(logLikelihood, start, ranges, scalesOf(law, start, dwells))
  let { x, value, evaluations } = summit
  const kappa = law.coordinates.findIndex(({ name }) => name === 'kappa')

  // No cutoff is the edge kappa = 0: compare with the best there, so that the edge is met exactly.
  let edge = Number.NEGATIVE_INFINITY
  let edgeAlpha = Number.NaN
  if (kappa >= 0) {
    const along = climb(
      ([alpha]) => logLikelihood([alpha, 0]),
      [Math.max(x[0], 1.2)],
      [{ low: 1 + 1e-6, high: ranges[0].high }],
      [scalesOf(law, x, dwells)[0]],
    )
    evaluations += along.evaluations
    edge = along.value
    edgeAlpha = along.x[0]
    if (edge >= value - 1e-9) {
      x = [edgeAlpha, 0]
      value = edge
    }
  }
  if (!Number.isFinite(value)) {
    return failed(
      law,
      evaluations,
      'not-finite',
      'The likelihood is not finite for any parameter tried: check the shortest fitted dwell.',
    )
  }
  if (!summit.converged && value === summit.value) {
    return {
      ...failed(
        law,
        evaluations,
        'not-converged',
        'The search did not settle: the dwells hardly constrain this law.',
      ),
      coordinates: x,
      logLikelihood: value,
    }
  }
  const reported = law.parametersOf(x)
  const atEdge = x.map(
    (v, i) => v <= ranges[i].low || v >= ranges[i].high || nearEdge(v, ranges[i], law.coordinates[i].name),
  )
  const level = value - 0.5 * chiSquareQuantile(options.confidence, 1)
  const errors = options.intervals
    ? standardErrors(
        logLikelihood,
        x,
        value,
        ranges,
        scalesOf(
          law,
          x.map((v, i) => (i === kappa ? Math.max(v, 0.02 * start[i]) : v)),
          dwells,
        ),
      )
    : []
  const parameters: Record<string, Estimate> = {}
  for (const [i, { name, unit }] of law.parameters.entries()) {
    const finite = Number.isFinite(reported[i]) ? reported[i] : null
    if (!options.intervals) {
      parameters[name] = { estimate: finite, low: null, high: null, unit }
      continue
    }
    const none = i === kappa && edge > level
    const below = none
      ? { x: 0, evaluations: 0 }
      : profileLimit(logLikelihood, x, level, i, -1, ranges, errors)
    const above = profileLimit(logLikelihood, x, level, i, 1, ranges, errors)
    evaluations += below.evaluations + above.evaluations
    parameters[name] = { estimate: finite, ...reportedLimits(law, x, i, below.x, above.x), unit }
  }
  const edgeName = atEdge.indexOf(true)
  if (edgeName >= 0) {
    const message =
      edgeName === kappa
        ? 'No cutoff improves the fit: the cutoff time is a lower bound.'
        : `The best ${law.parameters[edgeName].symbol} lies at the end of its range: this law does not suit these dwells.`
    return { coordinates: x, parameters, logLikelihood: value, evaluations, status: 'at-bound', message }
  }
  return {
    coordinates: x,
    parameters,
    logLikelihood: value,
    evaluations,
    status: options.intervals ? 'ok' : 'no-interval',
    message: '',
  }
}

/** Standard errors from the curvature at the maximum; the first guess of the width of the intervals. */
function standardErrors(
  f: (x: readonly number[]) => number,
  x: readonly number[],
  value: number,
  ranges: readonly Range[],
  scales: readonly number[],
): number[] {
  const model = localModel(f, x, value, ranges, scales)
  if (model === null) return [...scales]
  const { hessian } = model
  if (x.length === 1) return [hessian[0][0] < 0 ? 1 / Math.sqrt(-hessian[0][0]) : scales[0]]
  const determinant = hessian[0][0] * hessian[1][1] - hessian[0][1] ** 2
  return x.map((_, i) => {
    const variance = -hessian[1 - i][1 - i] / determinant
    return determinant > 0 && variance > 0 ? Math.sqrt(variance) : scales[i]
  })
}

function nearEdge(value: number, range: Range, name: string): boolean {
  if (name === 'kappa' || name === 'rate') return false
  return value - range.low < 1e-3 * Math.abs(range.low) || range.high - value < 1e-3 * Math.abs(range.high)
}

/** Limits of a reported parameter from those of its coordinate; rates turn round when they become times. */
function reportedLimits(
  law: Law,
  best: readonly number[],
  index: number,
  below: number | null,
  above: number | null,
): { low: number | null; high: number | null } {
  const report = (value: number | null): number | null => {
    if (value === null) return null
    const parameter = law.parametersOf(best.map((v, i) => (i === index ? value : v)))[index]
    return Number.isFinite(parameter) ? parameter : null
  }
  const { name } = law.coordinates[index]
  return name === 'kappa' || name === 'rate'
    ? { low: report(above), high: report(below) }
    : { low: report(below), high: report(above) }
}

/** A fit without numbers, with the reason. */
export function failed(law: Law, evaluations: number, status: FitStatus, message: string): LawMaximum {
  const none = (unit: string): Estimate => ({ estimate: null, low: null, high: null, unit })
  return {
    coordinates: [],
    parameters: Object.fromEntries(law.parameters.map(({ name, unit }) => [name, none(unit)])),
    logLikelihood: Number.NaN,
    evaluations,
    status,
    message,
  }
}
