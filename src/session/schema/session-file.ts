import { strFromU8, strToU8, Unzip, UnzipInflate, zipSync } from 'fflate'
import { parseSession } from './parse-session.ts'
import type { Session } from './session.ts'

/** A session with the raw files it needs, by SHA-256. */
export interface SessionBundle {
  readonly session: Session
  readonly raw: ReadonlyMap<string, Uint8Array>
}

export type BundleRead =
  | { readonly ok: true; readonly bundle: SessionBundle }
  | { readonly ok: false; readonly problem: string }

const SESSION_ENTRY = 'session.json'
const RAW_FOLDER = 'raw/'
const LARGEST_SESSION_BYTES = 64 << 20
const MOST_ENTRIES = 10_000

/** ZIP of session.json and raw/SHA256 with the files' own bytes (stored, since records compress little and slowly). */
export function writeBundle({ session, raw }: SessionBundle): Uint8Array {
  const entries: Record<string, [Uint8Array, { level: 0 | 6 }]> = {
    [SESSION_ENTRY]: [strToU8(JSON.stringify(session)), { level: 6 }],
  }
  for (const [sha256, bytes] of raw) entries[RAW_FOLDER + sha256] = [bytes, { level: 0 }]
  return zipSync(entries)
}

/**
 * Reads a session file from anyone: sizes are checked while unpacking (what comes out may not exceed `largestBytes`),
 * names that are not ours are refused, the session is validated, and raw bytes must have the hash of their name.
 * @param hash SHA-256 of bytes, hex
 */
export function readBundle(
  bytes: Uint8Array,
  largestBytes: number,
  hash: (bytes: Uint8Array) => string,
): BundleRead {
  const parts = new Map<string, Uint8Array[]>()
  let total = 0
  let problem: string | null = null
  const unzip = new Unzip((file) => {
    if (problem !== null) return
    const known = file.name === SESSION_ENTRY || /^raw\/[0-9a-f]{64}$/.test(file.name)
    if (!known || parts.has(file.name) || parts.size >= MOST_ENTRIES) {
      problem = `The session file holds an entry that does not belong there: “${file.name.slice(0, 80)}”.`
      return
    }
    const chunks: Uint8Array[] = []
    parts.set(file.name, chunks)
    let size = 0
    file.ondata = (error, chunk) => {
      if (problem !== null) return
      if (error !== null) {
        problem = `The session file is damaged: ${error.message}.`
        return
      }
      size += chunk.length
      total += chunk.length
      if (total > largestBytes || (file.name === SESSION_ENTRY && size > LARGEST_SESSION_BYTES)) {
        problem = 'The session file unpacks to more than it may; it was not opened.'
        file.terminate()
        return
      }
      chunks.push(chunk)
    }
    file.start()
  })
  unzip.register(UnzipInflate)
  try {
    const step = 1 << 20
    for (let at = 0; at < bytes.length && problem === null; at += step) {
      unzip.push(bytes.subarray(at, at + step), at + step >= bytes.length)
    }
  } catch (error) {
    problem ??= `The session file is damaged: ${error instanceof Error ? error.message : String(error)}.`
  }
  if (problem !== null) return { ok: false, problem }
  const json = parts.get(SESSION_ENTRY)
  if (json === undefined)
    return { ok: false, problem: 'This ZIP is not a session file: it has no session.json.' }
  let value: unknown
  try {
    value = JSON.parse(strFromU8(joined(json)))
  } catch {
    return { ok: false, problem: 'The session file is damaged: session.json is not JSON.' }
  }
  const parsed = parseSession(value)
  if (!parsed.ok) return parsed
  const raw = new Map<string, Uint8Array>()
  for (const [name, chunks] of parts) {
    if (name === SESSION_ENTRY) continue
    const content = joined(chunks)
    const sha256 = name.slice(RAW_FOLDER.length)
    if (hash(content) !== sha256) {
      return {
        ok: false,
        problem: `The session file is damaged: the data named ${sha256.slice(0, 12)}… are not what the name says.`,
      }
    }
    raw.set(sha256, content)
  }
  return { ok: true, bundle: { session: parsed.session, raw } }
}

function joined(chunks: readonly Uint8Array[]): Uint8Array {
  const all = new Uint8Array(chunks.reduce((sum, chunk) => sum + chunk.length, 0))
  let at = 0
  for (const chunk of chunks) {
    all.set(chunk, at)
    at += chunk.length
  }
  return all
}
