import { crc32, inflateRawSync } from 'node:zlib'
import { inflateSync } from 'fflate'
import type { ArrayAnswer, ImportAnswer, TextAnswer } from '../../src/core/read/import-answer.ts'

/** What an obvious, slow reader finds: one list of numbers per column in use (text) or per emitter (array). */
export interface SlowRead {
  readonly columns: readonly (readonly number[])[]
  /** Time of every row of a text, in the unit of the file; null without a time column. */
  readonly times: readonly number[] | null
  readonly gates: readonly number[] | null
}

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i

/** Reads with strings, regular expressions and BigInt, sharing nothing with the readers; null when it cannot. */
export function slowRead(bytes: Uint8Array, answer: ImportAnswer): SlowRead | null {
  if (answer.kind === 'text') return slowText(bytes, answer)
  if (answer.kind === 'npy') return slowArray(bytes, answer)
  const member = slowMember(bytes, answer.member ?? '')
  return member === null ? null : slowArray(member, answer)
}

/** A member found by its name in the directory, unpacked by zlib, when its checksum is right. */
function slowMember(bytes: Uint8Array, name: string): Uint8Array | null {
  const file = Buffer.from(bytes)
  // Names that are not valid UTF-8 are Latin-1.
  const wanted = [Buffer.from(name), Buffer.from(name, 'latin1')]
  for (
    let at = file.indexOf('PK\u0001\u0002', 0, 'latin1');
    at >= 0;
    at = file.indexOf('PK\u0001\u0002', at + 4, 'latin1')
  ) {
    if (at + 46 > file.length) return null
    const nameBytes = file.readUInt16LE(at + 28)
    if (!wanted.some((one) => one.equals(file.subarray(at + 46, at + 46 + nameBytes)))) continue
    const header = file.readUInt32LE(at + 42)
    const start = header + 30 + file.readUInt16LE(header + 26) + file.readUInt16LE(header + 28)
    const packed = file.subarray(start, start + file.readUInt32LE(at + 20))
    const data = file.readUInt16LE(at + 10) === 8 ? unpacked(packed) : packed
    return crc32(data) === file.readUInt32LE(at + 16) ? data : null
  }
  return null
}

/**
 * zlib refuses code tables with codes that nothing uses; the readers pass over them, since size and checksum of what
 * comes out decide. Only for such data the same library unpacks here, and zlib's checksum is the judge.
 */
function unpacked(packed: Uint8Array): Uint8Array {
  try {
    return inflateRawSync(packed)
  } catch {
    return inflateSync(packed)
  }
}

function slowText(bytes: Uint8Array, answer: TextAnswer): SlowRead | null {
  const { delimiter, columns, decimalComma, headerLines } = answer
  const text = Buffer.from(bytes)
    .toString('latin1')
    .replace(/^\u00ef\u00bb\u00bf/, '')
  const comment = delimiter === ';' ? /^(#|%|\/\/)/ : /^(#|%|;|\/\/)/
  const edges = delimiter === '\t' ? /^ +| +$/g : /^[ \t]+|[ \t]+$/g
  const rows = text
    .split(/\r\n|\r|\n/)
    .map((line) => line.replace(edges, ''))
    .filter((line) => line !== '' && !comment.test(line))
    .slice(headerLines)
    .map((line) => (delimiter === ' ' ? line.split(/[ \t]+/) : line.split(delimiter)))
  const table: number[][] = columns.map(() => [])
  for (const row of rows) {
    const fields = row.length === columns.length + 1 && row[columns.length] === '' ? row.slice(0, -1) : row
    if (fields.length !== columns.length) return null
    for (const [i, field] of fields.entries()) {
      if (columns[i] === 'ignore') continue
      const trimmed = field.replace(/^[ \t]+|[ \t]+$/g, '')
      const written = decimalComma ? trimmed.replace('.', '!').replace(',', '.') : trimmed
      if (!NUMBER.test(written)) return null
      table[i].push(Number(written))
    }
  }
  const of = (role: string): number[] | null => table[(columns as readonly string[]).indexOf(role)] ?? null
  const arrivals = of('arrival')
  return {
    columns: arrivals === null ? table.filter((_, i) => /^(counts|rate-)/.test(columns[i])) : [arrivals],
    times: of('time'),
    gates: of('gate'),
  }
}

function slowArray(bytes: Uint8Array, answer: ArrayAnswer): SlowRead | null {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  const wide = bytes[6] > 1
  const start = wide ? 12 + view.getUint32(8, true) : 10 + view.getUint16(8, true)
  const header = Buffer.from(bytes.subarray(0, start)).toString('latin1')
  const descr = header.match(/'descr'\s*:\s*'(.)(.)(\d)'/)
  const shape = (header.match(/'shape'\s*:\s*\(([^)]*)\)/)?.[1].match(/\d+/g) ?? []).map(Number)
  if (descr === null || shape.length < 1 || shape.length > 2) return null
  const [, order, kind, digit] = descr
  const size = Number(digit)
  const items = shape.reduce((a, b) => a * b, 1)
  if (start + items * size !== bytes.length) return null
  const values = Array.from({ length: items }, (_, i) => {
    const item = Array.from(bytes.subarray(start + i * size, start + (i + 1) * size))
    if (order !== '>') item.reverse()
    return numberOf(item, kind)
  })
  if (shape.length === 1 || answer.content === 'arrival')
    return { columns: [values], times: null, gates: null }
  const [rows, columns] = shape
  const at = (r: number, c: number): number =>
    values[/'fortran_order'\s*:\s*True/.test(header) ? c * rows + r : r * columns + c]
  const range = (n: number): number[] => Array.from({ length: n }, (_, i) => i)
  const emitters =
    answer.emitters === 'rows'
      ? range(rows).map((r) => range(columns).map((c) => at(r, c)))
      : range(columns).map((c) => range(rows).map((r) => at(r, c)))
  return { columns: emitters, times: null, gates: null }
}

/** A number from its bytes, most significant first. */
function numberOf(item: readonly number[], kind: string): number {
  const bits = item.reduce((all, byte) => all * 256n + BigInt(byte), 0n)
  const width = item.length * 8
  if (kind !== 'f') return Number(kind === 'i' ? BigInt.asIntN(width, bits) : bits)
  const [exponentBits, bias] = width === 16 ? [5, 15] : width === 32 ? [8, 127] : [11, 1023]
  const fractionBits = width - 1 - exponentBits
  const sign = bits >> BigInt(width - 1) === 1n ? -1 : 1
  const exponent = Number((bits >> BigInt(fractionBits)) & BigInt(2 ** exponentBits - 1))
  const fraction = Number(bits & ((1n << BigInt(fractionBits)) - 1n)) / 2 ** fractionBits
  if (exponent === 2 ** exponentBits - 1) return fraction === 0 ? sign * Number.POSITIVE_INFINITY : Number.NaN
  return sign * (exponent === 0 ? fraction * 2 ** (1 - bias) : (1 + fraction) * 2 ** (exponent - bias))
}
