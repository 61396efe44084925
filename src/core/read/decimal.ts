const POWERS = Array.from({ length: 23 }, (_, i) => 10 ** i)
const ZERO = 48
const NINE = 57

/** Bytes as Latin-1 text; numbers are ASCII, and names keep their bytes until decoded properly. */
export function asciiText(bytes: Uint8Array, from: number, to: number): string {
  let text = ''
  for (let i = from; i < to; i++) text += String.fromCharCode(bytes[i])
  return text
}

/**
 * The decimal number in bytes [from, to), correctly rounded: up to 15 digits and powers of ten up to 22 exactly in
 * double arithmetic, everything else through Number. NaN when it is not a number; `nan` and `inf` are not.
 * @param point byte of the decimal sign
 */
export function parseDecimal(bytes: Uint8Array, from: number, to: number, point: number): number {
  let i = from
  let negative = false
  if (i < to && (bytes[i] === 45 || bytes[i] === 43)) {
    negative = bytes[i] === 45
    i++
  }
  let mantissa = 0
  let digits = 0
  let scale = 0
  const begin = i
  for (; i < to && bytes[i] >= ZERO && bytes[i] <= NINE; i++) {
    mantissa = mantissa * 10 + (bytes[i] - ZERO)
    if (mantissa !== 0) digits++
  }
  let any = i > begin
  if (i < to && bytes[i] === point) {
    i++
    const fraction = i
    for (; i < to && bytes[i] >= ZERO && bytes[i] <= NINE; i++) {
      mantissa = mantissa * 10 + (bytes[i] - ZERO)
      if (mantissa !== 0) digits++
    }
    scale = fraction - i
    any ||= i > fraction
  }
  if (!any) return Number.NaN
  if (i < to && (bytes[i] === 101 || bytes[i] === 69)) {
    i++
    let sign = 1
    if (i < to && (bytes[i] === 45 || bytes[i] === 43)) {
      sign = bytes[i] === 45 ? -1 : 1
      i++
    }
    let exponent = 0
    const start = i
    for (; i < to && bytes[i] >= ZERO && bytes[i] <= NINE; i++)
      exponent = Math.min(9999, exponent * 10 + bytes[i] - ZERO)
    if (i === start) return Number.NaN
    scale += sign * exponent
  }
  if (i !== to) return Number.NaN
  let value: number
  if (digits <= 15 && scale >= -22 && scale <= 22) {
    value = scale < 0 ? mantissa / POWERS[-scale] : mantissa * POWERS[scale]
  } else {
    const text = asciiText(bytes, from, to)
    return Number(point === 46 ? text : text.replace(String.fromCharCode(point), '.'))
  }
  return negative ? -value : value
}

/** Decimals of a number as written: digits after the point less the exponent, at least 0. */
export function decimalsOf(text: string): number {
  const match = /^[+-]?\d*(?:[.,](\d*))?(?:[eE]([+-]?\d+))?$/.exec(text.trim())
  if (match === null) return 0
  return Math.max(0, (match[1] ?? '').length - Number(match[2] ?? 0))
}
