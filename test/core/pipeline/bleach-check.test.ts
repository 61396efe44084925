import { describe, expect, it } from 'vitest'
import { bleachCheck } from '../../../src/core/pipeline/bleach-check.ts'
import { fitState } from '../../../src/core/pipeline/fit-row.ts'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import { resolveRecipe } from '../../../src/core/recipe/resolve-recipe.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { sampleOf } from '../dwells/sample-of.ts'

const BIN = 0.5
const MEAN_SECONDS = 5
const recipe = resolveRecipe(DEFAULT_RECIPE, {
  fit: {
    laws: ['exponential'],
    shown: { off: 'exponential' },
    shortest: { rule: 'hand', handBins: { off: 3 } },
  },
})
const random = seededRandom('off-times')
const durations = Array.from({ length: 400 }, () =>
  Math.ceil((-Math.log(random.uniform()) * MEAN_SECONDS) / BIN),
)

function checkOf(complete: readonly number[], lastSeconds: number | null, censored: readonly number[] = []) {
  const sample = sampleOf(complete, censored)
  const dwells = {
    complete: complete.length,
    censored: censored.length,
    startUnseen: 0,
    totalSeconds: 1000,
    longestSeconds: 100,
    lastSeconds,
    longestShare: 0.1,
  }
  return bleachCheck(dwells, fitState(sample, 0, 3, recipe, 'none'), sample, 0.95)
}

describe('bleachCheck', () => {
  it('is the chance that the longest of n exponential off-times is as long', () => {
    // Fitted: those of three bins and more.
    const fitted = durations.filter((bins) => bins >= 3)
    const last = 35
    const check = checkOf(durations, last)
    const mean = (BIN * fitted.reduce((a, b) => a + b, 0)) / fitted.length - 3 * BIN
    const survival = Math.exp(-(last - 3 * BIN) / mean)
    const expected = 1 - (1 - survival) ** fitted.length
    // The mean stands for the fit to a few per cent of the exponent.
    expect(Math.log(check?.chance ?? 0)).toBeCloseTo(Math.log(expected), 0)
    expect(check?.lastSeconds).toBe(last)
  })

  it('falls with the length of the end, and less under a power law', () => {
    let before = 1
    for (const last of [20, 40, 80, 160]) {
      const check = checkOf(durations, last)
      expect(check?.chance).toBeLessThan(before)
      expect(check?.chanceScaleFree).toBeGreaterThan(check?.chance ?? 1)
      before = check?.chance ?? 0
    }
  })

  it('takes no part of the end itself into the fit', () => {
    expect(checkOf(durations, 200, [400])).toEqual(checkOf(durations, 200))
  })

  it('says nothing without a dark end, of one shorter than what is fitted, or without off-times', () => {
    expect(checkOf(durations, null)).toBeNull()
    expect(checkOf(durations, 1)).toBeNull()
    expect(checkOf([], 50)).toBeNull()
  })
})
