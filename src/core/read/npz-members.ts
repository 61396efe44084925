import { Unzip, UnzipInflate } from 'fflate'
import { type ByteSource, bytesSource } from './byte-source.ts'
import { readNpyHeader } from './npy-header.ts'
import { failWhole } from './read-problem.ts'
import type { RowHooks } from './text-rows.ts'

const BLOCK_BYTES = 1 << 20
/** Enough of a member to read its header. */
const HEADER_BYTES = 1 << 16
/** Most bytes a member may unpack to. */
const LARGEST_MEMBER = 2 ** 31
const MOST_MEMBERS = 10_000

export function isZip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x50 && bytes[1] === 0x4b && bytes[2] === 0x03 && bytes[3] === 0x04
}

/** Names of the arrays in a .npz with the first bytes of each. */
export async function npzMembers(source: ByteSource): Promise<{ name: string; head: Uint8Array }[]> {
  const members: { name: string; head: Uint8Array }[] = []
  await walk(source, (name) => ({ most: HEADER_BYTES, done: (head) => members.push({ name, head }) }), {
    onProgress: () => {},
    shouldStop: () => false,
  })
  return members
}

/**
 * One member unpacked. It may not grow beyond what its own NumPy header promises, so a bomb ends in a sentence, not
 * in a dead tab. Null when stopped.
 */
export async function npzMember(
  source: ByteSource,
  member: string,
  hooks: RowHooks,
): Promise<ByteSource | null> {
  let found: Uint8Array | null = null
  const whole = await walk(
    source,
    (name) =>
      name === member
        ? {
            most: LARGEST_MEMBER,
            done: (bytes) => {
              found = bytes
            },
          }
        : null,
    hooks,
  )
  if (!whole) return null
  if (found === null) failWhole(source.name, `the archive holds no array named “${member.slice(0, 60)}”.`)
  return bytesSource(found, `${source.name}: ${member}`)
}

interface Wish {
  readonly most: number
  done(bytes: Uint8Array): void
}

/** Streams the archive; members that nobody wishes are passed over. False when stopped. */
async function walk(
  source: ByteSource,
  wish: (name: string) => Wish | null,
  hooks: RowHooks,
): Promise<boolean> {
  let problem: string | null = null
  let count = 0
  const unzip = new Unzip((file) => {
    count++
    if (count > MOST_MEMBERS) problem ??= 'the archive holds too many members.'
    const wanted = problem === null ? wish(file.name) : null
    if (wanted === null) return
    if (file.compression !== 0 && file.compression !== 8) {
      problem ??= `“${file.name.slice(0, 60)}” is compressed in a way that is not read (method ${file.compression}). Save with numpy.savez_compressed.`
      return
    }
    const chunks: Uint8Array[] = []
    let size = 0
    let closed = false
    const close = (): void => {
      if (closed) return
      closed = true
      wanted.done(joined(chunks, Math.min(size, wanted.most)))
    }
    file.ondata = (error, chunk, last) => {
      if (closed || problem !== null) return
      if (error !== null) {
        problem = `“${file.name.slice(0, 60)}” is damaged (${error.message}).`
        return
      }
      chunks.push(chunk)
      size += chunk.length
      const promised = chunks.length === 1 || size < 4096 ? null : promisedBytes(chunks[0])
      if (size > wanted.most && wanted.most === LARGEST_MEMBER)
        problem = `“${file.name.slice(0, 60)}” unpacks to more than 2 GB.`
      else if (promised !== null && size > promised && wanted.most === LARGEST_MEMBER)
        problem = `“${file.name.slice(0, 60)}” unpacks to more than its header promises. The file is damaged.`
      else if (last || (size >= wanted.most && wanted.most < LARGEST_MEMBER)) close()
      if (closed && !last) file.terminate()
    }
    file.start()
  })
  unzip.register(UnzipInflate)
  let at = 0
  while (at < source.size && problem === null) {
    if (hooks.shouldStop()) return false
    const block = await source.read(at, Math.min(source.size, at + BLOCK_BYTES))
    if (block.length === 0) break
    at += block.length
    try {
      unzip.push(block, at >= source.size)
    } catch (error) {
      problem = `the archive is damaged (${error instanceof Error ? error.message : String(error)}).`
    }
    hooks.onProgress(at / source.size)
  }
  if (problem !== null) failWhole(source.name, problem)
  return true
}

/** Bytes a member must have by its NumPy header, from its first chunk; null when the header is not in it. */
function promisedBytes(first: Uint8Array): number | null {
  if (first.length < 12) return null
  const length = first[6] === 1 ? first[8] | (first[9] << 8) : first[8] + first[9] * 256 + first[10] * 65536
  const text = String.fromCharCode(...first.subarray(0, Math.min(first.length, 12 + length, 4096)))
  const shape = /'shape'\s*:\s*\(([^)]*)\)/.exec(text)?.[1]
  const item = /'descr'\s*:\s*'[<>|=]?[a-z](\d+)'/.exec(text)?.[1]
  if (shape === undefined || item === undefined) return null
  const items = shape
    .split(',')
    .filter((part) => part.trim() !== '')
    .reduce((product, part) => product * Number(part), 1)
  return 12 + length + items * Number(item)
}

function joined(chunks: readonly Uint8Array[], size: number): Uint8Array {
  const all = new Uint8Array(size)
  let at = 0
  for (const chunk of chunks) {
    if (at >= size) break
    all.set(chunk.subarray(0, size - at), at)
    at += chunk.length
  }
  return all
}

/** Header of a member from its first bytes, as if the file had the promised size. */
export async function memberHeader(name: string, head: Uint8Array) {
  const promised = promisedBytes(head)
  const source: ByteSource = {
    name,
    size: promised === null ? head.length : exactSize(head, promised),
    read: (start, end) => Promise.resolve(head.subarray(start, Math.min(end, head.length))),
  }
  return readNpyHeader(source)
}

function exactSize(head: Uint8Array, promised: number): number {
  return head[6] === 1 ? promised - 2 : promised
}
