import * as v from 'valibot'
import { parseRecipe } from '../../core/recipe/recipe-schema.ts'
import { knownDifference, resolveRecipe } from '../../core/recipe/resolve-recipe.ts'
import { parseImportAnswer } from '../../core/read/import-answer-schema.ts'
import type { ImportAnswer } from '../../core/read/import-answer.ts'
import { migrate } from './migrations.ts'
import { parseOrigin } from './origin-schema.ts'
import { type EmitterEntry, type Session, SESSION_VERSION } from './session.ts'

const text = v.pipe(v.string(), v.maxLength(4096))
// A record would take a list for an empty object.
const notList = v.pipe(
  v.unknown(),
  v.check((value) => !Array.isArray(value), 'expected an object, received a list'),
)
const plainObject = v.pipe(notList, v.record(text, v.unknown()))
const number = v.pipe(v.number(), v.finite())

const SESSION = v.strictObject({
  version: v.literal(SESSION_VERSION),
  id: text,
  name: text,
  changedAt: text,
  recipe: v.unknown(),
  emitters: v.pipe(
    v.array(v.strictObject({ id: text, name: text, origin: v.unknown(), difference: plainObject })),
    v.maxLength(100_000),
  ),
  currentEmitterId: v.nullable(text),
  view: v.strictObject({
    windows: v.pipe(notList, v.record(text, v.strictTuple([number, number]))),
    dwellPlot: v.picklist(['density', 'neighbour', 'survival', 'hazard', 'scan']),
  }),
  importAnswers: v.pipe(notList, v.record(text, plainObject)),
})

export type SessionParsed =
  | { readonly ok: true; readonly session: Session; readonly migratedFrom: number | null }
  /** `newer`: nothing is wrong with it, but only a later version of the program can tell. */
  | { readonly ok: false; readonly problem: string; readonly newer?: true }

/**
 * A session from storage or from a file: migrated step by step to this version, then checked whole. Nothing is
 * repaired: what does not fit is refused with the place and the reason, and the caller's data stay as they are.
 */
export function parseSession(value: unknown): SessionParsed {
  const migrated = migrate(value)
  if (!migrated.ok) return migrated
  const parsed = v.safeParse(SESSION, migrated.value)
  if (!parsed.success) {
    const [issue] = parsed.issues
    return {
      ok: false,
      problem: `The session is not valid at “${v.getDotPath(issue) ?? 'top level'}”: ${issue.message}.`,
    }
  }
  const recipe = parseRecipe(parsed.output.recipe)
  if (!recipe.ok) return recipe
  const emitters: EmitterEntry[] = []
  for (const emitter of parsed.output.emitters) {
    const resolved = parseRecipe(resolveRecipe(recipe.recipe, emitter.difference))
    if (!resolved.ok) return { ok: false, problem: `Emitter “${emitter.name}”: ${resolved.problem}` }
    const origin = parseOrigin(emitter.origin)
    if (!origin.ok) return { ok: false, problem: `Emitter “${emitter.name}”: ${origin.problem}` }
    emitters.push({
      ...emitter,
      difference: knownDifference(emitter.difference, resolved.recipe),
      origin: origin.origin,
    })
  }
  const importAnswers: Record<string, ImportAnswer> = {}
  for (const [shape, remembered] of Object.entries(parsed.output.importAnswers)) {
    const answer = parseImportAnswer(remembered)
    if (!answer.ok) return answer
    importAnswers[shape] = answer.answer
  }
  const ids = new Set(parsed.output.emitters.map(({ id }) => id))
  if (ids.size !== parsed.output.emitters.length)
    return { ok: false, problem: 'Two emitters of the session share one id.' }
  const current = parsed.output.currentEmitterId
  if (current !== null && !ids.has(current)) {
    return { ok: false, problem: `The session points at an emitter “${current}” that it does not hold.` }
  }
  return {
    ok: true,
    session: { ...parsed.output, recipe: recipe.recipe, emitters, importAnswers },
    migratedFrom: migrated.from === SESSION_VERSION ? null : migrated.from,
  }
}
