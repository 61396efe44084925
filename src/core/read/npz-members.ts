import { Inflate } from 'fflate'
import { type ByteSource, bytesSource } from './byte-source.ts'
import { crc32 } from './crc32.ts'
import { type NpyHeader, isNpy, readNpyHeader } from './npy-header.ts'
import { failWhole, quoted, ReadFailure, type ReadProblem } from './read-problem.ts'
import type { RowHooks } from './text-rows.ts'
import { startsRising } from './starts-rising.ts'
import { type ZipEntry, zipDataStart, zipDirectory } from './zip-directory.ts'

/** Packed bytes unpacked at a time; DEFLATE makes at most 1032 times as many of them (RFC 1951: 258 bytes in 2 bits). */
const BLOCK_BYTES = 1 << 16
const MOST_INFLATION = 1032
/** Enough of a member for its NumPy header. */
const HEAD_BYTES = (1 << 16) + 12
const LARGEST_MEMBER = 2 ** 31
const QUIET: RowHooks = { onProgress: () => {}, shouldStop: () => false }

export interface NpzMember {
  readonly name: string
  readonly header: NpyHeader
  /** Whether its first numbers look like arrival times. */
  readonly rising: boolean
}

export interface NpzContents {
  readonly members: readonly NpzMember[]
  /** Why members with a NumPy header cannot be read, e.g. single numbers and texts beside the data. */
  readonly problems: readonly ReadProblem[]
}

/** The NumPy arrays of an archive with their headers; members of other kinds are passed over. */
export async function npzMembers(source: ByteSource): Promise<NpzContents> {
  const members: NpzMember[] = []
  const problems: ReadProblem[] = []
  for (const entry of await zipDirectory(source)) {
    try {
      const head = await headOf(source, entry)
      if (!isNpy(head)) continue
      const header = await memberHeader(source, entry, head)
      const rising = await startsRising(bytesSource(head, memberName(source, entry)), header)
      members.push({ name: entry.name, header, rising })
    } catch (error) {
      if (!(error instanceof ReadFailure)) throw error
      problems.push(error.problem)
    }
  }
  return { members, problems }
}

/**
 * One member unpacked; null when stopped. Its NumPy header must promise exactly the bytes of the directory, and the
 * directory no more than the packed bytes can make, before room is made for them; its checksum must be right.
 */
export async function npzMember(
  source: ByteSource,
  member: string,
  hooks: RowHooks,
): Promise<ByteSource | null> {
  const entry = (await zipDirectory(source)).find(({ name }) => name === member)
  if (entry === undefined)
    failWhole(
      source.name,
      `the archive holds no array named ${quoted(member)}. Choose another of its arrays.`,
    )
  await memberHeader(source, entry, await headOf(source, entry))
  const all = new Uint8Array(entry.bytes)
  let used = 0
  const whole = await unpack(source, entry, hooks, (chunk) => {
    if (used + chunk.length > all.length) damaged(source, entry, 'unpacks to more than it says')
    all.set(chunk, used)
    used += chunk.length
    return true
  })
  if (!whole) return null
  if (used !== all.length) damaged(source, entry, `unpacks to ${used} bytes instead of ${all.length}`)
  if (crc32(all) !== entry.crc) damaged(source, entry, 'does not match its checksum')
  return bytesSource(all, memberName(source, entry))
}

function memberName(source: ByteSource, { name }: ZipEntry): string {
  return `${source.name}: ${name}`
}

function damaged(source: ByteSource, { name }: ZipEntry, what: string): never {
  failWhole(
    source.name,
    `member ${quoted(name)} ${what}. The archive is damaged; copy it again or save it anew.`,
  )
}

async function headOf(source: ByteSource, entry: ZipEntry): Promise<Uint8Array> {
  const head = new Uint8Array(Math.min(HEAD_BYTES, entry.bytes))
  let used = 0
  await unpack(source, entry, QUIET, (chunk) => {
    const part = chunk.subarray(0, head.length - used)
    head.set(part, used)
    used += part.length
    return used < head.length
  })
  return head.subarray(0, used)
}

/** Header of a member from its first bytes, checked against the size in the directory. */
function memberHeader(source: ByteSource, entry: ZipEntry, head: Uint8Array): Promise<NpyHeader> {
  return readNpyHeader({
    name: memberName(source, entry),
    size: entry.bytes,
    read: (start, end) => Promise.resolve(head.subarray(start, Math.min(end, head.length))),
  })
}

/** Hands over the unpacked bytes in order until `onChunk` wants no more. False when stopped by the hooks. */
async function unpack(
  source: ByteSource,
  entry: ZipEntry,
  hooks: RowHooks,
  onChunk: (chunk: Uint8Array) => boolean,
): Promise<boolean> {
  const { method, packedBytes } = entry
  if (method !== 0 && method !== 8) {
    failWhole(
      source.name,
      `member ${quoted(entry.name)} is compressed in a way that is not read (method ${method}). Save with numpy.savez_compressed.`,
    )
  }
  if (entry.bytes > LARGEST_MEMBER)
    failWhole(
      source.name,
      `member ${quoted(entry.name)} unpacks to more than 2 GB. Save a part of the array.`,
    )
  if (method === 0 ? entry.bytes !== packedBytes : entry.bytes > packedBytes * MOST_INFLATION)
    damaged(source, entry, `cannot hold ${entry.bytes} bytes in ${packedBytes}`)
  const start = await zipDataStart(source, entry)
  let more = true
  const inflate = new Inflate((chunk) => {
    if (more && chunk.length > 0) more = onChunk(chunk)
  })
  for (let at = 0; at < packedBytes && more; at += BLOCK_BYTES) {
    if (hooks.shouldStop()) return false
    const to = Math.min(packedBytes, at + BLOCK_BYTES)
    const block = await source.read(start + at, start + to)
    if (block.length < to - at) damaged(source, entry, 'is cut short')
    if (method === 0) more = onChunk(block)
    else inflateBlock(inflate, block, to === packedBytes, () => damaged(source, entry, 'does not unpack'))
    hooks.onProgress(to / packedBytes)
  }
  return true
}

/** fflate throws on bytes that are not DEFLATE, with a plain Error that carries a numeric code; our own failures pass. */
function inflateBlock(inflate: Inflate, block: Uint8Array, last: boolean, onDamage: () => never): void {
  try {
    inflate.push(block, last)
  } catch (error) {
    if (error instanceof Error && 'code' in error) onDamage()
    throw error
  }
}
