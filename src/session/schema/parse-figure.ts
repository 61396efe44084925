import { parseRecipe } from '../../core/recipe/recipe-schema.ts'
import type { Recipe } from '../../core/recipe/recipe.ts'
import { parseOrigin } from './origin-schema.ts'
import type { RecordOrigin } from './record-origin.ts'

/** Choices restored from a figure, after checking. */
export type FigureChoices =
  | {
      readonly ok: true
      readonly name: string
      readonly recipe: Recipe
      readonly origin: RecordOrigin
      readonly threshold: number
      readonly window: readonly [number, number] | null
    }
  | { readonly ok: false; readonly problem: string }

/** What an exported figure carries, as text from anyone; compare figures/scene/figure-metadata.ts. */
interface FigureParts {
  readonly recipe: unknown
  readonly emitter: { readonly name: string; readonly origin: unknown }
  readonly threshold: number
  readonly window: unknown
}

/** Checks recipe, origin, threshold and window; nothing is applied unless all are valid. */
export function figureChoices({ recipe, emitter, threshold, window }: FigureParts): FigureChoices {
  const parsed = parseRecipe(recipe)
  if (!parsed.ok) return parsed
  const origin = parseOrigin(emitter.origin)
  if (!origin.ok) return origin
  // The threshold becomes a choice by hand, so it must be one that a saved session may hold.
  const byHand = parseRecipe({
    ...parsed.recipe,
    threshold: { ...parsed.recipe.threshold, handCounts: threshold },
  })
  if (!byHand.ok) {
    return { ok: false, problem: 'The threshold in the figure is not a whole number of counts within range.' }
  }
  const span =
    Array.isArray(window) && window.length === 2 && window.every(Number.isFinite) && window[1] > window[0]
      ? ([window[0], window[1]] as const)
      : null
  return {
    ok: true,
    name: emitter.name.slice(0, 400),
    recipe: parsed.recipe,
    origin: origin.origin,
    threshold,
    window: span,
  }
}
