import { describe, expect, it } from 'vitest'
import { FIELD_TABLE } from '../../../src/session/schema/field-table.ts'
import { newSession } from '../../../src/session/schema/session.ts'
import { choicesStore } from '../../../src/state/choices/choices-store.ts'
import { viewStore } from '../../../src/state/view/view-store.ts'

describe('field table', () => {
  it('says of every field of the app whether it is saved', () => {
    const clock = { milliseconds: () => 0, iso: () => 'then' }
    const { session, ...history } = choicesStore(newSession('s', 'one', 'then', []), clock).store.getState()
    const { view, ...rest } = session
    const fields = [
      ...Object.keys(rest).map((key) => `session.${key}`),
      ...Object.keys(view).map((key) => `session.view.${key}`),
      ...Object.keys(history),
      ...Object.keys(viewStore('system').getState()),
      'results',
    ]
    expect(new Set(Object.keys(FIELD_TABLE))).toEqual(new Set(fields))
  })

  it('saves with the session just what stands in it', () => {
    for (const [field, kept] of Object.entries(FIELD_TABLE)) {
      expect(kept === 'session', field).toBe(field.startsWith('session.'))
    }
  })
})
