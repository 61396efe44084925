import type { ByteSource } from './byte-source.ts'
import type { NpyHeader } from './npy-header.ts'
import { failAtByte } from './read-problem.ts'
import type { RowHooks } from './text-rows.ts'

const BLOCK_ITEMS = 1 << 18

/** IEEE 754 half precision. */
function halfToNumber(bits: number): number {
  const sign = bits & 0x8000 ? -1 : 1
  const exponent = (bits >> 10) & 31
  const fraction = bits & 1023
  if (exponent === 0) return sign * fraction * 2 ** -24
  if (exponent === 31) return fraction === 0 ? sign * Number.POSITIVE_INFINITY : Number.NaN
  return sign * (1 + fraction / 1024) * 2 ** (exponent - 15)
}

type Reader = (view: DataView, at: number, little: boolean) => number

function readerOf({ kind, itemBytes }: Pick<NpyHeader, 'kind' | 'itemBytes'>): Reader {
  if (kind === 'f') {
    if (itemBytes === 2) return (view, at, little) => halfToNumber(view.getUint16(at, little))
    return itemBytes === 4
      ? (view, at, little) => view.getFloat32(at, little)
      : (view, at, little) => view.getFloat64(at, little)
  }
  if (itemBytes === 1) return kind === 'i' ? (view, at) => view.getInt8(at) : (view, at) => view.getUint8(at)
  if (itemBytes === 2)
    return kind === 'i'
      ? (view, at, little) => view.getInt16(at, little)
      : (view, at, little) => view.getUint16(at, little)
  if (itemBytes === 4)
    return kind === 'i'
      ? (view, at, little) => view.getInt32(at, little)
      : (view, at, little) => view.getUint32(at, little)
  // 64 bits by halves: exact up to 2^53, and beyond it only the comparison with 2^53 matters.
  return (view, at, little) => {
    const low = view.getUint32(little ? at : at + 4, little)
    const high =
      kind === 'i'
        ? view.getInt32(little ? at + 4 : at, little)
        : view.getUint32(little ? at + 4 : at, little)
    return high * 4294967296 + low
  }
}

/**
 * Hands over the numbers of an array in the order of the file, in blocks: `onBlock(values, count, firstItem)`; `values` is
 * used again. False when stopped.
 */
export async function readNpyValues(
  source: ByteSource,
  header: NpyHeader,
  hooks: RowHooks,
  onBlock: (values: Float64Array, count: number, firstItem: number) => void,
): Promise<boolean> {
  const { itemBytes, littleEndian, items, dataStart } = header
  const read = readerOf(header)
  const values = new Float64Array(Math.min(BLOCK_ITEMS, items))
  for (let first = 0; first < items; first += BLOCK_ITEMS) {
    if (hooks.shouldStop()) return false
    const count = Math.min(BLOCK_ITEMS, items - first)
    const at = dataStart + first * itemBytes
    const bytes = await source.read(at, at + count * itemBytes)
    if (bytes.length !== count * itemBytes)
      failAtByte(
        source.name,
        at + bytes.length,
        'the file ends before its data do. Was it changed while it was read? Open it again.',
      )
    const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
    for (let i = 0; i < count; i++) values[i] = read(view, i * itemBytes, littleEndian)
    onBlock(values, count, first)
    hooks.onProgress((first + count) / items)
  }
  return true
}
