import { ticks as linearTicks } from 'd3'
import type { Axis, Frame } from './scene.ts'

/** Place of a data value along an axis, 0..1 from its first end; log axes give NaN for values <= 0. */
export function shareOf(axis: Axis, value: number): number {
  const [a, b] = axis.domain
  if (axis.kind === 'linear') return (value - a) / (b - a)
  return (Math.log(value) - Math.log(a)) / (Math.log(b) - Math.log(a))
}

/** Data value at a place 0..1 along an axis. */
export function valueAt(axis: Axis, share: number): number {
  const [a, b] = axis.domain
  return axis.kind === 'linear' ? a + share * (b - a) : a * (b / a) ** share
}

/** Functions from data to figure units for one panel. */
export interface Coordinates {
  readonly x: (value: number) => number
  readonly y: (value: number) => number
}

export function coordinates(frame: Frame, x: Axis, y: Axis): Coordinates {
  const place = (axis: Axis, from: number, length: number): ((value: number) => number) => {
    const [a, b] = axis.domain
    if (axis.kind === 'linear') {
      const slope = length / (b - a)
      return (value) => from + (value - a) * slope
    }
    const lnA = Math.log(a)
    const slope = length / (Math.log(b) - lnA)
    return (value) => from + (Math.log(value) - lnA) * slope
  }
  return {
    x: place(x, frame.x, frame.width),
    y: place(y, frame.y + frame.height, -frame.height),
  }
}

export interface Tick {
  readonly value: number
  /** Empty for minor ticks. */
  readonly label: string
}

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'

/** 10 to a whole power as people print it. */
export function powerOfTen(exponent: number): string {
  if (exponent >= -2 && exponent <= 3)
    return exponent < 0 ? (10 ** exponent).toFixed(-exponent) : String(10 ** exponent)
  const digits = String(Math.abs(exponent))
    .split('')
    .map((digit) => SUPERSCRIPTS[Number(digit)])
    .join('')
  return `10${exponent < 0 ? '⁻' : ''}${digits}`
}

/** Ticks of an axis. Log axes label decades (every second or third when crowded) and mark 2..9 between few decades. */
export function ticksOf(axis: Axis, length: number, fontSize: number): Tick[] {
  const [low, high] = axis.domain[0] < axis.domain[1] ? axis.domain : [axis.domain[1], axis.domain[0]]
  if (!(high > low)) return []
  if (axis.kind === 'linear') {
    const values = linearTicks(low, high, axis.ticks)
    const step = values.length > 1 ? values[1] - values[0] : 1
    const decimals = Math.max(0, Math.min(8, -Math.floor(Math.log10(step) + 1e-9)))
    return values.map((value) => ({ value, label: value.toFixed(decimals).replace('-', '−') }))
  }
  const first = Math.floor(Math.log10(low))
  const last = Math.ceil(Math.log10(high))
  const decades = Math.log10(high / low)
  const room = length / (decades * fontSize)
  const every = room > 2.6 ? 1 : room > 1.3 ? 2 : 3
  const out: Tick[] = []
  for (let decade = first; decade <= last; decade++) {
    for (let digit = 1; digit <= 9; digit++) {
      const value = digit * 10 ** decade
      if (value < low * (1 - 1e-9) || value > high * (1 + 1e-9)) continue
      if (digit === 1) {
        const labelled = every === 1 || decade % every === 0
        out.push({ value, label: labelled ? powerOfTen(decade) : '' })
      } else if (room > 3.5) {
        // With less than a decade in view the decades alone would label nothing.
        out.push({
          value,
          label: decades < 1 && (digit === 2 || digit === 5) ? String(Number(value.toPrecision(2))) : '',
        })
      }
    }
  }
  return out
}
