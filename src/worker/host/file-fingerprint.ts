import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex } from '@noble/hashes/utils.js'
import type { ByteSource } from '../../core/read/byte-source.ts'

const BLOCK_BYTES = 8 << 20

/** SHA-256 of all bytes, hex; block by block, so that memory does not grow with the file. Null when stopped. */
export async function fileFingerprint(
  source: ByteSource,
  hooks: { onProgress(fraction: number): void; shouldStop(): boolean },
): Promise<string | null> {
  const hash = sha256.create()
  for (let at = 0; at < source.size; at += BLOCK_BYTES) {
    if (hooks.shouldStop()) return null
    hash.update(await source.read(at, Math.min(source.size, at + BLOCK_BYTES)))
    hooks.onProgress(Math.min(1, (at + BLOCK_BYTES) / source.size))
  }
  return bytesToHex(hash.digest())
}
