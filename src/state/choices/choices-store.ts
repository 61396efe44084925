import { createStore, type StoreApi } from 'zustand/vanilla'
import type { Session } from '../../session/schema/session.ts'

/** One step of the history: the session before it, and what it was. */
interface Step {
  readonly before: Session
  readonly label: string
}

export interface Choices {
  readonly session: Session
  readonly past: readonly Step[]
  readonly future: readonly { readonly after: Session; readonly label: string }[]
  /** Counts every change of the session, undo included; what the store saves is known by it. */
  readonly revision: number
}

export interface ChangeOptions {
  /** Shown beside Undo, e.g. `threshold 28 counts`. */
  readonly label: string
  /** Changes of one kind in quick succession (arrow keys) become one step. */
  readonly joinWith?: string
}

export interface ChoicesStore {
  readonly store: StoreApi<Choices>
  /** A choice that can be undone. */
  change(options: ChangeOptions, next: (session: Session) => Session): void
  /** Something saved but not undone: the visible window, the plot looked at, the emitter looked at. */
  look(next: (session: Session) => Session): void
  undo(): void
  redo(): void
  /** Another session altogether; the history starts anew. */
  replace(session: Session): void
}

const MOST_STEPS = 500
const JOIN_MILLISECONDS = 700

/**
 * All choices, with undo. Undo restores choices only: where one looks (window, plot, emitter) stays.
 * @param clock `milliseconds` for joining quick steps, `iso` for the saved time of change
 */
export function choicesStore(
  initial: Session,
  clock: { milliseconds(): number; iso(): string },
): ChoicesStore {
  const store = createStore<Choices>(() => ({ session: initial, past: [], future: [], revision: 0 }))
  let lastJoin: { key: string; at: number } | null = null

  const keepLook = (session: Session, look: Session): Session => ({
    ...session,
    view: look.view,
    importAnswers: look.importAnswers,
    changedAt: clock.iso(),
    currentEmitterId: session.emitters.some(({ id }) => id === look.currentEmitterId)
      ? look.currentEmitterId
      : session.currentEmitterId,
  })

  return {
    store,
    change({ label, joinWith }, next) {
      const { session, past, revision } = store.getState()
      const changed = next(session)
      if (changed === session) return
      const now = clock.milliseconds()
      const join =
        joinWith !== undefined && lastJoin?.key === joinWith && now - lastJoin.at < JOIN_MILLISECONDS
      lastJoin = joinWith === undefined ? null : { key: joinWith, at: now }
      const last = past.at(-1)
      const steps =
        join && last !== undefined
          ? [...past.slice(0, -1), { before: last.before, label }]
          : [...past, { before: session, label }].slice(-MOST_STEPS)
      store.setState({
        session: { ...changed, changedAt: clock.iso() },
        past: steps,
        future: [],
        revision: revision + 1,
      })
    },
    look(next) {
      const { session, revision } = store.getState()
      const changed = next(session)
      if (changed === session) return
      store.setState({ session: { ...changed, changedAt: clock.iso() }, revision: revision + 1 })
    },
    undo() {
      const { session, past, future, revision } = store.getState()
      const last = past.at(-1)
      if (last === undefined) return
      lastJoin = null
      store.setState({
        session: keepLook(last.before, session),
        past: past.slice(0, -1),
        future: [...future, { after: session, label: last.label }],
        revision: revision + 1,
      })
    },
    redo() {
      const { session, past, future, revision } = store.getState()
      const next = future.at(-1)
      if (next === undefined) return
      lastJoin = null
      store.setState({
        session: keepLook(next.after, session),
        past: [...past, { before: session, label: next.label }],
        future: future.slice(0, -1),
        revision: revision + 1,
      })
    },
    replace(session) {
      lastJoin = null
      store.setState({ session, past: [], future: [], revision: store.getState().revision + 1 })
    },
  }
}
