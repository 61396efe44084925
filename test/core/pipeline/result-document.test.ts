import { describe, expect, it } from 'vitest'
import { benchNumbers } from '../../../src/core/pipeline/bench-numbers.ts'
import { corridorOf } from '../../../src/core/pipeline/corridor.ts'
import type { RecordInHand } from '../../../src/core/pipeline/prepare-trace.ts'
import {
  emitterResult,
  type ResultDocument,
  resultDocument,
} from '../../../src/core/pipeline/result-document.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { recipeHash } from '../../../src/core/recipe/recipe-hash.ts'
import type { Recipe } from '../../../src/core/recipe/recipe.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import fields from '../../reference/result-document-fields.json' with { type: 'json' }
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'
import { fieldModel, fieldTrace } from './field-record.ts'

function documentOf(inHand: RecordInHand, recipe: Recipe, threshold?: number): ResultDocument {
  const corridor = corridorOf(inHand)
  const product = corridor.thresholds(recipe)
  const numbers = benchNumbers(corridor.prepared(recipe), product, recipe, threshold ?? product.byRule.counts)
  const source = { file: 'a.csv', sha256: null, column: null }
  return resultDocument('1.2.3', recipe, [
    emitterResult('a', source, corridor.traceProduct(recipe), product, numbers),
  ])
}

type Plain = Readonly<Record<string, unknown>>
const isPlain = (value: unknown): value is Plain =>
  value !== null && typeof value === 'object' && !Array.isArray(value)

/** Places where a value lacks a field of the wanted shape, or has another type there; null stands for any missing value. */
function shortfalls(wanted: unknown, value: unknown, at: string): string[] {
  if (value === null) return isPlain(wanted) || Array.isArray(wanted) ? [`${at} is null`] : []
  if (Array.isArray(wanted)) {
    if (!Array.isArray(value)) return [`${at} is no list`]
    return value.flatMap((one, index) => shortfalls(wanted[0], one, `${at}[${index}]`))
  }
  if (isPlain(wanted)) {
    if (!isPlain(value)) return [`${at} is no object`]
    return Object.keys(wanted).flatMap((key) =>
      Object.hasOwn(value, key)
        ? shortfalls(wanted[key], value[key], `${at}.${key}`)
        : [`${at}.${key} is missing`],
    )
  }
  if (wanted === null) return []
  return typeof value === typeof wanted ? [] : [`${at} is a ${typeof value}`]
}

/** Every number of a value. */
function numbersOf(value: unknown): number[] {
  if (typeof value === 'number') return [value]
  return value !== null && typeof value === 'object' ? Object.values(value).flatMap(numbersOf) : []
}

/** The fixed fields; `off` has those of `on`, and parameters are those of the law. */
const [template] = fields.document.emitters
const {
  fits: [fitFields],
  ...dwellFields
} = template.dwells.on
const { parameters, ...lawFields } = fitFields
const wantedDwells = { ...dwellFields, fits: [lawFields] }
const wanted = {
  ...fields.document,
  emitters: [{ ...template, dwells: { on: wantedDwells, off: wantedDwells } }],
}

const recipe = resolveRecipe(DEFAULT_RECIPE, {
  fit: { laws: ['power', 'power-cutoff-density', 'exponential'] },
})
const [off, on] = fieldModel(20).states.map(({ dwell }) => dwell)
const document = documentOf(fieldTrace(60, 'document'), recipe)

describe('result document', () => {
  it('has every field of the agreed form', () => {
    expect(shortfalls(wanted, document, 'document')).toEqual([])
    const names = ['power', 'power-cutoff-density', 'exponential']
    const [emitter] = document.emitters
    for (const { fits } of [emitter.dwells.on, emitter.dwells.off]) {
      expect(fits.map(({ law }) => law)).toEqual(names)
      const cutoff = fits[1]
      expect(shortfalls(parameters, cutoff.parameters, 'parameters')).toEqual([])
      for (const parameter of Object.values(cutoff.parameters)) {
        expect(Object.keys(parameter).sort()).toEqual(['estimate', 'high', 'low'])
      }
    }
  })

  it('survives JSON unchanged: no NaN, no infinity', () => {
    expect(JSON.parse(JSON.stringify(document))).toEqual(document)
    expect(numbersOf(document).filter((one) => !Number.isFinite(one))).toEqual([])
  })

  it('names its recipe', () => {
    expect(document.heliograph).toEqual({ version: '1.2.3', recipeHash: recipeHash(recipe), recipe })
  })

  it('says what was measured', () => {
    const [{ record, levels, threshold, dwells, onFraction }] = document.emitters
    expect(record).toMatchObject({ durationSeconds: 60, binSeconds: 0.01, bins: 6000, usableBins: 6000 })
    // Simulated at 200 and 4000 counts per second, on for 0.25 s and off for 0.35 s on average.
    expect(levels.off.countsPerSecond).toBeGreaterThan(150)
    expect(levels.off.countsPerSecond).toBeLessThan(250)
    expect(levels.on.countsPerSecond).toBeGreaterThan(3700)
    expect(levels.on.countsPerSecond).toBeLessThan(4300)
    expect(threshold.rule).toBe(DEFAULT_RECIPE.threshold.rule)
    expect(threshold.countsAboveBaseline).toBeCloseTo(
      threshold.countsPerBin - levels.off.countsPerSecond * 0.01,
      9,
    )
    expect(onFraction.low).toBeLessThan(onFraction.estimate ?? 0)
    expect(onFraction.high).toBeGreaterThan(onFraction.estimate ?? 1)
    for (const state of [dwells.on, dwells.off]) {
      const shares = state.fits.map(({ weight }) => weight ?? 0)
      expect(shares.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 9)
      expect(state.preferredLaw).toBe(state.fits[shares.indexOf(Math.max(...shares))].law)
      expect(state.shortestFittedSeconds).toBeGreaterThanOrEqual(0.03)
    }
  })

  it('calls a threshold that is not the one of the rule set by hand', () => {
    const at = document.emitters[0].threshold.countsPerBin + 2
    const [{ threshold }] = documentOf(fieldTrace(60, 'document'), recipe, at).emitters
    expect(threshold).toMatchObject({ rule: 'hand', countsPerBin: at })
  })

  it('names the rule also where the table has steps of several counts', () => {
    const bright = {
      ...fieldModel(20),
      ...twoLevelModel({ durationSeconds: 20, offCps: 5e3, onCps: 4e5, off, on }),
    }
    const inHand = fieldTrace(20, 'bright', bright)
    const rules = ['crossing', 'least-variance', 'sigma'] as const
    for (const rule of rules) {
      const [{ threshold }] = documentOf(inHand, resolveRecipe(recipe, { threshold: { rule } })).emitters
      expect(threshold.rule).toBe(rule)
    }
    expect(corridorOf(inHand).thresholds(recipe).table.step).toBeGreaterThan(1)
  })

  it('of an emitter that never blinks has nulls, not zeros, and is still whole', () => {
    const counts = Uint16Array.from({ length: 3000 }, () => 2)
    const dark = documentOf(
      {
        record: { kind: 'trace', counts, binSeconds: 0.01, startSeconds: 0, coverage: null, dropped: {} },
        gate: null,
      },
      resolveRecipe(recipe, { threshold: { rule: 'hand', handCounts: 50 } }),
      50,
    )
    expect(shortfalls(wanted, dark, 'document')).toEqual([])
    expect(JSON.parse(JSON.stringify(dark))).toEqual(dark)
    const { on } = dark.emitters[0].dwells
    expect(on).toMatchObject({ complete: 0, censored: 0, longestSeconds: null, preferredLaw: null })
    expect(
      on.fits.every(
        ({ logLikelihood, aicc, weight }) => logLikelihood === null && aicc === null && weight === null,
      ),
    ).toBe(true)
    expect(dark.emitters[0].flags.length).toBeGreaterThan(0)
  })
})
