import type { ByteSource } from './byte-source.ts'
import { asciiText } from './decimal.ts'
import { failAtByte, failWhole, quoted } from './read-problem.ts'

/** What the header of a .npy says, checked against the size of the file. */
export interface NpyHeader {
  readonly kind: 'i' | 'u' | 'f' | 'b'
  readonly itemBytes: 1 | 2 | 4 | 8
  readonly littleEndian: boolean
  readonly fortranOrder: boolean
  readonly shape: readonly number[]
  /** First byte of the data. */
  readonly dataStart: number
  readonly items: number
  readonly dtype: string
}

const MAGIC = [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59]
/** Longest header read; the format itself allows more, for structured types this program does not read. */
const LONGEST_HEADER = 1 << 16

const ENTRY =
  /\s*(['"])(descr|fortran_order|shape)\1\s*:\s*(?:'([^'\\]*)'|(True|False)|\(([^()]*)\))\s*(?:,|(?=\}))/y

/** The three entries of the header, a Python dictionary that holds nothing else; null when it is anything else. */
function entriesOf(text: string): { descr: string; order: string; shapeText: string } | null {
  const body = text.trim()
  if (!body.startsWith('{') || !body.endsWith('}')) return null
  const found = new Map<string, RegExpExecArray>()
  ENTRY.lastIndex = 1
  for (let at = 1; found.size < 3; at = ENTRY.lastIndex) {
    ENTRY.lastIndex = at
    const entry = ENTRY.exec(body)
    if (entry === null || found.has(entry[2])) return null
    found.set(entry[2], entry)
  }
  if (body.slice(ENTRY.lastIndex, -1).trim() !== '') return null
  const descr = found.get('descr')?.[3]
  const order = found.get('fortran_order')?.[4]
  const shapeText = found.get('shape')?.[5]
  return descr === undefined || order === undefined || shapeText === undefined
    ? null
    : { descr, order, shapeText }
}

export function isNpy(bytes: Uint8Array): boolean {
  return MAGIC.every((byte, i) => bytes[i] === byte)
}

/**
 * Header of the published NumPy format, versions 1 to 3. Every number in it is compared with the size of the file
 * before anything is allocated.
 */
export async function readNpyHeader(source: ByteSource): Promise<NpyHeader> {
  const start = await source.read(0, Math.min(source.size, 12))
  if (start.length < 10 || !isNpy(start))
    failAtByte(source.name, 0, 'expected a NumPy array, which begins with \\x93NUMPY. Choose a .npy file.')
  const version = start[6]
  if (version < 1 || version > 3)
    failAtByte(
      source.name,
      6,
      `NumPy format version ${version} is not known; save the array again with a current NumPy.`,
    )
  const lengthBytes = version === 1 ? 2 : 4
  const headerStart = 8 + lengthBytes
  if (start.length < headerStart)
    failAtByte(source.name, 8, 'the file ends inside its header. It is cut short; copy it again.')
  const length =
    version === 1
      ? start[8] | (start[9] << 8)
      : start[8] + start[9] * 256 + start[10] * 65536 + start[11] * 16777216
  if (length > LONGEST_HEADER || headerStart + length > source.size) {
    failAtByte(
      source.name,
      8,
      `the header claims ${length} bytes; the file has ${source.size}. The file is damaged or not a NumPy array; copy it again.`,
    )
  }
  const bytes = await source.read(headerStart, headerStart + length)
  const text = asciiText(bytes, 0, bytes.length)
  const entries = entriesOf(text)
  if (entries === null && /'descr'\s*:\s*\[/.test(text))
    failAtByte(source.name, headerStart, 'structured arrays are not read. Save one field as a plain array.')
  if (entries === null) {
    failAtByte(
      source.name,
      headerStart,
      'the header is not a list of descr, fortran_order and shape. The file is damaged; copy it again or save it anew.',
    )
  }
  const { descr, order, shapeText } = entries
  const type = /^([<>|=])([iufb])([1248])$/.exec(descr)
  if (type === null || (type[2] === 'f' && type[3] === '1') || (type[2] === 'b' && type[3] !== '1')) {
    failAtByte(
      source.name,
      headerStart,
      `type ${quoted(descr)} is not read; integers, booleans and real numbers are. Convert with astype().`,
    )
  }
  const parts = shapeText.split(',').map((part) => part.trim())
  // `(3,)` and `()`.
  if (parts[parts.length - 1] === '') parts.pop()
  if (!parts.every((part) => /^\d{1,15}L?$/.test(part)))
    failAtByte(
      source.name,
      headerStart,
      `the shape ${quoted(`(${shapeText})`)} is not a list of whole numbers. The file is damaged; copy it again or save it anew.`,
    )
  // Python 2 wrote `3L`.
  const shape = parts.map((part) => Number.parseInt(part, 10))
  if (shape.length === 0 || shape.length > 2)
    failWhole(
      source.name,
      `the array has ${shape.length} dimensions; one or two are read. Reshape it before saving.`,
    )
  const items = shape.reduce((product, size) => product * size, 1)
  const itemBytes = Number(type[3]) as NpyHeader['itemBytes']
  const dataStart = headerStart + length
  if (items === 0) failWhole(source.name, 'the array is empty. Save an array with data.')
  if (items * itemBytes !== source.size - dataStart) {
    failAtByte(
      source.name,
      dataStart,
      `the header promises ${items} numbers of ${itemBytes} bytes, the file holds ${source.size - dataStart} bytes of data. It is cut short or damaged; copy it again.`,
    )
  }
  return {
    kind: type[2] as NpyHeader['kind'],
    itemBytes,
    littleEndian: type[1] !== '>',
    fortranOrder: order === 'True',
    shape,
    dataStart,
    items,
    dtype: descr,
  }
}
