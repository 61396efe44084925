import type { ByteSource } from './byte-source.ts'
import { asciiText, parseDecimal } from './decimal.ts'
import type { TextAnswer } from './import-answer.ts'
import { failAtByte, failAtLine, quoted } from './read-problem.ts'

const BLOCK_BYTES = 4 << 20
/** A line longer than this is not a row of numbers. */
const LONGEST_LINE = 1 << 20

export interface RowHooks {
  onProgress(fraction: number): void
  shouldStop(): boolean
}

/** First byte of a comment: `#`, `%`, or `//`; `;` when it does not separate columns. */
export function isComment(bytes: Uint8Array, at: number, end: number, delimiter: string): boolean {
  const byte = bytes[at]
  return (
    byte === 35 ||
    byte === 37 ||
    (byte === 47 && at + 1 < end && bytes[at + 1] === 47) ||
    (byte === 59 && delimiter !== ';')
  )
}

/**
 * Calls `onRow(values, line)` for every row of numbers, in order. `values` is one buffer that is used again; it has as many
 * entries as the answer has columns, ignored ones NaN. Fails at the first line that is not such a row. CR, LF and CRLF
 * end lines; blank lines and comments are passed over. Stops early when told; returns false then. The file is read in
 * blocks of `blockBytes`.
 */
export async function readRows(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
  onRow: (values: Float64Array, line: number) => void,
  blockBytes = BLOCK_BYTES,
): Promise<boolean> {
  const { delimiter, columns } = answer
  const separator = delimiter.charCodeAt(0)
  const spaces = delimiter === ' '
  const point = answer.decimalComma ? 44 : 46
  const values = new Float64Array(columns.length).fill(Number.NaN)
  const wanted = columns.map((role) => role !== 'ignore')
  let line = 0
  let headers = answer.headerLines
  let carry = new Uint8Array(0)
  let begun = false

  const row = (bytes: Uint8Array, from: number, to: number): void => {
    let at = from
    while (at < to && (bytes[at] === 32 || (bytes[at] === 9 && separator !== 9))) at++
    let end = to
    while (end > at && (bytes[end - 1] === 32 || (bytes[end - 1] === 9 && separator !== 9))) end--
    if (at === end || isComment(bytes, at, end, delimiter)) return
    if (headers > 0) {
      headers--
      return
    }
    let column = 0
    let start = at
    for (let i = at; i <= end; i++) {
      if (i < end) {
        const byte = bytes[i]
        if (spaces ? byte !== 32 && byte !== 9 : byte !== separator) continue
      }
      if (column < values.length && wanted[column]) {
        let first = start
        let last = i
        while (first < last && (bytes[first] === 32 || bytes[first] === 9)) first++
        while (last > first && (bytes[last - 1] === 32 || bytes[last - 1] === 9)) last--
        const value = parseDecimal(bytes, first, last, point)
        if (Number.isNaN(value)) {
          failAtLine(
            source.name,
            line,
            `expected a number in column ${column + 1}, found ${quoted(asciiText(bytes, first, last))}. Correct the line or the reading of columns.`,
          )
        }
        if (value === Number.POSITIVE_INFINITY || value === Number.NEGATIVE_INFINITY)
          failAtLine(
            source.name,
            line,
            `the number ${quoted(asciiText(bytes, first, last))} in column ${column + 1} is too large. Correct the line.`,
          )
        values[column] = value
      }
      column++
      if (spaces) while (i + 1 < end && (bytes[i + 1] === 32 || bytes[i + 1] === 9)) i++
      start = i + 1
    }
    // Some programs end every row with a separator.
    if (column === values.length + 1 && !spaces && bytes[end - 1] === separator) column--
    if (column !== values.length) {
      failAtLine(
        source.name,
        line,
        `expected ${values.length} columns, found ${column}. Correct the line or choose another separator.`,
      )
    }
    onRow(values, line)
  }

  for (let at = 0; at < source.size || carry.length > 0; ) {
    if (hooks.shouldStop()) return false
    const block = await source.read(at, Math.min(source.size, at + blockBytes))
    if (block.length === 0 && at < source.size)
      failAtByte(
        source.name,
        at,
        'the file ends before its data do. Was it changed while it was read? Open it again.',
      )
    at += block.length
    const last = at >= source.size
    const bytes = new Uint8Array(carry.length + block.length)
    bytes.set(carry)
    bytes.set(block, carry.length)
    if (bytes.length < 3 && !last) {
      carry = bytes
      continue
    }
    let from = !begun && bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0
    begun = true
    for (let i = from; i < bytes.length; i++) {
      const byte = bytes[i]
      if (byte !== 10 && byte !== 13) continue
      // A CR at the very end may be half of a CRLF.
      if (byte === 13 && i + 1 === bytes.length && !last) break
      line++
      row(bytes, from, i)
      if (byte === 13 && bytes[i + 1] === 10) i++
      from = i + 1
    }
    carry = bytes.slice(from)
    if (carry.length > LONGEST_LINE)
      failAtLine(
        source.name,
        line + 1,
        'the line is longer than a megabyte: this is not a table of numbers. Choose another file.',
      )
    if (last) {
      if (carry.length > 0) {
        line++
        row(carry, 0, carry.length)
      }
      break
    }
    hooks.onProgress(at / source.size)
  }
  hooks.onProgress(1)
  return true
}
