import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { parseRecipe } from '../../../src/core/recipe/recipe-schema.ts'
import { figureChoices } from '../../../src/session/schema/parse-figure.ts'
import { anyRecipe } from '../../core/recipe/any-recipe.ts'
import { anyOrigin, hostileText } from '../any-session.ts'

const origin = { kind: 'demonstration', name: 'first' } as const
const figure = { recipe: DEFAULT_RECIPE, emitter: { name: 'first', origin }, threshold: 28, window: [1, 2] }

describe('figureChoices', () => {
  it('gives the choices back', () => {
    expect(figureChoices(figure)).toEqual({
      ok: true,
      name: 'first',
      recipe: DEFAULT_RECIPE,
      origin,
      threshold: 28,
      window: [1, 2],
    })
  })

  it('gives any valid choices back, and what it gives can be saved', () => {
    fc.assert(
      fc.property(
        anyRecipe,
        anyOrigin,
        hostileText,
        fc.integer({ min: -1000, max: 100_000_000 }),
        (recipe, from, name, threshold) => {
          const choices = figureChoices({ recipe, emitter: { name, origin: from }, threshold, window: null })
          expect(choices).toEqual({ ok: true, name, recipe, origin: from, threshold, window: null })
          const saved = { ...recipe, threshold: { ...recipe.threshold, handCounts: threshold } }
          expect(parseRecipe(saved).ok).toBe(true)
        },
      ),
      { seed: 61 },
    )
  })

  it.each([Number.NaN, 1.5, 1e300, -1e9, Number.POSITIVE_INFINITY])(
    'refuses the threshold %d',
    (threshold) => {
      const choices = figureChoices({ ...figure, threshold })
      expect(choices.ok ? '' : choices.problem).toContain('threshold')
    },
  )

  it('refuses a recipe or an origin that is not valid', () => {
    const recipe = figureChoices({ ...figure, recipe: { ...DEFAULT_RECIPE, extra: 1 } })
    expect(recipe.ok ? '' : recipe.problem).toContain('extra')
    const from = figureChoices({ ...figure, emitter: { name: 'x', origin: { ...origin, path: '/' } } })
    expect(from.ok ? '' : from.problem).toContain('path')
    expect(figureChoices({ ...figure, recipe: null }).ok).toBe(false)
  })

  it.each([[undefined], [[2, 1]], [[1]], [[0, Number.NaN]], ['ab'], [[1, 2, 3]], [[1, '2']]])(
    'shows the whole record for the window %j',
    (window) => {
      expect(figureChoices({ ...figure, window })).toMatchObject({ ok: true, window: null })
    },
  )

  it('cuts a name that is too long to keep', () => {
    const choices = figureChoices({ ...figure, emitter: { name: 'x'.repeat(5000), origin } })
    expect(choices.ok && choices.name.length).toBe(400)
  })
})
