import type { Law } from '../laws/law.ts'
import type { Range } from './climb.ts'

/** One law coordinate held fixed, with the search coordinate that is maximised beside it. */
export interface ProfileAxis {
  readonly range: Range
  /** Null for laws of one coordinate. */
  readonly otherRange: Range | null
  /** Search coordinates at a value of the law coordinate and of the other one. */
  place(value: number, other: number): number[]
  read(search: readonly number[]): { value: number; other: number }
}

/**
 * Coordinates in which the likelihood of a law is nearly a paraboloid, for the search only. They are those of the law
 * except where those have a curved ridge when the dwells resemble a power law; u = ln(t/g), g a typical duration:
 *
 *   log-normal   (b, c) with f ~ t^-1 exp(-b u - c u^2/2): b = (ln g - ln t_m)/sigma^2, c = 1/sigma^2. These are natural
 *                parameters, so ln L is concave without censoring.
 *   stretched    (ln a, beta) with S ~ exp[-(a/beta) e^(beta u)], a = beta (g/tau)^beta.
 *
 * Both are the power law of exponent 1 + b, 1 + a at c = 0, beta = 0. When ln t_m or ln tau is profiled far below the bin,
 * c and beta fall with its inverse, so their logarithms are maximised: widths stay alike.
 */
export interface SearchFrame {
  readonly ranges: readonly Range[]
  toLaw(search: readonly number[]): number[]
  fromLaw(coordinates: readonly number[]): number[]
  /**
   * Rough size of a change that matters.
   * @param dwells complete ones
   * @param rate 1/s, of the start: the unit of a rate that is 0
   */
  scales(search: readonly number[], dwells: number, rate: number): number[]
  /** One per law coordinate. */
  readonly axes: readonly ProfileAxis[]
}

/** Rates above this many per shortest duration describe nothing that could be seen. */
const FASTEST = 50

/** @param typicalSeconds geometric mean of the dwells, or near it */
export function searchFrame(law: Law, shortestSeconds: number, typicalSeconds: number): SearchFrame {
  if (law.name === 'log-normal') return logNormalFrame(law, Math.log(typicalSeconds))
  if (law.name === 'stretched') return stretchedFrame(law, Math.log(typicalSeconds))
  return ownFrame(law, shortestSeconds, typicalSeconds)
}

function logarithm({ low, high }: Range): Range {
  return { low: Math.log(low), high: Math.log(high) }
}

function shareOf(dwells: number): number {
  return Math.max(0.005, 1 / Math.sqrt(Math.max(dwells, 1)))
}

/** The law's own coordinates; rates get an upper end tied to the shortest duration, exponents stay above 1. */
function ownFrame(law: Law, shortestSeconds: number, typicalSeconds: number): SearchFrame {
  const ranges = law.coordinates.map(({ name, low, high }) => {
    if (name === 'kappa') return { low: 0, high: FASTEST / shortestSeconds }
    if (name === 'rate') return { low: 1e-12 / typicalSeconds, high: FASTEST / shortestSeconds }
    return { low: name === 'alpha' && low === 1 ? 1 + 1e-9 : low, high }
  })
  const two = ranges.length === 2
  return {
    ranges,
    toLaw: (search) => [...search],
    fromLaw: (coordinates) => [...coordinates],
    scales: (search, dwells, rate) =>
      law.coordinates.map(({ name }, i) =>
        name === 'kappa' || name === 'rate'
          ? 0.5 * shareOf(dwells) * Math.max(search[i], 0.02 * rate)
          : shareOf(dwells),
      ),
    axes: ranges.map((range, i) => ({
      range,
      otherRange: two ? ranges[1 - i] : null,
      place: (value, other) => (two ? (i === 0 ? [value, other] : [other, value]) : [value]),
      read: (search) => ({ value: search[i], other: two ? search[1 - i] : 0 }),
    })),
  }
}

function logNormalFrame(law: Law, lnTypical: number): SearchFrame {
  const [median, sigma] = law.coordinates
  const slope: Range = { low: -1e5, high: 50 }
  const curvature: Range = { low: sigma.high ** -2, high: sigma.low ** -2 }
  return {
    ranges: [slope, curvature],
    toLaw: ([b, c]) => [lnTypical - b / c, 1 / Math.sqrt(c)],
    fromLaw: ([mean, s]) => [(lnTypical - mean) / (s * s), 1 / (s * s)],
    scales: ([b, c], dwells) => [shareOf(dwells) * (1 + Math.abs(b)), shareOf(dwells) * (c + 0.02)],
    axes: [
      {
        range: median,
        otherRange: logarithm(curvature),
        place: (mean, lnC) => [(lnTypical - mean) * Math.exp(lnC), Math.exp(lnC)],
        read: ([b, c]) => ({ value: lnTypical - b / c, other: Math.log(c) }),
      },
      {
        range: sigma,
        otherRange: slope,
        place: (s, b) => [b, 1 / (s * s)],
        read: ([b, c]) => ({ value: 1 / Math.sqrt(c), other: b }),
      },
    ],
  }
}

function stretchedFrame(law: Law, lnTypical: number): SearchFrame {
  const [lnTau, beta] = law.coordinates
  const lnA: Range = { low: -300, high: Math.log(FASTEST) }
  return {
    ranges: [lnA, beta],
    toLaw: ([a, b]) => [lnTypical + (Math.log(b) - a) / b, b],
    fromLaw: ([tau, b]) => [Math.log(b) + b * (lnTypical - tau), b],
    scales: ([, b], dwells) => [2 * shareOf(dwells), shareOf(dwells) * (b + 0.05)],
    axes: [
      {
        range: lnTau,
        otherRange: logarithm(beta),
        place: (tau, lnB) => [lnB + Math.exp(lnB) * (lnTypical - tau), Math.exp(lnB)],
        read: ([a, b]) => ({ value: lnTypical + (Math.log(b) - a) / b, other: Math.log(b) }),
      },
      { range: beta, otherRange: lnA, place: (b, a) => [a, b], read: ([a, b]) => ({ value: b, other: a }) },
    ],
  }
}
