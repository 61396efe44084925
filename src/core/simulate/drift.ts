/** One part of a slow change in time t, s. Amplitudes carry the unit of what drifts. */
export type DriftTerm =
  | { readonly kind: 'linear'; readonly perSecond: number }
  | {
      readonly kind: 'sinusoid'
      readonly amplitude: number
      readonly periodSeconds: number
      /** Time of an upward crossing of zero, s. */
      readonly zeroSeconds: number
    }
  /** amplitude x exp(-t / tau): gone after a few tau. */
  | { readonly kind: 'exponential'; readonly amplitude: number; readonly tauSeconds: number }
  /** Straight lines between knots in time order, flat outside. */
  | { readonly kind: 'knots'; readonly seconds: readonly number[]; readonly values: readonly number[] }

/** constant + the sum of terms, as functions of time. */
export interface Drift {
  /** True when there are no terms. */
  readonly constant: boolean
  at(seconds: number): number
  /** Integral over [from, to], exact to rounding. */
  integral(from: number, to: number): number
  /** How far the value can lie from the value in the middle, anywhere in [from, to]: a bound, tight for short spans. */
  excursion(from: number, to: number): number
}

/** Builds the function from its description. Knots out of time order or unequal in number, and times of 0 or below, are a RangeError. */
export function driftOf(constant: number, terms: readonly DriftTerm[]): Drift {
  for (const term of terms) {
    if (term.kind === 'knots') checkKnots(term.seconds, term.values)
    else if (term.kind === 'sinusoid') checkTime('period', term.periodSeconds)
    else if (term.kind === 'exponential') checkTime('time constant', term.tauSeconds)
  }
  return {
    constant: terms.length === 0,
    at(seconds) {
      let sum = constant
      for (const term of terms) sum += valueAt(term, seconds)
      return sum
    },
    integral(from, to) {
      let sum = constant * (to - from)
      for (const term of terms) sum += integralOver(term, from, to)
      return sum
    },
    excursion(from, to) {
      let sum = 0
      for (const term of terms) sum += steepest(term, from, to) * 0.5 * (to - from)
      return sum
    },
  }
}

function checkTime(what: string, seconds: number): void {
  if (!(seconds > 0)) throw new RangeError(`The ${what} of a drift must be above 0 s; received ${seconds} s.`)
}

function checkKnots(seconds: readonly number[], values: readonly number[]): void {
  const ordered = seconds.every((t, i) => Number.isFinite(t) && (i === 0 || t > seconds[i - 1]))
  if (seconds.length > 0 && seconds.length === values.length && ordered) return
  throw new RangeError(
    `Drift knots need rising times and one value each; received ${seconds.length} times and ${values.length} values.`,
  )
}

function valueAt(term: DriftTerm, t: number): number {
  switch (term.kind) {
    case 'linear':
      return term.perSecond * t
    case 'sinusoid':
      return term.amplitude * Math.sin((2 * Math.PI * (t - term.zeroSeconds)) / term.periodSeconds)
    case 'exponential':
      return term.amplitude * Math.exp(-t / term.tauSeconds)
    case 'knots': {
      const { seconds, values } = term
      if (t <= seconds[0]) return values[0]
      const right = seconds.findIndex((knot) => knot > t)
      if (right < 0) return values[values.length - 1]
      const share = (t - seconds[right - 1]) / (seconds[right] - seconds[right - 1])
      return values[right - 1] + share * (values[right] - values[right - 1])
    }
  }
}

function integralOver(term: DriftTerm, a: number, b: number): number {
  switch (term.kind) {
    case 'linear':
      return 0.5 * term.perSecond * (b - a) * (b + a)
    case 'sinusoid': {
      // cos A - cos B as a product keeps short spans exact.
      const omega = (2 * Math.PI) / term.periodSeconds
      const middle = Math.sin(omega * (0.5 * (a + b) - term.zeroSeconds))
      return (2 * term.amplitude * middle * Math.sin(0.5 * omega * (b - a))) / omega
    }
    case 'exponential':
      return (
        -term.amplitude *
        term.tauSeconds *
        Math.exp(-a / term.tauSeconds) *
        Math.expm1((a - b) / term.tauSeconds)
      )
    case 'knots': {
      // Trapezia between the knots inside [a, b] and its ends.
      let sum = 0
      let from = a
      let low = valueAt(term, a)
      for (const knot of term.seconds) {
        if (knot <= a) continue
        const to = Math.min(knot, b)
        const high = valueAt(term, to)
        sum += 0.5 * (low + high) * (to - from)
        if (knot >= b) return sum
        from = to
        low = high
      }
      return sum + low * (b - from)
    }
  }
}

/** Largest slope in [a, b], absolute. */
function steepest(term: DriftTerm, a: number, b: number): number {
  switch (term.kind) {
    case 'linear':
      return Math.abs(term.perSecond)
    case 'sinusoid':
      return Math.abs(term.amplitude) * Math.min((2 * Math.PI) / term.periodSeconds, 4 / (b - a))
    case 'exponential':
      return (Math.abs(term.amplitude) / term.tauSeconds) * Math.exp(-a / term.tauSeconds)
    case 'knots': {
      let slope = 0
      for (let i = 1; i < term.seconds.length; i++) {
        if (term.seconds[i] <= a || term.seconds[i - 1] >= b) continue
        const rise = term.values[i] - term.values[i - 1]
        slope = Math.max(slope, Math.abs(rise / (term.seconds[i] - term.seconds[i - 1])))
      }
      return slope
    }
  }
}
