import { describe, expect, it } from 'vitest'
import { benchNumbers } from '../../../src/core/pipeline/bench-numbers.ts'
import { corridorOf } from '../../../src/core/pipeline/corridor.ts'
import type { BenchNumbers } from '../../../src/core/pipeline/emitter-numbers.ts'
import { flagsOf } from '../../../src/core/pipeline/flags.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import type { EmitterModel } from '../../../src/core/simulate/emitter-model.ts'
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'
import { fieldModel, fieldTrace } from './field-record.ts'

const recipe = resolveRecipe(DEFAULT_RECIPE, {
  threshold: { rule: 'crossing' },
  fit: { laws: ['exponential', 'power-cutoff-density'], shown: { on: 'exponential', off: 'exponential' } },
})

function numbersOf(model: EmitterModel): BenchNumbers {
  const corridor = corridorOf(fieldTrace(model.durationSeconds, 'flags', model))
  const product = corridor.thresholds(recipe)
  return benchNumbers(corridor.prepared(recipe), product, recipe, product.byRule.counts)
}

const keysOf = ({ flags }: Pick<BenchNumbers, 'flags'>): string[] => flags.map(({ key }) => key)
const good = numbersOf(fieldModel(300))
const [off, on] = fieldModel(1).states.map(({ dwell }) => dwell)

describe('flags', () => {
  it('are none for a bright, quick two-level emitter', () => {
    expect(good.flags).toEqual([])
  })

  it.each<[string, string, EmitterModel]>([
    [
      'levels that overlap',
      'levels-overlap',
      { ...fieldModel(300), ...twoLevelModel({ durationSeconds: 300, offCps: 300, onCps: 1000, off, on }) },
    ],
    ['few dwells', 'few-on-dwells', fieldModel(8)],
    // Exponential off-times forbid such an end, a power law fitted to them does not.
    ['an end in the dark', 'perhaps-bleached', { ...fieldModel(300), bleachSeconds: 150 }],
  ])('tell of %s', (_, key, model) => {
    const { flags } = numbersOf(model)
    const flag = flags.find((one) => one.key === key)
    expect(flag, flags.map((one) => one.key).join(' ')).toBeDefined()
    // What was seen, with a number.
    expect(flag?.sentence).toMatch(/\d/)
  })

  it('tell how sure a dark end is, and nothing of a short one', () => {
    const ends = (lastSeconds: number, chance: number, chanceScaleFree: number): string[] =>
      flagsOf({ ...good, bleach: { lastSeconds, chance, chanceScaleFree } }, 300, 0.01).map(({ key }) => key)
    expect(ends(100, 1e-9, 1e-4)).toEqual(['likely-bleached'])
    expect(ends(100, 1e-9, 0.3)).toEqual(['perhaps-bleached'])
    expect(ends(100, 0.3, 1e-9)).toEqual(['perhaps-bleached'])
    expect(ends(100, 0.2, 0.3)).toEqual(['dark-end-unproven'])
    expect(ends(3, 1e-9, 1e-9)).toEqual([])
  })

  it('tell of bins between the levels when the excess is large and sure', () => {
    const mixed = (ratio: number, upperTail: number): string[] =>
      flagsOf(
        { ...good, mixedBins: { observed: 90, expected: 90 / ratio, ratio, upperTail } },
        300,
        0.01,
      ).map(({ key }) => key)
    expect(mixed(2, 1e-6)).toContain('between-levels')
    expect(mixed(2, 1e-2)).not.toContain('between-levels')
    expect(mixed(1.2, 1e-6)).not.toContain('between-levels')
  })

  it('tell of a drifting baseline that rests on little', () => {
    const baseline = (method: BenchNumbers['baseline']['method'], supportedShare: number): string[] =>
      flagsOf({ ...good, baseline: { ...good.baseline, method, supportedShare } }, 300, 0.01).map(
        ({ key }) => key,
      )
    expect(baseline('drifting', 0.3)).toContain('baseline-unsupported')
    expect(baseline('drifting', 0.7)).not.toContain('baseline-unsupported')
    expect(baseline('constant', 0.3)).not.toContain('baseline-unsupported')
  })

  it('tell of one dwell that dominates', () => {
    const longest = (longestShare: number | null): string[] => {
      const dwells = { ...good.states[1].dwells, longestShare }
      const states = [good.states[0], { ...good.states[1], dwells }] as const
      return keysOf({ flags: flagsOf({ ...good, states }, 300, 0.01) })
    }
    expect(longest(0.5)).toContain('one-on-dwell-dominates')
    expect(longest(0.2)).not.toContain('one-on-dwell-dominates')
    expect(longest(null)).not.toContain('one-on-dwell-dominates')
  })

  it('tell of a cutoff that threshold errors could make', () => {
    const artefact = (seconds: number | null): string[] =>
      flagsOf({ ...good, artefactCutoffSeconds: { on: seconds, off: null } }, 300, 0.01).map(({ key }) => key)
    // Fitted at about 0.25 s.
    expect(artefact(1)).toContain('artefact-cutoff-on')
    expect(artefact(100)).not.toContain('artefact-cutoff-on')
    expect(artefact(null)).not.toContain('artefact-cutoff-on')
  })
})
