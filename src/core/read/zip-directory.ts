import type { ByteSource } from './byte-source.ts'
import { failAtByte, failWhole, quoted } from './read-problem.ts'
import { utf8Text } from './utf8-text.ts'

/** A file inside an archive, as the archive's directory describes it. */
export interface ZipEntry {
  readonly name: string
  /** 0 stored, 8 deflated. */
  readonly method: number
  readonly crc: number
  /** Bytes in the archive and unpacked. */
  readonly packedBytes: number
  readonly bytes: number
  /** First byte of the entry's own header. */
  readonly headerStart: number
}

const END_BYTES = 22
const LONGEST_COMMENT = 65535
const ENTRY_BYTES = 46
const MOST_ENTRIES = 10_000
const LARGEST_DIRECTORY = 1 << 24
const DAMAGED = 'The archive is damaged or cut short; copy it again or save it anew.'
const BIG = 'It is larger than 4 GB (zip64), which is not read. Save its arrays one by one.'

export function isZip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x50 && bytes[1] === 0x4b && bytes[2] === 0x03 && bytes[3] === 0x04
}

function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
}

/**
 * Entries from the directory at the end of a ZIP archive (PKWARE APPNOTE 6.3, sections 4.3.12 and 4.3.16). Sizes and
 * places are compared with the size of the file before anything is allocated.
 */
export async function zipDirectory(source: ByteSource): Promise<ZipEntry[]> {
  const tailStart = Math.max(0, source.size - END_BYTES - LONGEST_COMMENT)
  const tail = await source.read(tailStart, source.size)
  const view = viewOf(tail)
  let end = tail.length - END_BYTES
  while (
    end >= 0 &&
    !(
      view.getUint32(end, true) === 0x06054b50 &&
      end + END_BYTES + view.getUint16(end + 20, true) === tail.length
    )
  )
    end--
  if (end < 0) failWhole(source.name, `the directory at the end of the archive is missing. ${DAMAGED}`)
  const count = view.getUint16(end + 10, true)
  const size = view.getUint32(end + 12, true)
  const start = view.getUint32(end + 16, true)
  if (count === 0xffff || size === 0xffffffff || start === 0xffffffff)
    failAtByte(source.name, tailStart + end, `the archive is too large. ${BIG}`)
  if (view.getUint32(end + 4, true) !== 0 || view.getUint16(end + 8, true) !== count)
    failAtByte(
      source.name,
      tailStart + end,
      `the archive is a part of several or contradicts itself. ${DAMAGED}`,
    )
  if (start + size > tailStart + end || size > LARGEST_DIRECTORY || count > MOST_ENTRIES)
    failAtByte(
      source.name,
      tailStart + end,
      `the archive claims ${count} members in a directory of ${size} bytes at ${start}. ${DAMAGED}`,
    )
  const bytes = await source.read(start, start + size)
  return entriesIn(source, bytes, start, count)
}

function entriesIn(source: ByteSource, bytes: Uint8Array, start: number, count: number): ZipEntry[] {
  const view = viewOf(bytes)
  const entries: ZipEntry[] = []
  let at = 0
  for (let i = 0; i < count; i++) {
    if (at + ENTRY_BYTES > bytes.length || view.getUint32(at, true) !== 0x02014b50)
      failAtByte(
        source.name,
        start + at,
        `member ${i + 1} of ${count} is missing in the directory. ${DAMAGED}`,
      )
    const nameBytes = view.getUint16(at + 28, true)
    const next = at + ENTRY_BYTES + nameBytes + view.getUint16(at + 30, true) + view.getUint16(at + 32, true)
    if (next > bytes.length)
      failAtByte(source.name, start + at, `the name of member ${i + 1} is cut off. ${DAMAGED}`)
    const name = utf8Text(bytes.subarray(at + ENTRY_BYTES, at + ENTRY_BYTES + nameBytes))
    const entry: ZipEntry = {
      name,
      method: view.getUint16(at + 10, true),
      crc: view.getUint32(at + 16, true),
      packedBytes: view.getUint32(at + 20, true),
      bytes: view.getUint32(at + 24, true),
      headerStart: view.getUint32(at + 42, true),
    }
    if (entry.packedBytes === 0xffffffff || entry.bytes === 0xffffffff || entry.headerStart === 0xffffffff)
      failAtByte(source.name, start + at, `member ${quoted(name)} is too large. ${BIG}`)
    if ((view.getUint16(at + 8, true) & 1) !== 0)
      failAtByte(source.name, start + at, `member ${quoted(name)} is encrypted. Save it without a password.`)
    if (entry.headerStart + entry.packedBytes > start)
      failAtByte(
        source.name,
        start + at,
        `member ${quoted(name)} claims ${entry.packedBytes} bytes at ${entry.headerStart}, beyond the data. ${DAMAGED}`,
      )
    entries.push(entry)
    at = next
  }
  if (at !== bytes.length)
    failAtByte(source.name, start + at, `the directory goes on after its ${count} members. ${DAMAGED}`)
  return entries
}

/** First byte of an entry's data. */
export async function zipDataStart(source: ByteSource, entry: ZipEntry): Promise<number> {
  const header = await source.read(entry.headerStart, entry.headerStart + 30)
  if (header.length < 30 || !isZip(header))
    failAtByte(
      source.name,
      entry.headerStart,
      `member ${quoted(entry.name)} does not begin here as the directory says. ${DAMAGED}`,
    )
  const view = viewOf(header)
  const start = entry.headerStart + 30 + view.getUint16(26, true) + view.getUint16(28, true)
  if (start + entry.packedBytes > source.size)
    failAtByte(
      source.name,
      entry.headerStart,
      `member ${quoted(entry.name)} reaches beyond the end of the file. ${DAMAGED}`,
    )
  return start
}
