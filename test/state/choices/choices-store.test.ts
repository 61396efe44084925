import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { newSession, type Session } from '../../../src/session/schema/session.ts'
import { type ChoicesStore, choicesStore } from '../../../src/state/choices/choices-store.ts'
import {
  withDifference,
  withEmitters,
  withoutEmitter,
  withRecipe,
} from '../../../src/state/choices/session-changes.ts'

function emitter(id: string) {
  return { id, name: id, origin: { kind: 'demonstration' as const, name: id }, difference: {} }
}

function storeOf(): { choices: ChoicesStore; wait(milliseconds: number): void; session(): Session } {
  let now = 0
  const choices = choicesStore(newSession('s', 'one', 'then', [emitter('a'), emitter('b')]), {
    milliseconds: () => now,
    iso: () => `at ${now}`,
  })
  return {
    choices,
    wait: (milliseconds) => {
      now += milliseconds
    },
    session: () => choices.store.getState().session,
  }
}

/** What undo restores: the session without where one looks and when it changed. */
function chosen({ recipe, emitters, name }: Session): unknown {
  return { recipe, emitters, name }
}

type Act =
  | { readonly kind: 'threshold'; readonly counts: number; readonly id: string }
  | { readonly kind: 'sigmas'; readonly sigmas: number }
  | { readonly kind: 'add' | 'remove'; readonly id: string }
  | { readonly kind: 'look'; readonly id: string; readonly from: number }
  | { readonly kind: 'undo' | 'redo' }

const id = fc.constantFrom('a', 'b', 'c', 'd')
const anyAct: fc.Arbitrary<Act> = fc.oneof(
  fc.record({ kind: fc.constant('threshold' as const), counts: fc.nat(100), id }),
  fc.record({ kind: fc.constant('sigmas' as const), sigmas: fc.integer({ min: 1, max: 20 }) }),
  fc.record({ kind: fc.constantFrom('add' as const, 'remove' as const), id }),
  fc.record({ kind: fc.constant('look' as const), id, from: fc.nat(100) }),
  fc.record({ kind: fc.constantFrom('undo' as const, 'redo' as const) }),
)

function act({ choices }: Pick<ReturnType<typeof storeOf>, 'choices'>, one: Act): void {
  switch (one.kind) {
    case 'threshold':
      return choices.change({ label: 'threshold' }, (session) =>
        withDifference(session, one.id, { threshold: { rule: 'hand', handCounts: one.counts } }),
      )
    case 'sigmas':
      return choices.change({ label: 'sigmas' }, (session) =>
        withRecipe(session, { threshold: { sigmas: one.sigmas } }),
      )
    case 'add':
      return choices.change({ label: 'add' }, (session) =>
        session.emitters.some((entry) => entry.id === one.id)
          ? session
          : withEmitters(session, [emitter(one.id)]),
      )
    case 'remove':
      return choices.change({ label: 'remove' }, (session) => withoutEmitter(session, one.id))
    case 'look':
      return choices.look((session) =>
        session.emitters.some((entry) => entry.id === one.id)
          ? {
              ...session,
              currentEmitterId: one.id,
              view: {
                ...session.view,
                windows: { ...session.view.windows, [one.id]: [one.from, one.from + 1] },
              },
            }
          : session,
      )
    case 'undo':
      return choices.undo()
    case 'redo':
      return choices.redo()
  }
}

describe('choicesStore', () => {
  it('does what a plain history of choices does, whatever the order of acts', () => {
    fc.assert(
      fc.property(fc.array(anyAct, { maxLength: 120, size: 'max' }), (acts) => {
        const here = storeOf()
        let now = chosen(here.session())
        const past: unknown[] = []
        const future: unknown[] = []
        for (const one of acts) {
          const { revision, session: before } = here.choices.store.getState()
          act(here, one)
          const { session, past: steps, future: ahead, revision: after } = here.choices.store.getState()
          if (one.kind === 'undo' && past.length > 0) {
            future.push(now)
            now = past.pop()
          } else if (one.kind === 'redo' && future.length > 0) {
            past.push(now)
            now = future.pop()
          } else if (
            one.kind !== 'undo' &&
            one.kind !== 'redo' &&
            one.kind !== 'look' &&
            session !== before
          ) {
            past.push(now)
            future.length = 0
            now = chosen(session)
          }
          expect(chosen(session)).toEqual(now)
          expect([steps.length, ahead.length]).toEqual([past.length, future.length])
          expect(after).toBe(session === before ? revision : revision + 1)
          // The bench never shows an emitter that is not there, nor none when there is one.
          const ids = session.emitters.map((entry) => entry.id)
          if (ids.length === 0) expect(session.currentEmitterId).toBeNull()
          else expect(ids).toContain(session.currentEmitterId)
        }
      }),
      { seed: 81, numRuns: 200 },
    )
  })

  it('undo and redo leave where one looks', () => {
    const here = storeOf()
    act(here, { kind: 'threshold', counts: 28, id: 'a' })
    act(here, { kind: 'look', id: 'b', from: 7 })
    const { view } = here.session()
    here.choices.undo()
    expect(here.session()).toMatchObject({ currentEmitterId: 'b', view })
    expect(here.session().emitters[0].difference).toEqual({})
    here.choices.redo()
    expect(here.session()).toMatchObject({ currentEmitterId: 'b', view })
  })

  it('undo brings an emitter back with its choices', () => {
    const here = storeOf()
    act(here, { kind: 'threshold', counts: 28, id: 'a' })
    act(here, { kind: 'remove', id: 'a' })
    act(here, { kind: 'remove', id: 'b' })
    expect(here.session().currentEmitterId).toBeNull()
    here.choices.undo()
    here.choices.undo()
    expect(here.session().emitters.map((entry) => entry.id)).toEqual(['a', 'b'])
    expect(here.session().emitters[0].difference).toEqual({ threshold: { rule: 'hand', handCounts: 28 } })
    expect(here.session().currentEmitterId).not.toBeNull()
  })

  it('joins quick changes of one kind into one step, and only those', () => {
    const here = storeOf()
    const press = (counts: number, joinWith = 'threshold a'): void =>
      here.choices.change({ label: `threshold ${counts} counts`, joinWith }, (session) =>
        withDifference(session, 'a', { threshold: { handCounts: counts } }),
      )
    const labels = (): string[] => here.choices.store.getState().past.map(({ label }) => label)
    press(1)
    here.wait(300)
    press(2)
    here.wait(300)
    press(3)
    expect(labels()).toEqual(['threshold 3 counts'])
    here.wait(900)
    press(4)
    expect(labels()).toEqual(['threshold 3 counts', 'threshold 4 counts'])
    press(5, 'threshold b')
    expect(labels()).toHaveLength(3)
    here.choices.undo()
    press(6, 'threshold b')
    expect(labels()).toEqual(['threshold 3 counts', 'threshold 4 counts', 'threshold 6 counts'])
    here.choices.undo()
    here.choices.undo()
    here.choices.undo()
    expect(here.session().emitters[0].difference).toEqual({})
  })

  it('a change that changes nothing is no step', () => {
    const here = storeOf()
    here.choices.change({ label: 'nothing' }, (session) => session)
    here.choices.look((session) => session)
    expect(here.choices.store.getState()).toMatchObject({ past: [], revision: 0 })
  })

  it('keeps five hundred steps', () => {
    const here = storeOf()
    for (let counts = 0; counts < 520; counts++) act(here, { kind: 'threshold', counts, id: 'a' })
    expect(here.choices.store.getState().past).toHaveLength(500)
    for (let steps = 0; steps < 600; steps++) here.choices.undo()
    expect(here.session().emitters[0].difference).toEqual({ threshold: { rule: 'hand', handCounts: 19 } })
  })

  it('another session begins another history, and is saved', () => {
    const here = storeOf()
    act(here, { kind: 'threshold', counts: 1, id: 'a' })
    here.choices.replace(newSession('t', 'two', 'then', []))
    here.choices.undo()
    expect(here.choices.store.getState()).toMatchObject({ past: [], future: [], revision: 2 })
    expect(here.session().name).toBe('two')
  })

  it('says when it changed', () => {
    const here = storeOf()
    here.wait(5)
    act(here, { kind: 'sigmas', sigmas: 3 })
    expect(here.session().changedAt).toBe('at 5')
    here.wait(5)
    here.choices.undo()
    expect(here.session().changedAt).toBe('at 10')
  })
})
