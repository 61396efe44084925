import { createStore, del, get, keys, set, type UseStore } from 'idb-keyval'
import { parseSession } from '../schema/parse-session.ts'
import type { Session } from '../schema/session.ts'

/** What the store needs of its surroundings. */
export interface StoreSurroundings {
  /** Web Locks; null where the browser has none. */
  readonly locks: Pick<LockManager, 'request'> | null
  readonly now: () => string
  /** Database names, so that tests do not meet. */
  readonly names?: { readonly session: string; readonly raw: string }
}

export type SaveStatus =
  | { readonly kind: 'saved'; readonly revision: number }
  | { readonly kind: 'saving'; readonly revision: number }
  | { readonly kind: 'read-only'; readonly sentence: string }
  | { readonly kind: 'failed'; readonly sentence: string }

export type Opened =
  | { readonly kind: 'found'; readonly session: Session }
  | { readonly kind: 'none' }
  | { readonly kind: 'damaged'; readonly sentence: string; readonly keptAs: string }
  | { readonly kind: 'unavailable'; readonly sentence: string }

export interface SessionStore {
  /** Takes the writer's lock if it is free, then reads the saved session. */
  open(): Promise<Opened>
  /** Saves soon; of several sessions waiting only the last is written. */
  save(session: Session, revision: number): void
  /** Resolves when everything handed to `save` so far is written or has failed. */
  settled(): Promise<void>
  readonly writer: boolean
  onStatus(listener: (status: SaveStatus) => void): () => void
  putRaw(sha256: string, file: Blob): Promise<{ ok: true } | { ok: false; sentence: string }>
  getRaw(sha256: string): Promise<Blob | null>
  /** Entries set aside because they could not be read. */
  damaged(): Promise<readonly { readonly key: string; readonly value: unknown }[]>
}

const CURRENT = 'session'
const DAMAGED = 'damaged/'
const LOCK = 'heliograph session'
const SECOND_TAB =
  'This session is open in another tab, which may write it. Changes made here are not saved: close the other tab and reload, or save to a file.'

const NEWER =
  'The saved session belongs to a newer version of this program and is left as it is. Changes made here are not saved: save to a file.'

function whyNotStored(error: unknown): string {
  const name = error instanceof Error || error instanceof DOMException ? error.name : ''
  if (name === 'QuotaExceededError') {
    return 'The browser gives this page no more storage. Save the session to a file, then free space or remove emitters.'
  }
  return `The browser refused to store the session (${error instanceof Error ? error.message : String(error)}). Save it to a file.`
}

/**
 * The saved session, one entry in IndexedDB, and raw files, one Blob a SHA-256.
 *
 * Invariants. 1. A save is acknowledged (`saved`) only after its transaction has completed, so that it survives the death
 * of the browser. 2. One transaction writes a whole session: a reader meets the old one or the new one. 3. Only the tab
 * that holds the lock writes. 4. An entry that cannot be read is moved aside, never overwritten; one of a newer
 * version stays where that version will look for it, and this page does not write.
 */
export function sessionStore(surroundings: StoreSurroundings): SessionStore {
  const names = surroundings.names ?? { session: 'heliograph-session', raw: 'heliograph-raw' }
  const opened = new Map<string, UseStore>()
  // idb-keyval keeps a failed opening for ever; a fresh store after each failure lets the user try again.
  const storeOf = (name: string): UseStore => {
    let store = opened.get(name)
    if (store === undefined) {
      store = createStore(name, 'entries')
      opened.set(name, store)
    }
    return store
  }
  const withStore = async <T>(name: string, work: (store: UseStore) => Promise<T>): Promise<T> => {
    try {
      return await work(storeOf(name))
    } catch (error) {
      opened.delete(name)
      throw error
    }
  }
  const listeners = new Set<(status: SaveStatus) => void>()
  const say = (status: SaveStatus): void => {
    for (const listener of listeners) listener(status)
  }
  let writer = false
  let refusal = SECOND_TAB
  let waiting: { session: Session; revision: number } | null = null
  let writing: Promise<void> | null = null

  const takeLock = (): Promise<boolean> => {
    const { locks } = surroundings
    if (locks === null) return Promise.resolve(true)
    return new Promise((resolve) => {
      // The lock is held until the page goes away: its promise never settles.
      locks
        .request(LOCK, { ifAvailable: true }, (lock) => {
          resolve(lock !== null)
          return lock === null ? Promise.resolve() : new Promise<void>(() => {})
        })
        .catch(() => resolve(false))
    })
  }

  const drain = async (): Promise<void> => {
    while (waiting !== null) {
      const { session, revision } = waiting
      waiting = null
      say({ kind: 'saving', revision })
      try {
        await withStore(names.session, (store) => set(CURRENT, session, store))
        say({ kind: 'saved', revision })
      } catch (error) {
        say({ kind: 'failed', sentence: whyNotStored(error) })
      }
    }
    // In the same step as the last look at `waiting`: a save made between the two would wait for ever.
    writing = null
  }

  return {
    get writer() {
      return writer
    },
    async open() {
      writer = await takeLock()
      if (!writer) say({ kind: 'read-only', sentence: SECOND_TAB })
      let value: unknown
      try {
        value = await withStore(names.session, (store) => get<unknown>(CURRENT, store))
      } catch (error) {
        return { kind: 'unavailable', sentence: whyNotStored(error) }
      }
      if (value === undefined) return { kind: 'none' }
      const parsed = parseSession(value)
      if (parsed.ok) return { kind: 'found', session: parsed.session }
      if (parsed.newer === true) {
        refusal = NEWER
        writer = false
        say({ kind: 'read-only', sentence: refusal })
        return { kind: 'damaged', sentence: parsed.problem, keptAs: CURRENT }
      }
      const keptAs = `${DAMAGED}${surroundings.now()}`
      if (writer) {
        try {
          await withStore(names.session, (store) => set(keptAs, value, store))
          await withStore(names.session, (store) => del(CURRENT, store))
        } catch (error) {
          return { kind: 'unavailable', sentence: whyNotStored(error) }
        }
      }
      return { kind: 'damaged', sentence: parsed.problem, keptAs }
    },
    save(session, revision) {
      if (!writer) {
        say({ kind: 'read-only', sentence: refusal })
        return
      }
      waiting = { session, revision }
      writing ??= drain()
    },
    async settled() {
      while (writing !== null) await writing
    },
    onStatus(listener) {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    async putRaw(sha256, file) {
      if (!writer) return { ok: false, sentence: refusal }
      try {
        const kept = await withStore(names.raw, (store) => keys<string>(store))
        if (!kept.includes(sha256)) await withStore(names.raw, (store) => set(sha256, file, store))
        return { ok: true }
      } catch (error) {
        return { ok: false, sentence: whyNotStored(error) }
      }
    },
    async getRaw(sha256) {
      try {
        return (await withStore(names.raw, (store) => get<Blob>(sha256, store))) ?? null
      } catch {
        return null
      }
    },
    async damaged() {
      const all = await withStore(names.session, (store) => keys<string>(store))
      const aside = all.filter((key) => key.startsWith(DAMAGED) || (key === CURRENT && refusal === NEWER))
      return Promise.all(
        aside.map(async (key) => ({
          key,
          value: await withStore(names.session, (store) => get<unknown>(key, store)),
        })),
      )
    },
  }
}
