import type { Law } from '../laws/law.ts'
import { chiSquareQuantile } from '../numeric/chi-square.ts'
import { climb, localModel, type LocalModel } from './climb.ts'
import type { Estimate, FitStatus } from './fit.ts'
import { profileLimit } from './profile-limit.ts'
import { type ProfileAxis, searchFrame } from './search-frame.ts'

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

/** Orders of magnitude, for ranges and first step sizes. */
export interface DwellScale {
  /** Complete ones. */
  readonly dwells: number
  /** Where the law is anchored. */
  readonly shortestSeconds: number
  /** Geometric mean of the complete ones. */
  readonly typicalSeconds: number
}

/** A cutoff that wins less ln L than this is no cutoff. */
const LEAST_CUTOFF_GAIN = 1e-6

/**
 * Maximum likelihood with profile-likelihood intervals.
 *
 * Cutoff laws: no cutoff is the edge kappa = 0. When it lies inside the interval, tau has a finite low and `high`
 * null (a bound); when it is the best, the estimate is null too and the status `at-bound`.
 * @param logLikelihood of the free coordinates of the law
 * @param starts free coordinates to start from; the highest is used, the others when the search does not settle
 */
export function maximiseLaw(
  law: Law,
  logLikelihood: (coordinates: readonly number[]) => number,
  starts: readonly (readonly number[])[],
  { dwells, shortestSeconds, typicalSeconds }: DwellScale,
  options: MaximiseOptions,
): LawMaximum {
  const frame = searchFrame(law, shortestSeconds, typicalSeconds)
  const { ranges } = frame
  let evaluations = 0
  const f = (search: readonly number[]): number => {
    evaluations++
    const value = logLikelihood(frame.toLaw(search))
    return Number.isNaN(value) ? Number.NEGATIVE_INFINITY : value
  }
  const kappa = law.coordinates.findIndex(({ name }) => name === 'kappa')
  const rate = kappa >= 0 ? Math.max(...starts.map((start) => start[kappa])) : 0

  // The summit, from the most likely start first.
  const searches = starts.map((start) => frame.fromLaw(start))
  if (searches.length > 1) {
    const heights = new Map(searches.map((search) => [search, f(clipped(search, frame.ranges))]))
    searches.sort((a, b) => (heights.get(b) ?? 0) - (heights.get(a) ?? 0))
  }
  let summit = climb(f, searches[0], ranges, frame.scales(searches[0], dwells, rate))
  for (const search of searches.slice(1)) {
    if (summit.converged) break
    const other = climb(f, search, ranges, frame.scales(search, dwells, rate))
    if (other.value > summit.value || !Number.isFinite(summit.value)) summit = other
  }
  let y = summit.x
  let value = summit.value
  let settled = summit.converged
  let edge = Number.NEGATIVE_INFINITY
  if (kappa >= 0) {
    const along = climb(
      ([alpha]) => f([alpha, 0]),
      [Math.max(y[0], 1.2)],
      [{ low: 1 + 1e-6, high: ranges[0].high }],
      [frame.scales(y, dwells, rate)[0]],
    )
    edge = along.value
    if (edge >= value - LEAST_CUTOFF_GAIN) {
      y = [along.x[0], 0]
      value = edge
      settled = along.converged
    }
  }
  if (!Number.isFinite(value)) {
    return failed(
      law,
      evaluations,
      'not-finite',
      'The likelihood is not finite for any parameter tried: this law cannot make these dwells.',
    )
  }
  const best = frame.toLaw(y)
  if (!settled) {
    return {
      ...failed(
        law,
        evaluations,
        'not-converged',
        'The search did not settle: the dwells hardly constrain this law. Prefer a law with fewer parameters.',
      ),
      coordinates: best,
      logLikelihood: value,
    }
  }

  const reported = law.parametersOf(best)
  const z = Math.sqrt(chiSquareQuantile(options.confidence, 1))
  const model = options.intervals ? localModel(f, y, value, ranges, frame.scales(y, dwells, rate)) : null
  const parameters: Record<string, Estimate> = {}
  for (const [i, { name, unit }] of law.parameters.entries()) {
    const estimate = existing(reported[i])
    if (!options.intervals) {
      parameters[name] = { estimate, low: null, high: null, unit }
      continue
    }
    const axis = frame.axes[i]
    const at = axis.read(y)
    const problem = {
      f: (v: number, other: number) => f(axis.place(v, other)),
      range: axis.range,
      otherRange: axis.otherRange,
      best: { ...at, height: value },
      ...widths(axis, y, model, frame.scales(y, dwells, rate)),
    }
    const openBelow = i === kappa && edge > value - 0.5 * z * z
    const below = openBelow ? 0 : profileLimit(problem, z, -1)
    const above = profileLimit(problem, z, 1)
    parameters[name] = { estimate, ...reportedLimits(law, best, i, below, above), unit }
  }
  const message = edgeMessage(law, best, frame.axes)
  return {
    coordinates: best,
    parameters,
    logLikelihood: value,
    evaluations,
    status: message !== '' ? 'at-bound' : options.intervals ? 'ok' : 'no-interval',
    message,
  }
}

function clipped(search: readonly number[], ranges: readonly { low: number; high: number }[]): number[] {
  return search.map((v, i) => Math.min(ranges[i].high, Math.max(ranges[i].low, v)))
}

/** A time of 0 or infinity is no time. */
function existing(value: number): number | null {
  return Number.isFinite(value) && value !== 0 ? value : null
}

/**
 * First guesses for the walk along one axis from the curvature at the top, carried from the search coordinates to
 * (value, other) by the Jacobian of the axis.
 */
function widths(
  axis: ProfileAxis,
  y: readonly number[],
  model: LocalModel | null,
  scales: readonly number[],
): { error: number; otherError: number; otherSlope: number } {
  const { value, other } = axis.read(y)
  const step = 1e-5
  const dValue = step * Math.max(Math.abs(value), 1e-3)
  const dOther = step * Math.max(Math.abs(other), 1e-3)
  const byValue = column(axis.place(value + dValue, other), axis.place(value - dValue, other), 2 * dValue)
  const fallback = (): { error: number; otherError: number; otherSlope: number } => {
    const size = Math.hypot(...byValue.map((slope, i) => slope / scales[i]))
    const guess = size > 0 ? 1 / size : Math.max(Math.abs(value), 1) * 0.1
    const otherGuess = axis.otherRange === null ? 1 : Math.max(0.1 * Math.abs(other), 1e-3)
    return { error: guess, otherError: otherGuess, otherSlope: 0 }
  }
  if (model === null) return fallback()
  const { hessian } = model
  if (axis.otherRange === null) {
    const curvature = -hessian[0][0] * byValue[0] ** 2
    return curvature > 0 ? { error: 1 / Math.sqrt(curvature), otherError: 1, otherSlope: 0 } : fallback()
  }
  const byOther = column(axis.place(value, other + dOther), axis.place(value, other - dOther), 2 * dOther)
  const form = (a: readonly number[], b: readonly number[]): number =>
    -a.reduce((sum, ai, i) => sum + ai * b.reduce((inner, bj, j) => inner + hessian[i][j] * bj, 0), 0)
  const vv = form(byValue, byValue)
  const vo = form(byValue, byOther)
  const oo = form(byOther, byOther)
  const profiled = vv - (vo * vo) / oo
  if (!(oo > 0) || !(profiled > 0)) return fallback()
  return { error: 1 / Math.sqrt(profiled), otherError: 1 / Math.sqrt(oo), otherSlope: -vo / oo }
}

function column(up: readonly number[], down: readonly number[], width: number): number[] {
  return up.map((v, i) => (v - down[i]) / width)
}

/** Limits of a reported parameter from those of its coordinate; rates turn round when they become times. */
function reportedLimits(
  law: Law,
  best: readonly number[],
  index: number,
  below: number | null,
  above: number | null,
): { low: number | null; high: number | null } {
  const report = (value: number | null): number | null =>
    value === null ? null : existing(law.parametersOf(best.map((v, i) => (i === index ? value : v)))[index])
  const { name } = law.coordinates[index]
  return name === 'kappa' || name === 'rate'
    ? { low: report(above), high: report(below) }
    : { low: report(below), high: report(above) }
}

/** Says which coordinate sits at the end of its range; empty when none does. */
function edgeMessage(law: Law, best: readonly number[], axes: readonly ProfileAxis[]): string {
  for (const [i, { name }] of law.coordinates.entries()) {
    const { low, high } = axes[i].range
    if (name === 'kappa' && best[i] <= low)
      return 'No cutoff improves the fit: the cutoff time is a lower bound. A longer record could show one.'
    const near = (end: number): boolean => Math.abs(best[i] - end) < 1e-3 * Math.abs(end)
    const beyond = best[i] <= low || best[i] >= high
    if (beyond || (name !== 'kappa' && name !== 'rate' && (near(low) || near(high))))
      return `The best ${law.parameters[i].symbol} lies at the end of its range: this law does not suit these dwells.`
  }
  return ''
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
