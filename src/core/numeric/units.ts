/**
 * A number as people write it: its last digit is that of the uncertainty, or `digits` of them when there is none; powers of ten only from 10^6 up and below 10^-5. NaN gives `not available`.
 */
export function roundTo(value: number, uncertainty: number | null, digits = 3): string {
  if (Number.isNaN(value)) return 'not available'
  if (!Number.isFinite(value)) return value > 0 ? '∞' : '−∞'
  if (value === 0) return '0'
  const magnitude = Math.floor(Math.log10(Math.abs(value)))
  const place =
    uncertainty !== null && uncertainty > 0 && Number.isFinite(uncertainty)
      ? lastPlace(uncertainty)
      : magnitude - digits + 1
  const decimals = Math.max(0, Math.min(12, -place))
  if (magnitude >= 6 || magnitude < -5)
    return minus(value.toExponential(Math.max(1, digits - 1)).replace('e+', 'e'))
  return minus(
    place > 0
      ? String(Number(value.toPrecision(Math.max(1, magnitude - place + 1))))
      : value.toFixed(decimals),
  )
}

/**
 * Power of ten of the last digit worth writing: two digits of the uncertainty when they start with 10 to 35, one from
 * 36 to 94, and from 95 on two of the rounded 1.0 (Particle Data Group, Review of Particle Physics, section 5.3).
 */
function lastPlace(uncertainty: number): number {
  const power = Math.floor(Math.log10(uncertainty))
  const leading = uncertainty / 10 ** power
  return leading < 3.55 ? power - 1 : power
}

/** A true minus sign, as wide as the plus. */
function minus(text: string): string {
  return text.replace('-', '−')
}

const DURATIONS = [
  { unit: 's', size: 1 },
  { unit: 'ms', size: 1e-3 },
  { unit: 'µs', size: 1e-6 },
  { unit: 'ns', size: 1e-9 },
] as const

/** A duration with the unit a reader expects: `20 ms`, `5.3 s`. Null gives `not available`. */
export function siDuration(seconds: number | null, digits = 3): string {
  if (seconds === null || Number.isNaN(seconds)) return 'not available'
  if (seconds === Number.POSITIVE_INFINITY) return '∞'
  if (seconds === 0) return '0 s'
  const scale = DURATIONS.find(({ size }) => Math.abs(seconds) >= size * 0.9995) ?? DURATIONS[3]
  return `${minus(String(Number((seconds / scale.size).toPrecision(digits))))} ${scale.unit}`
}

/**
 * Estimate and interval as text: `1.52` and `[1.44, 1.61]`; a bound as `> 3.1 s`; `not available` when all are null.
 * Both are rounded by the standard error on the narrower side: half the distance from the estimate to that limit at 95 %.
 */
export function formatEstimate(value: {
  readonly estimate: number | null
  readonly low: number | null
  readonly high: number | null
  readonly unit: string
}): { text: string; interval: string } {
  const { estimate, low, high, unit } = value
  const suffix = unit === '' ? '' : ` ${unit}`
  if (estimate === null && low === null && high === null) return { text: 'not available', interval: '' }
  if (estimate === null && low !== null)
    return { text: `> ${roundTo(low, null, 2)}${suffix}`, interval: 'bound' }
  if (estimate === null)
    return { text: `< ${roundTo(high ?? Number.NaN, null, 2)}${suffix}`, interval: 'bound' }
  const sides = [low, high].flatMap((limit) => (limit === null ? [] : [Math.abs(limit - estimate)]))
  const width = sides.length === 0 ? null : Math.min(...sides) / 2
  const one = (x: number | null): string => (x === null ? '∞' : roundTo(x, width))
  return {
    text: `${roundTo(estimate, width)}${suffix}`,
    interval: low === null && high === null ? '' : `[${low === null ? '−∞' : one(low)}, ${one(high)}]`,
  }
}
