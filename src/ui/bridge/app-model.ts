import type { StoreApi } from 'zustand/vanilla'
import { DEMONSTRATION } from '../../core/simulate/demonstration.ts'
import type { Goodness } from '../../core/fits/goodness-of-fit.ts'
import { goodnessFrom } from '../../core/fits/goodness-of-fit.ts'
import { type EmitterEntry, newSession, type Session } from '../../session/schema/session.ts'
import {
  type Opened,
  type SaveStatus,
  type SessionStore,
  sessionStore,
} from '../../session/store/session-store.ts'
import { type ChoicesStore, choicesStore } from '../../state/choices/choices-store.ts'
import { type Conductor, conductor } from '../../state/results/conductor.ts'
import { type Results, resultsStore } from '../../state/results/results-store.ts'
import { type Theme, type View, viewStore } from '../../state/view/view-store.ts'
import { type AnalysisClient, analysisClient } from '../../worker/client/analysis-client.ts'
import type { GoodnessTask } from '../../worker/protocol/service.ts'
import { type FrameLoop, frameLoop } from './frame-loop.ts'

/** Everything the screens stand on. Made once, before React mounts. */
export interface AppModel {
  readonly choices: ChoicesStore
  readonly view: StoreApi<View>
  readonly results: StoreApi<Results>
  readonly conductor: Conductor
  readonly client: AnalysisClient
  readonly store: SessionStore
  readonly loop: FrameLoop
  readonly opened: Opened
  /** Files opened in this tab by SHA-256, also when storage refused them. */
  readonly filesInHand: Map<string, Blob>
  readonly saveStatus: () => SaveStatus
  readonly onSaveStatus: (listener: () => void) => () => void
  startGoodness(state: 0 | 1): { stop(): void; done: Promise<void> }
  setTheme(theme: Theme): void
}

const THEME_KEY = 'heliograph theme'

function savedTheme(): Theme {
  try {
    const theme = localStorage.getItem(THEME_KEY)
    return theme === 'light' || theme === 'dark' ? theme : 'system'
  } catch {
    return 'system'
  }
}

/** A session of the demonstration emitters. */
export function demonstrationSession(): Session {
  const emitters = DEMONSTRATION.map(
    ({ name }, index): EmitterEntry => ({
      id: `demonstration-${index + 1}`,
      name,
      origin: { kind: 'demonstration', name },
      difference: {},
    }),
  )
  return newSession(crypto.randomUUID(), 'Demonstration', new Date().toISOString(), emitters)
}

/** Samples of a goodness-of-fit test handed out at once. */
const SLICE = 10

export async function appModel(spawn: () => Worker): Promise<AppModel> {
  const locks = navigator.locks ?? null
  const store = sessionStore({ locks, now: () => new Date().toISOString() })
  let status: SaveStatus = { kind: 'saved', revision: 0 }
  const statusListeners = new Set<() => void>()
  store.onStatus((next) => {
    status = next
    for (const listener of statusListeners) listener()
  })
  const opened = await store.open()
  if (opened.kind === 'unavailable') status = { kind: 'failed', sentence: opened.sentence }
  const session = opened.kind === 'found' ? opened.session : demonstrationSession()

  const choices = choicesStore(session, {
    milliseconds: () => performance.now(),
    iso: () => new Date().toISOString(),
  })
  const view = viewStore(savedTheme())
  const results = resultsStore()
  const filesInHand = new Map<string, Blob>()
  const client = analysisClient({
    spawn,
    poolSize: Math.max(1, Math.min(4, (navigator.hardwareConcurrency || 2) - 1)),
    locks,
  })
  const rawFile = async (emitter: EmitterEntry): Promise<Blob | null> => {
    if (emitter.origin.kind !== 'file') return null
    const { sha256 } = emitter.origin
    const inHand = filesInHand.get(sha256)
    if (inHand !== undefined) return inHand
    const kept = await store.getRaw(sha256)
    if (kept !== null) filesInHand.set(sha256, kept)
    return kept
  }
  const conductor_ = conductor(
    choices.store,
    view,
    results,
    {
      trace: (request) => client.run('trace', (service, job) => service.trace(job, request)),
      thresholds: (request) => client.run('thresholds', (service, job) => service.thresholds(job, request)),
      rowFits: (request, rows) =>
        client.run('rows', (service, job) => service.rowFits(job, request, rows, true)),
      settle: (request, threshold) =>
        client.run('settle', (service, job) => service.settle(job, request, threshold)),
      rawFile,
    },
    {
      milliseconds: () => performance.now(),
      after: (milliseconds, callback) => {
        const handle = setTimeout(callback, milliseconds)
        return () => clearTimeout(handle)
      },
    },
  )

  let savedRevision = choices.store.getState().revision
  choices.store.subscribe((state, before) => {
    if (state.session === before.session) return
    if (state.revision !== savedRevision) {
      savedRevision = state.revision
      store.save(state.session, state.revision)
    }
    conductor_.refresh()
  })
  if (opened.kind === 'none') store.save(session, 0)

  return {
    choices,
    view,
    results,
    conductor: conductor_,
    client,
    store,
    loop: frameLoop((callback) => requestAnimationFrame(callback)),
    opened,
    filesInHand,
    saveStatus: () => status,
    onSaveStatus(listener) {
      statusListeners.add(listener)
      return () => statusListeners.delete(listener)
    },
    startGoodness(state) {
      const aborter = new AbortController()
      const done = runGoodness(state, aborter.signal)
      return { stop: () => aborter.abort(), done }
    },
    setTheme(theme) {
      view.setState({ theme })
      try {
        localStorage.setItem(THEME_KEY, theme)
      } catch {
        // A preference that cannot be kept is lost at the end of the visit; nothing else depends on it.
      }
    },
  }

  async function runGoodness(state: 0 | 1, signal: AbortSignal): Promise<void> {
    const request = await conductor_.request()
    const threshold = conductor_.threshold()
    const settled = results.getState().settled
    if (request === null || threshold === null || settled.status !== 'arrived') return
    const { fits, shown } = settled.value.states[state].fits
    const law = fits[shown]?.law
    if (law === undefined) return
    const key = `${state}`
    const put = (arrival: Results['goodness'][string]): void => {
      results.setState({ goodness: { ...results.getState().goodness, [key]: arrival } })
    }
    put({ status: 'running', last: null })
    const task = await client.run<GoodnessTask>('goodness', (service, job) =>
      service.goodnessTask(job, { analysis: request, threshold, state, law }),
    )
    if (!task.ok) {
      put({ status: 'failed', sentence: task.sentence })
      return
    }
    const { samples, seed, fit, distance } = task.value
    const slices = Array.from({ length: Math.ceil(samples / SLICE) }, (_, index) => {
      const from = index * SLICE
      return (service: Parameters<Parameters<AnalysisClient['spread']>[0][number]>[0]) =>
        service.goodnessSlice(task.value, from, Math.min(samples, from + SLICE))
    })
    try {
      const parts = await client.spread(
        slices,
        (count) => results.setState({ goodnessProgress: count / slices.length }),
        signal,
      )
      const verdict: Goodness = goodnessFrom(fit, distance, parts, seed, signal.aborted)
      put({ status: 'arrived', value: verdict })
    } catch (error) {
      put({ status: 'failed', sentence: error instanceof Error ? error.message : String(error) })
    }
  }
}
