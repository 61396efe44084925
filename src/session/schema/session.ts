import type { ImportAnswer } from '../../core/read/import-answer.ts'
import { DEFAULT_RECIPE } from '../../core/recipe/default-recipe.ts'
import type { Recipe } from '../../core/recipe/recipe.ts'
import type { RecipeDifference } from '../../core/recipe/resolve-recipe.ts'
import type { RecordOrigin } from './record-origin.ts'

export const SESSION_VERSION = 2

export type DwellPlot = 'density' | 'neighbour' | 'survival' | 'hazard' | 'scan'

/** One emitter of a session: where its record is, and in what it differs from the session's recipe. */
export interface EmitterEntry {
  readonly id: string
  readonly name: string
  readonly origin: RecordOrigin
  readonly difference: RecipeDifference
}

/** What is looked at; saved, but not part of undo. */
export interface SavedView {
  /** Visible window per emitter, s; absent means the whole record. */
  readonly windows: Readonly<Record<string, readonly [number, number]>>
  readonly dwellPlot: DwellPlot
}

/** Everything that is saved. Results are not: they follow from this and the data. */
export interface Session {
  readonly version: typeof SESSION_VERSION
  readonly id: string
  readonly name: string
  /** ISO 8601 time of the last change. */
  readonly changedAt: string
  readonly recipe: Recipe
  readonly emitters: readonly EmitterEntry[]
  readonly currentEmitterId: string | null
  readonly view: SavedView
  /** How files of one shape were read, by shape signature. */
  readonly importAnswers: Readonly<Record<string, ImportAnswer>>
}

/** A session of the given emitters with the default recipe. */
export function newSession(
  id: string,
  name: string,
  changedAt: string,
  emitters: readonly EmitterEntry[],
): Session {
  return {
    version: SESSION_VERSION,
    id,
    name,
    changedAt,
    recipe: DEFAULT_RECIPE,
    emitters,
    currentEmitterId: emitters[0]?.id ?? null,
    view: { windows: {}, dwellPlot: 'density' },
    importAnswers: {},
  }
}
