import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { type FileHandle, open } from 'node:fs/promises'
import { basename } from 'node:path'
import type { ByteSource } from '../core/read/byte-source.ts'

/** A file on disk as the readers see it. Close it when done. */
export async function fileSource(path: string): Promise<ByteSource & { close(): Promise<void> }> {
  const handle: FileHandle = await open(path, 'r')
  const { size } = await handle.stat()
  return {
    name: basename(path),
    size,
    async read(start, end) {
      const bytes = new Uint8Array(Math.max(0, end - start))
      const { bytesRead } = await handle.read(bytes, 0, bytes.length, start)
      return bytes.subarray(0, bytesRead)
    },
    close: () => handle.close(),
  }
}

/** SHA-256 of a file's bytes, hex. */
export async function sha256Of(path: string): Promise<string> {
  const hash = createHash('sha256')
  for await (const block of createReadStream(path)) hash.update(block as Uint8Array)
  return hash.digest('hex')
}
