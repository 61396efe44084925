import { describe, expect, it } from 'vitest'
import type { DwellSample } from '../../../src/core/dwells/dwell-sample.ts'
import { boundaryLikelihoodRatio, vuong } from '../../../src/core/fits/compare-fits.ts'
import type { LawName } from '../../../src/core/laws/law.ts'
import { lawNamed } from '../../../src/core/laws/all-laws.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { fitState } from '../../../src/core/pipeline/fit-row.ts'
import { lawComparisons } from '../../../src/core/pipeline/law-comparisons.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import { sampleOf } from '../dwells/sample-of.ts'

const LAWS = DEFAULT_RECIPE.fit.laws

/** Durations of a law in bins of half a second, rounded up. */
function drawn(law: LawName, parameters: readonly number[], dwells: number): DwellSample {
  const random = seededRandom(`${law} ${dwells}`)
  const one = lawNamed(law)
  const coordinates = one.coordinatesOf(parameters)
  return sampleOf(Array.from({ length: dwells }, () => Math.ceil(one.sample(random, coordinates, 0.5) / 0.5)))
}

function compared(sample: DwellSample, shown: LawName | 'best', laws: readonly LawName[] = LAWS) {
  const recipe = resolveRecipe(DEFAULT_RECIPE, { fit: { laws, shown: { on: shown } } })
  const fits = fitState(sample, 1, 1, recipe, 'none')
  return { fits, rows: lawComparisons(fits, sample) }
}

const exponential = drawn('exponential', [8], 800)
const power = drawn('power', [2.2], 800)

describe('lawComparisons', () => {
  it('finds a cutoff in dwells that have one', () => {
    const { rows } = compared(exponential, 'exponential')
    const cutoffs = rows.filter(({ test }) => test !== 'Vuong')
    expect(cutoffs.map(({ first, second }) => [first, second])).toEqual([
      ['power-cutoff-survival', 'power'],
      ['power-cutoff-density', 'power'],
    ])
    for (const { p, sentence } of cutoffs) {
      expect(p).toBeLessThan(1e-6)
      expect(sentence).toContain('improves')
    }
  })

  // Dwells without a cutoff: p is 1 for half of the records and uniform on (0, 1/2) else, so 1e-3 and less happens
  // once in a thousand seeds; the seed is fixed.
  it('claims none in dwells of a plain power law', () => {
    const { rows } = compared(power, 'power')
    for (const { p } of rows.filter(({ test }) => test !== 'Vuong')) expect(p).toBeGreaterThan(1e-3)
  })

  it('favours the law the dwells were drawn from over one of another shape, whichever is shown', () => {
    for (const [shown, rival] of [
      ['exponential', 'power'],
      ['power', 'exponential'],
    ] as const) {
      const row = compared(exponential, shown).rows.find(
        (one) => one.test === 'Vuong' && one.second === rival,
      )
      expect(row?.first).toBe(shown)
      expect(row?.p).toBeLessThan(1e-3)
      expect(Math.sign(row?.statistic ?? 0)).toBe(shown === 'exponential' ? 1 : -1)
      expect(row?.sentence).toContain(lawNamed('exponential').label)
    }
  })

  it('says of few dwells that they cannot tell', () => {
    const { rows } = compared(drawn('log-normal', [1.5, 0.7], 25), 'log-normal', ['log-normal', 'stretched'])
    expect(rows).toHaveLength(1)
    expect(rows[0].sentence).toMatch(/cannot tell|favour/)
    expect(rows[0].p >= 0.05).toBe(rows[0].sentence.includes('cannot tell'))
  })

  it('compares laws of which one contains the other by likelihood ratio or not at all', () => {
    const pairs: readonly (readonly [LawName, readonly LawName[]])[] = [
      ['power', ['exponential', 'log-normal', 'stretched']],
      ['exponential', ['power', 'log-normal']],
      ['power-cutoff-density', ['power-cutoff-survival', 'log-normal', 'stretched']],
      ['stretched', ['power', 'power-cutoff-survival', 'power-cutoff-density', 'log-normal']],
    ]
    for (const [shown, rivals] of pairs) {
      const { rows } = compared(power, shown)
      expect(rows.filter(({ test }) => test === 'Vuong').map(({ second }) => second)).toEqual(rivals)
    }
  })

  it('hands on the numbers of the tests', () => {
    const { fits, rows } = compared(exponential, 'log-normal')
    const fit = (law: LawName) => {
      const found = fits.fits.find((one) => one.law === law)
      if (found === undefined) throw new Error(law)
      return found
    }
    for (const { test, first, second, statistic, p } of rows) {
      const expected =
        test === 'Vuong'
          ? vuong(fit(first), fit(second), exponential)
          : boundaryLikelihoodRatio(fit(second), fit(first))
      expect(p).toBe(expected?.p)
      expect([statistic]).toEqual(
        expected === null ? [] : ['z' in expected ? expected.z : expected.statistic],
      )
    }
  })

  it('is empty when nothing could be fitted', () => {
    expect(compared(sampleOf([]), 'power').rows).toEqual([])
    expect(compared(sampleOf([]), 'best').rows).toEqual([])
  })
})
