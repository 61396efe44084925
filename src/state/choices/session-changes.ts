import type { Recipe } from '../../core/recipe/recipe.ts'
import { addDifference, type RecipeDifference, resolveRecipe } from '../../core/recipe/resolve-recipe.ts'
import type { EmitterEntry, Session } from '../../session/schema/session.ts'

/** The emitter on the bench; null when the session holds none. */
export function currentEmitter(session: Session): EmitterEntry | null {
  return session.emitters.find(({ id }) => id === session.currentEmitterId) ?? null
}

/** The recipe under which one emitter is analysed. */
export function recipeOf(session: Session, emitter: EmitterEntry | null): Recipe {
  return emitter === null ? session.recipe : resolveRecipe(session.recipe, emitter.difference)
}

/** A choice for all emitters: into the session's recipe. */
export function withRecipe(session: Session, difference: RecipeDifference): Session {
  return { ...session, recipe: resolveRecipe(session.recipe, difference) }
}

/** A choice for one emitter: into its difference. */
export function withDifference(session: Session, emitterId: string, difference: RecipeDifference): Session {
  return {
    ...session,
    emitters: session.emitters.map((emitter) =>
      emitter.id === emitterId
        ? { ...emitter, difference: addDifference(emitter.difference, difference) }
        : emitter,
    ),
  }
}

/** One emitter back to the session's recipe. */
export function withoutDifference(session: Session, emitterId: string): Session {
  return {
    ...session,
    emitters: session.emitters.map((emitter) =>
      emitter.id === emitterId ? { ...emitter, difference: {} } : emitter,
    ),
  }
}

/** Emitters added at the end; the first of them comes onto the bench. */
export function withEmitters(session: Session, emitters: readonly EmitterEntry[]): Session {
  return {
    ...session,
    emitters: [...session.emitters, ...emitters],
    currentEmitterId: emitters[0]?.id ?? session.currentEmitterId,
  }
}

/** One emitter taken out of the session (its raw file stays stored); the neighbour comes onto the bench. */
export function withoutEmitter(session: Session, emitterId: string): Session {
  const at = session.emitters.findIndex(({ id }) => id === emitterId)
  if (at < 0) return session
  const emitters = session.emitters.filter(({ id }) => id !== emitterId)
  const next = emitters[Math.min(at, emitters.length - 1)]?.id ?? null
  return {
    ...session,
    emitters,
    currentEmitterId: session.currentEmitterId === emitterId ? next : session.currentEmitterId,
  }
}

/**
 * Another bin width for all emitters. Thresholds and shortest dwells set by hand are in counts and bins of the old
 * width and mean nothing at the new one: they go back to the rule, in the same step of undo.
 */
export function withBin(session: Session, binSeconds: number): Session {
  const emitters = session.emitters.map((emitter) => {
    const { threshold: _threshold, fit, ...kept } = emitter.difference
    if (fit === undefined) return { ...emitter, difference: kept }
    const { shortest: _shortest, ...fitKept } = fit
    return { ...emitter, difference: Object.keys(fitKept).length === 0 ? kept : { ...kept, fit: fitKept } }
  })
  return withRecipe({ ...session, emitters }, { bin: { seconds: binSeconds } })
}
