import 'fake-indexeddb/auto'
import { createStore, get, keys, set } from 'idb-keyval'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { newSession, type Session, SESSION_VERSION } from '../../../src/session/schema/session.ts'
import { type SaveStatus, type SessionStore, sessionStore } from '../../../src/session/store/session-store.ts'
import version1 from '../schema/version-1.json' with { type: 'json' }
import version1As2 from '../schema/version-1-as-2.json' with { type: 'json' }
import { type FakeLocks, fakeLocks } from './fake-locks.ts'

let databases = 0
const NOW = '2031-02-03T04:05:06.789Z'

/** Names of databases of their own, and tabs that share them. */
function browser(): {
  readonly names: { session: string; raw: string }
  readonly locks: FakeLocks
  tab(): { store: SessionStore; statuses: SaveStatus[]; close(): void }
} {
  databases++
  const names = { session: `session ${databases}`, raw: `raw ${databases}` }
  const locks = fakeLocks()
  return {
    names,
    locks,
    tab() {
      const page = locks.page()
      const store = sessionStore({ locks: page, now: () => NOW, names })
      const statuses: SaveStatus[] = []
      store.onStatus((status) => statuses.push(status))
      return { store, statuses, close: () => page.close() }
    },
  }
}

function sessionNamed(name: string): Session {
  return newSession('s', name, NOW, [])
}

function refuse(name: string): void {
  vi.spyOn(IDBObjectStore.prototype, 'put').mockImplementation(() => {
    throw new DOMException('refused', name)
  })
}

afterEach(() => {
  vi.restoreAllMocks()
})

describe('sessionStore', () => {
  it('finds nothing at first, and then what was saved', async () => {
    const here = browser()
    const first = here.tab()
    expect(await first.store.open()).toEqual({ kind: 'none' })
    first.store.save(sessionNamed('one'), 1)
    await first.store.settled()
    first.close()
    const second = here.tab()
    expect(await second.store.open()).toEqual({ kind: 'found', session: sessionNamed('one') })
  })

  it('opens a session of version 1', async () => {
    const here = browser()
    await set('session', version1, createStore(here.names.session, 'entries'))
    expect(await here.tab().store.open()).toEqual({ kind: 'found', session: version1As2 })
  })

  it('acknowledges a revision only when it can be read back', async () => {
    const here = browser()
    const { store } = here.tab()
    await store.open()
    const readings: Promise<unknown>[] = []
    store.onStatus((status) => {
      if (status.kind === 'saved') readings.push(get('session', createStore(here.names.session, 'entries')))
    })
    for (let revision = 1; revision <= 5; revision++) {
      store.save(sessionNamed(`revision ${revision}`), revision)
      await store.settled()
    }
    const read = (await Promise.all(readings)) as Session[]
    expect(read).toHaveLength(5)
    for (const [index, session] of read.entries()) {
      expect(Number(session.name.split(' ')[1])).toBeGreaterThanOrEqual(index + 1)
    }
  })

  it('of several sessions waiting writes the first and the last, and acknowledges just those', async () => {
    const here = browser()
    const { store, statuses } = here.tab()
    await store.open()
    for (let revision = 1; revision <= 200; revision++)
      store.save(sessionNamed(`revision ${revision}`), revision)
    await store.settled()
    expect(statuses).toEqual([
      { kind: 'saving', revision: 1 },
      { kind: 'saved', revision: 1 },
      { kind: 'saving', revision: 200 },
      { kind: 'saved', revision: 200 },
    ])
    expect(await get('session', createStore(here.names.session, 'entries'))).toEqual(
      sessionNamed('revision 200'),
    )
  })

  it('loses no save made at the very moment another is acknowledged', async () => {
    const here = browser()
    const { store } = here.tab()
    await store.open()
    let revision = 0
    for (let delay = 0; delay < 12; delay++) {
      const acknowledged = new Promise<void>((resolve) => {
        const end = store.onStatus((status) => {
          if (status.kind !== 'saved') return
          end()
          resolve()
        })
      })
      store.save(sessionNamed(`revision ${++revision}`), revision)
      await acknowledged
      for (let step = 0; step < delay; step++) await Promise.resolve()
      store.save(sessionNamed(`revision ${++revision}`), revision)
      await store.settled()
      const kept = await get<Session>('session', createStore(here.names.session, 'entries'))
      expect(kept?.name, `${delay} steps after the acknowledgement`).toBe(`revision ${revision}`)
    }
  })

  it('tells a second tab that it cannot write, and does not let it', async () => {
    const here = browser()
    const first = here.tab()
    await first.store.open()
    first.store.save(sessionNamed('first'), 1)
    await first.store.settled()
    const second = here.tab()
    expect(await second.store.open()).toEqual({ kind: 'found', session: sessionNamed('first') })
    expect([first.store.writer, second.store.writer]).toEqual([true, false])
    expect(second.statuses).toMatchObject([{ kind: 'read-only' }])
    second.store.save(sessionNamed('second'), 1)
    await second.store.settled()
    expect(second.statuses.at(-1)).toMatchObject({ kind: 'read-only' })
    expect((await second.store.putRaw('a', new Blob(['x']))).ok).toBe(false)
    expect(await get('session', createStore(here.names.session, 'entries'))).toEqual(sessionNamed('first'))
    first.close()
    const third = here.tab()
    await third.store.open()
    expect(third.store.writer).toBe(true)
  })

  it('sets a damaged entry aside, keeps it, and begins anew', async () => {
    const here = browser()
    const damaged = { ...version1As2, recipe: 'lost' }
    await set('session', damaged, createStore(here.names.session, 'entries'))
    const { store } = here.tab()
    const opened = await store.open()
    expect(opened).toMatchObject({ kind: 'damaged', keptAs: `damaged/${NOW}` })
    if (opened.kind === 'damaged') expect(opened.sentence).toContain('not valid')
    store.save(sessionNamed('new'), 1)
    await store.settled()
    expect(await store.damaged()).toEqual([{ key: `damaged/${NOW}`, value: damaged }])
    const all = await keys(createStore(here.names.session, 'entries'))
    expect(new Set(all)).toEqual(new Set([`damaged/${NOW}`, 'session']))
  })

  it('a second tab leaves a damaged entry where it is', async () => {
    const here = browser()
    const first = here.tab()
    await first.store.open()
    await set('session', 'lost', createStore(here.names.session, 'entries'))
    const second = here.tab()
    expect(await second.store.open()).toMatchObject({ kind: 'damaged' })
    expect(await get('session', createStore(here.names.session, 'entries'))).toBe('lost')
  })

  it('leaves a session of a newer version in place and writes nothing over it', async () => {
    const here = browser()
    const newer = { ...version1As2, version: SESSION_VERSION + 1, unheardOf: true }
    await set('session', newer, createStore(here.names.session, 'entries'))
    const { store, statuses } = here.tab()
    const opened = await store.open()
    expect(opened.kind).toBe('damaged')
    if (opened.kind === 'damaged') expect(opened.sentence).toContain('newer version')
    store.save(sessionNamed('old'), 1)
    await store.settled()
    expect(statuses.at(-1)?.kind).toBe('read-only')
    expect(await get('session', createStore(here.names.session, 'entries'))).toEqual(newer)
    expect(await store.damaged()).toEqual([{ key: 'session', value: newer }])
  })

  it.each([
    ['QuotaExceededError', 'no more storage'],
    ['InvalidStateError', 'refused'],
  ])('says a %s in words with a way out, and saves again when it can', async (name, words) => {
    const here = browser()
    const { store, statuses } = here.tab()
    await store.open()
    refuse(name)
    store.save(sessionNamed('one'), 1)
    await store.settled()
    const last = statuses.at(-1)
    expect(last?.kind).toBe('failed')
    if (last?.kind === 'failed') expect(last.sentence).toMatch(new RegExp(`${words}.*to a file`))
    const raw = await store.putRaw('a', new Blob(['x']))
    expect(raw.ok ? '' : raw.sentence).toContain(words)
    vi.restoreAllMocks()
    store.save(sessionNamed('two'), 2)
    await store.settled()
    expect(statuses.at(-1)).toEqual({ kind: 'saved', revision: 2 })
  })

  it('says that storage is not available, and tries again at the next save', async () => {
    const here = browser()
    const { store, statuses } = here.tab()
    vi.spyOn(indexedDB, 'open').mockImplementation(() => {
      throw new DOMException('denied', 'SecurityError')
    })
    const opened = await store.open()
    expect(opened.kind).toBe('unavailable')
    if (opened.kind === 'unavailable') expect(opened.sentence).toContain('to a file')
    expect(await store.getRaw('a')).toBeNull()
    vi.restoreAllMocks()
    store.save(sessionNamed('one'), 1)
    await store.settled()
    expect(statuses.at(-1)).toEqual({ kind: 'saved', revision: 1 })
  })

  it('keeps raw data once a fingerprint', async () => {
    const here = browser()
    const { store } = here.tab()
    await store.open()
    const put = vi.spyOn(IDBObjectStore.prototype, 'put')
    expect(await store.putRaw('a', new Blob(['first']))).toEqual({ ok: true })
    expect(await store.putRaw('a', new Blob(['first']))).toEqual({ ok: true })
    expect(put).toHaveBeenCalledTimes(1)
    expect(await store.getRaw('a')).not.toBeNull()
    expect(await store.getRaw('b')).toBeNull()
  })

  it('without locks writes; with locks that are refused does not', async () => {
    const names = browser().names
    const without = sessionStore({ locks: null, now: () => NOW, names })
    await without.open()
    expect(without.writer).toBe(true)
    const refused = sessionStore({
      locks: { request: () => Promise.reject(new DOMException('no', 'SecurityError')) },
      now: () => NOW,
      names,
    })
    await refused.open()
    expect(refused.writer).toBe(false)
  })
})
