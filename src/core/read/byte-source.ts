/** A file as the readers see it: bytes on request, never the whole file at once. */
export interface ByteSource {
  readonly name: string
  /** Bytes. */
  readonly size: number
  /** Bytes [start, end); shorter only at the end of the file. */
  read(start: number, end: number): Promise<Uint8Array>
}

/** Bytes at hand as a source, e.g. a member of an archive. */
export function bytesSource(bytes: Uint8Array, name: string): ByteSource {
  return {
    name,
    size: bytes.length,
    read: (start, end) => Promise.resolve(bytes.subarray(start, Math.min(end, bytes.length))),
  }
}
