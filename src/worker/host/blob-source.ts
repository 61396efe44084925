import type { ByteSource } from '../../core/read/byte-source.ts'

/** A browser file as the readers see it: bytes on request, never the whole file at once. */
export function blobSource(blob: Blob, name: string): ByteSource {
  return {
    name,
    size: blob.size,
    async read(start, end) {
      return new Uint8Array(await blob.slice(start, end).arrayBuffer())
    },
  }
}
