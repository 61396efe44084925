import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { recipeHash } from '../../../src/core/recipe/recipe-hash.ts'
import {
  embedMetadata,
  extractMetadata,
  type FigureMetadata,
} from '../../../src/figures/scene/figure-metadata.ts'
import { escapeXml } from '../../../src/figures/scene/xml-text.ts'
import { figureChoices } from '../../../src/session/schema/parse-figure.ts'
import { anyRecipe } from '../../core/recipe/any-recipe.ts'
import { anyOrigin, hostileText } from '../../session/any-session.ts'

const anyMetadata: fc.Arbitrary<FigureMetadata> = fc.record({
  version: hostileText,
  recipe: anyRecipe,
  recipeHash: fc.constant('0123456789abcdef'),
  emitter: fc.record({ name: hostileText, origin: anyOrigin }),
  threshold: fc.nat(1000),
  window: fc.option(fc.tuple(fc.nat(100), fc.integer({ min: 101, max: 200 }))),
  numbers: fc.jsonValue(),
})

function figureOf(metadata: FigureMetadata): string {
  const name = escapeXml(metadata.emitter.name)
  return `<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg"><title>${name}</title>${embedMetadata(metadata)}<text>${name}</text></svg>`
}

const plain: FigureMetadata = {
  version: '1',
  recipe: DEFAULT_RECIPE,
  recipeHash: recipeHash(DEFAULT_RECIPE),
  emitter: { name: 'first', origin: { kind: 'demonstration', name: 'first' } },
  threshold: 28,
  window: null,
  numbers: {},
}

describe('figure metadata', () => {
  it('come out of a figure as they went in, whatever the names', () => {
    fc.assert(
      fc.property(anyMetadata, (metadata) => {
        const found = extractMetadata(figureOf(metadata))
        expect(found).toEqual({ ok: true, metadata: JSON.parse(JSON.stringify(metadata)) })
      }),
      { seed: 111, numRuns: 400 },
    )
  })

  it('give the choices back through the check at the door', () => {
    fc.assert(
      fc.property(anyMetadata, (metadata) => {
        const found = extractMetadata(figureOf(metadata))
        if (!found.ok) throw new Error(found.reason)
        const choices = figureChoices(found.metadata)
        expect(choices.ok).toBe(true)
        if (!choices.ok) return
        expect(choices.name).toBe(metadata.emitter.name)
        expect(choices.threshold).toBe(metadata.threshold)
        expect(choices.window).toEqual(metadata.window)
        expect(recipeHash(choices.recipe)).toBe(recipeHash(JSON.parse(JSON.stringify(metadata.recipe))))
      }),
      { seed: 112, numRuns: 200 },
    )
  })

  it('are text without markup of their own', () => {
    fc.assert(
      fc.property(anyMetadata, (metadata) => {
        const inside = embedMetadata(metadata)
          .replace(/^<metadata><[^>]*>/, '')
          .replace(/<\/[^>]*><\/metadata>$/, '')
        expect(inside).not.toMatch(/[<>]/)
      }),
      { seed: 113, numRuns: 200 },
    )
  })

  it.each([
    ['no metadata', '<svg xmlns="http://www.w3.org/2000/svg"/>', 'no Heliograph recipe'],
    ['nothing', '', 'no Heliograph recipe'],
    ['metadata cut off', figureOf(plain).slice(0, 300), 'no Heliograph recipe'],
    ['text that is not JSON', figureOf(plain).replace('{', ''), 'not JSON'],
    ['an entity left open', figureOf(plain).replace('&quot;', '&quot'), 'not JSON'],
    ['no threshold', figureOf({ ...plain, threshold: Number.NaN }), 'lacks parts'],
    ['no recipe', figureOf({ ...plain, recipe: undefined }), 'lacks parts'],
    ['a recipe that is null', figureOf({ ...plain, recipe: null }), 'lacks parts'],
    ['metadata of absurd size', figureOf({ ...plain, numbers: 'x'.repeat(4_000_001) }), 'too large'],
  ])('of a figure with %s give a reason', (_, svg, reason) => {
    const found = extractMetadata(svg)
    expect(found.ok ? '' : found.reason).toContain(reason)
  })

  it('with characters changed give a reason or metadata that the check at the door judges, never a throw', () => {
    const svg = figureOf(plain)
    const from = svg.indexOf('<metadata>')
    fc.assert(
      fc.property(
        fc.integer({ min: from, max: svg.indexOf('</metadata>') }),
        fc.string({ unit: 'binary', maxLength: 6 }),
        fc.nat(6),
        (at, text, length) => {
          const found = extractMetadata(svg.slice(0, at) + text + svg.slice(at + length))
          if (found.ok) expect(typeof figureChoices(found.metadata).ok).toBe('boolean')
          else expect(found.reason.length).toBeGreaterThan(10)
        },
      ),
      { seed: 114, numRuns: 2000 },
    )
  })
})
