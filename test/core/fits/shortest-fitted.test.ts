import { describe, expect, it } from 'vitest'
import { fitLaw } from '../../../src/core/fits/fit-law.ts'
import { scanShortest, shortestFitted } from '../../../src/core/fits/shortest-fitted.ts'
import { power } from '../../../src/core/laws/power.ts'
import type { Recipe } from '../../../src/core/recipe/recipe.ts'
import { drawnBins, sampleOf } from './plain-likelihood.ts'

const CHOICES: Recipe['fit']['shortest'] = {
  rule: 'largest',
  subBinSafeBins: 1,
  handBins: { on: null, off: null },
}

describe('shortestFitted', () => {
  it.each([
    [1, 1, 3, 'three bins'],
    [3, 3, 3, 'three bins'],
    [6, 4, 6, 'spurious events below 5 %'],
    [6, 10, 10, 'chosen against sub-bin blinking'],
  ])('takes the largest: spurious-safe %i, sub-bin-safe %i', (spuriousSafe, subBinSafeBins, bins, rule) => {
    expect(shortestFitted({ ...CHOICES, subBinSafeBins }, 'on', spuriousSafe)).toEqual({
      bins,
      rule,
      message: '',
    })
  })

  it('names the hand, per state, and warns below what the rule asks for', () => {
    const byHand = { ...CHOICES, rule: 'hand', handBins: { on: 2, off: null } } as const
    expect(shortestFitted(byHand, 'on', 4)).toMatchObject({ bins: 2, rule: 'set by hand' })
    expect(shortestFitted(byHand, 'on', 4).message).toMatch(/^Below the 4 bins/)
    expect(shortestFitted({ ...byHand, handBins: { on: 8, off: null } }, 'on', 4).message).toBe('')
    expect(shortestFitted(byHand, 'off', 1)).toMatchObject({ bins: 3, rule: 'three bins' })
  })

  it('says that no length is safe', () => {
    const result = shortestFitted(CHOICES, 'off', Number.POSITIVE_INFINITY)
    expect(result.bins).toBe(3)
    expect(result.message).toMatch(/stay above 5 %/)
  })
})

describe('scanShortest', () => {
  it('is the fit from each shortest duration on, with intervals', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 800, 'scan'))
    const fits = scanShortest(power, sample, [3, 5, 10, 5000000], { confidence: 0.9 })
    expect(fits.map(({ shortestBins }) => shortestBins)).toEqual([3, 5, 10, 5000000])
    for (const fit of fits.slice(0, 3)) {
      const alone = fitLaw(power, sample, fit.shortestBins, { confidence: 0.9, intervals: true })
      expect(fit.parameters['alpha'].estimate).toBeCloseTo(
        alone.parameters['alpha'].estimate ?? Number.NaN,
        4,
      )
      expect(fit.parameters['alpha'].low).toBeCloseTo(alone.parameters['alpha'].low ?? Number.NaN, 3)
    }
    expect(fits[3].status).toBe('too-few-dwells')
  })

  it('is flat for a power law, within the intervals', () => {
    const sample = sampleOf(drawnBins(power, [1.5], 3000, 'flat'))
    // 99.9 % intervals: a false alarm once in 250 seeds.
    for (const fit of scanShortest(power, sample, [3, 6, 12, 25], { confidence: 0.999 })) {
      expect(fit.parameters['alpha'].low).toBeLessThan(1.5)
      expect(fit.parameters['alpha'].high).toBeGreaterThan(1.5)
    }
  })
})
