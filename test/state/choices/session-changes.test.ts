import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import {
  currentEmitter,
  recipeOf,
  withDifference,
  withEmitters,
  withoutDifference,
  withoutEmitter,
  withRecipe,
} from '../../../src/state/choices/session-changes.ts'
import { parseSession } from '../../../src/session/schema/parse-session.ts'
import { newSession } from '../../../src/session/schema/session.ts'
import { anySession } from '../../session/any-session.ts'

const emitters = ['a', 'b', 'c'].map((id) => ({
  id,
  name: id,
  origin: { kind: 'demonstration' as const, name: id },
  difference: {},
}))
const session = newSession('s', 'one', 'then', emitters)

describe('session changes', () => {
  it('a choice for all emitters reaches those that do not differ in it', () => {
    const one = withDifference(session, 'b', { threshold: { sigmas: 7 } })
    const all = withRecipe(one, { threshold: { sigmas: 2 }, bin: { seconds: 0.5 } })
    const sigmas = all.emitters.map((emitter) => recipeOf(all, emitter).threshold.sigmas)
    expect(sigmas).toEqual([2, 7, 2])
    expect(all.emitters.map((emitter) => recipeOf(all, emitter).bin.seconds)).toEqual([0.5, 0.5, 0.5])
    const back = withoutDifference(all, 'b')
    expect(recipeOf(back, back.emitters[1])).toEqual(back.recipe)
    expect(recipeOf(back, null)).toEqual(back.recipe)
  })

  it('a choice for one emitter leaves the others alone', () => {
    fc.assert(
      fc.property(anySession, fc.nat(11), (any, at) => {
        const id = any.emitters[at]?.id ?? 'nobody'
        const changed = withDifference(any, id, { threshold: { rule: 'hand', handCounts: 5 } })
        expect(parseSession(changed).ok).toBe(true)
        for (const [index, emitter] of changed.emitters.entries()) {
          const before = recipeOf(any, any.emitters[index])
          const expected =
            emitter.id === id ? resolveRecipe(before, { threshold: { rule: 'hand', handCounts: 5 } }) : before
          expect(recipeOf(changed, emitter)).toEqual(expected)
        }
      }),
      { seed: 91 },
    )
  })

  it('puts the first of new emitters on the bench', () => {
    const added = withEmitters(session, [
      { ...emitters[0], id: 'd' },
      { ...emitters[0], id: 'e' },
    ])
    expect(added.emitters.map(({ id }) => id)).toEqual(['a', 'b', 'c', 'd', 'e'])
    expect(currentEmitter(added)?.id).toBe('d')
    expect(withEmitters(session, []).currentEmitterId).toBe('a')
  })

  it('takes an emitter away and shows its neighbour', () => {
    const at = (id: string) => ({ ...session, currentEmitterId: id })
    expect(withoutEmitter(at('b'), 'b').currentEmitterId).toBe('c')
    expect(withoutEmitter(at('c'), 'c').currentEmitterId).toBe('b')
    expect(withoutEmitter(at('a'), 'c').currentEmitterId).toBe('a')
    expect(withoutEmitter(session, 'nobody')).toBe(session)
    const none = ['a', 'b', 'c'].reduce(withoutEmitter, session)
    expect(currentEmitter(none)).toBeNull()
    expect(none.emitters).toEqual([])
  })
})
