import { SESSION_VERSION } from './session.ts'

type Plain = Readonly<Record<string, unknown>>

function isPlain(value: unknown): value is Plain {
  return value !== null && typeof value === 'object' && !Array.isArray(value)
}

/** From version n to n + 1, by n. A step may assume that its input was valid at version n, and must not throw. */
const STEPS: Readonly<Record<number, (session: Plain) => Plain>> = {
  // Version 1 kept the dwell plot nowhere, the windows at the top, and the emitter's hand threshold outside a recipe.
  1: (session) => {
    const { windows, ...rest } = session
    const emitters = Array.isArray(session['emitters']) ? (session['emitters'] as unknown[]) : []
    return {
      ...rest,
      version: 2,
      view: { windows: isPlain(windows) ? windows : {}, dwellPlot: 'density' },
      importAnswers: isPlain(session['importAnswers']) ? session['importAnswers'] : {},
      emitters: emitters.map((emitter) => {
        if (!isPlain(emitter)) return emitter
        const { handThreshold, ...kept } = emitter
        return {
          ...kept,
          difference:
            typeof handThreshold === 'number'
              ? { threshold: { rule: 'hand', handCounts: handThreshold } }
              : {},
        }
      }),
    }
  },
}

export type Migrated =
  | { readonly ok: true; readonly value: unknown; readonly from: number }
  | { readonly ok: false; readonly problem: string; readonly newer?: true }

/** Brings a saved session up to the present version, one numbered step at a time. */
export function migrate(value: unknown): Migrated {
  if (!isPlain(value)) return { ok: false, problem: 'A session is a JSON object; this is something else.' }
  const from = value['version']
  if (typeof from !== 'number' || !Number.isInteger(from) || from < 1) {
    return { ok: false, problem: 'The session does not say its version.' }
  }
  if (from > SESSION_VERSION) {
    return {
      ok: false,
      newer: true,
      problem: `The session was saved by a newer version (${from}; this one reads up to ${SESSION_VERSION}). Open it there.`,
    }
  }
  let migrated: Plain = value
  for (let version = from; version < SESSION_VERSION; version++) migrated = STEPS[version](migrated)
  return { ok: true, value: migrated, from }
}
