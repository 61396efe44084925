import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { migrate } from '../../../src/session/schema/migrations.ts'
import { parseSession } from '../../../src/session/schema/parse-session.ts'
import { SESSION_VERSION } from '../../../src/session/schema/session.ts'
import { anySession } from '../any-session.ts'
import version1 from './version-1.json' with { type: 'json' }
import version1As2 from './version-1-as-2.json' with { type: 'json' }

describe('migrate', () => {
  it('brings a session of version 1 to version 2, with every choice', () => {
    const before = JSON.stringify(version1)
    expect(migrate(version1)).toEqual({ ok: true, value: version1As2, from: 1 })
    expect(parseSession(version1)).toEqual({ ok: true, session: version1As2, migratedFrom: 1 })
    expect(JSON.stringify(version1)).toBe(before)
  })

  it('leaves a session of the present version alone', () => {
    const migrated = migrate(version1As2)
    expect(migrated).toEqual({ ok: true, value: version1As2, from: SESSION_VERSION })
    if (migrated.ok) expect(migrated.value).toBe(version1As2)
  })

  it('refuses a newer version and says so', () => {
    const migrated = migrate({ ...version1As2, version: SESSION_VERSION + 1 })
    expect(migrated).toMatchObject({ ok: false, newer: true })
    if (!migrated.ok) expect(migrated.problem).toContain(`newer version (${SESSION_VERSION + 1}`)
  })

  it.each([
    [null],
    [[]],
    ['text'],
    [{}],
    [{ version: 0 }],
    [{ version: 1.5 }],
    [{ version: '2' }],
    [{ version: Number.NaN }],
  ])('refuses %j in words', (value) => {
    const migrated = migrate(value)
    expect(migrated.ok).toBe(false)
    expect(migrated).not.toHaveProperty('newer')
  })

  it('never throws on what claims to be version 1, and the check behind it refuses what is not a session', () => {
    fc.assert(
      fc.property(
        fc.dictionary(fc.constantFrom('emitters', 'windows', 'recipe', 'view'), fc.anything()),
        (parts) => {
          expect(migrate({ ...parts, version: 1 }).ok).toBe(true)
          expect(parseSession({ ...parts, version: 1 }).ok).toBe(false)
        },
      ),
      { seed: 41, numRuns: 300 },
    )
  })

  it('carries any session written back to version 1 forward again', () => {
    fc.assert(
      fc.property(anySession, (session) => {
        const { view, importAnswers, emitters, ...rest } = session
        expect(importAnswers).toBeDefined()
        const old = {
          ...rest,
          version: 1,
          windows: view.windows,
          emitters: emitters.map(({ difference: __, ...kept }, index) => ({
            ...kept,
            handThreshold: index % 2 === 0 ? index : null,
          })),
        }
        const parsed = parseSession(old)
        expect(parsed).toEqual({
          ok: true,
          migratedFrom: 1,
          session: {
            ...rest,
            view: { windows: view.windows, dwellPlot: 'density' },
            importAnswers: {},
            emitters: emitters.map((emitter, index) => ({
              ...emitter,
              difference: index % 2 === 0 ? { threshold: { rule: 'hand', handCounts: index } } : {},
            })),
          },
        })
      }),
      { seed: 42 },
    )
  })
})
