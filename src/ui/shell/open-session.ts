import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex } from '@noble/hashes/utils.js'
import { readBundle } from '../../session/schema/session-file.ts'
import type { AppModel } from '../bridge/app-model.ts'

/** Largest session file opened, unpacked. */
const LARGEST_BYTES = 2 ** 31

/** A ZIP whose first entry is session.json, as this program writes it. */
export async function isSessionFile(file: File): Promise<boolean> {
  const head = new Uint8Array(await file.slice(0, 64).arrayBuffer())
  if (head[0] !== 0x50 || head[1] !== 0x4b) return false
  return new TextDecoder('latin1').decode(head.subarray(30)).startsWith('session.json')
}

/** Replaces the session by the one in a file after checking it whole; returns what to tell the user. */
export async function openSessionFile(app: AppModel, file: File): Promise<string> {
  if (file.size > LARGEST_BYTES) return `“${file.name}” is larger than 2 GB and was not opened.`
  const bytes = new Uint8Array(await file.arrayBuffer())
  const read = readBundle(bytes, LARGEST_BYTES, (content) => bytesToHex(sha256(content)))
  if (!read.ok) return `“${file.name}” was not opened. ${read.problem} The present session is unchanged.`
  const { session, raw } = read.bundle
  let refused: string | null = null
  for (const [hash, content] of raw) {
    const blob = new Blob([content as BlobPart])
    app.filesInHand.set(hash, blob)
    const kept = await app.store.putRaw(hash, blob)
    if (!kept.ok) refused ??= kept.sentence
  }
  app.choices.replace(session)
  return `Session “${session.name}” with ${session.emitters.length} emitters is open.${refused === null ? '' : ` Its data are not stored here: ${refused}`}`
}
