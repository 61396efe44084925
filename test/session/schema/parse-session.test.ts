import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { parseSession } from '../../../src/session/schema/parse-session.ts'
import { newSession, type Session } from '../../../src/session/schema/session.ts'
import { anySession } from '../any-session.ts'
import version2 from './version-1-as-2.json' with { type: 'json' }

function problemOf(value: unknown): string {
  const parsed = parseSession(value)
  return parsed.ok ? '' : parsed.problem
}

const emitter = {
  id: 'a',
  name: 'first',
  origin: { kind: 'demonstration', name: 'first' },
  difference: {},
} as const
const session: Session = newSession('s', 'one', '2031-01-01T00:00:00.000Z', [emitter])

describe('parseSession', () => {
  it('takes a new session as it is', () => {
    expect(parseSession(session)).toEqual({ ok: true, session, migratedFrom: null })
  })

  it('takes every session of the program, also after a way through JSON or a structured clone', () => {
    fc.assert(
      fc.property(anySession, (one) => {
        expect(parseSession(one)).toEqual({ ok: true, session: one, migratedFrom: null })
        expect(parseSession(structuredClone(one))).toEqual({ ok: true, session: one, migratedFrom: null })
        const plain: unknown = JSON.parse(JSON.stringify(one))
        expect(parseSession(plain)).toEqual({ ok: true, session: plain, migratedFrom: null })
      }),
      { seed: 51 },
    )
  })

  it.each([
    ['a foreign key', { ...session, extra: 1 }, 'extra'],
    ['a missing view', { ...session, view: undefined }, 'view'],
    [
      'a window of one number',
      { ...session, view: { ...session.view, windows: { a: [1] } } },
      'view.windows',
    ],
    [
      'a window that is not finite',
      { ...session, view: { ...session.view, windows: { a: [0, Infinity] } } },
      'view.windows',
    ],
    [
      'a recipe out of range',
      { ...session, recipe: { ...session.recipe, bin: { seconds: -1 } } },
      'bin.seconds',
    ],
    ['two emitters of one id', { ...session, emitters: [emitter, emitter] }, 'share one id'],
    ['an emitter on the bench that is not there', { ...session, currentEmitterId: 'b' }, '“b”'],
    [
      'a difference out of range',
      { ...session, emitters: [{ ...emitter, difference: { bin: { seconds: 1e9 } } }] },
      '“first”',
    ],
    [
      'a difference of a foreign key',
      { ...session, emitters: [{ ...emitter, difference: { threshold: { of: 1 } } }] },
      '“first”',
    ],
    [
      'a difference that is no object',
      { ...session, emitters: [{ ...emitter, difference: [] }] },
      'difference',
    ],
    ['an origin of no kind', { ...session, emitters: [{ ...emitter, origin: { kind: 'web' } }] }, 'origin'],
    [
      'an origin whose fingerprint is a path',
      {
        ...session,
        emitters: [
          { ...emitter, origin: { ...version2.emitters[2].origin, sha256: `../${'0'.repeat(61)}` } },
        ],
      },
      'sha256',
    ],
    ['a remembered answer of no kind', { ...session, importAnswers: { x: { kind: 'tar' } } }, 'kind'],
  ])('refuses %s and names the place', (_, value, named) => {
    expect(problemOf(value)).toContain(named)
  })

  it('keeps of a difference only what a recipe has', () => {
    const difference: unknown = JSON.parse('{"version":1,"threshold":{"rule":"sigma"}}')
    const parsed = parseSession({ ...session, emitters: [{ ...emitter, difference }] })
    expect(parsed.ok ? parsed.session.emitters[0].difference : null).toEqual({ threshold: { rule: 'sigma' } })
  })

  it('refuses a valid session with any one part of it replaced, and never throws', () => {
    fc.assert(
      fc.property(
        anySession,
        fc.constantFrom(...Object.keys(session)),
        fc.constantFrom<unknown>(undefined, 0, true, [1], { a: { b: 1 } }, () => 0),
        (one, key, value) => {
          expect(parseSession({ ...one, [key]: value }).ok).toBe(false)
        },
      ),
      { seed: 52 },
    )
  })
})
