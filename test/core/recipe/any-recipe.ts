import fc from 'fast-check'
import type { LawName } from '../../../src/core/laws/law.ts'
import type { Recipe } from '../../../src/core/recipe/recipe.ts'

const LAWS: readonly LawName[] = [
  'power',
  'power-cutoff-survival',
  'power-cutoff-density',
  'exponential',
  'log-normal',
  'stretched',
]

const finite = (min: number, max: number) => fc.double({ min, max, noNaN: true })
const bins = fc.option(fc.integer({ min: 1, max: 100_000 }))
const shown = fc.constantFrom(...LAWS, 'best' as const)

/** Any recipe whose values lie in the ranges of the controls. */
export const anyRecipe: fc.Arbitrary<Recipe> = fc.record({
  version: fc.constant(1 as const),
  bin: fc.record({ seconds: finite(1e-6, 10) }),
  baseline: fc.record({
    method: fc.constantFrom('automatic' as const, 'constant' as const, 'drifting' as const),
    stiffnessSeconds: finite(0.1, 1000),
    excludedSeconds: fc.array(
      fc.tuple(finite(-1e6, 1e6), finite(1e-3, 1e6)).map(([from, length]) => [from, from + length] as const),
      { maxLength: 20, size: 'max' },
    ),
  }),
  threshold: fc.record({
    rule: fc.constantFrom(
      'half' as const,
      'crossing' as const,
      'sigma' as const,
      'least-variance' as const,
      'hand' as const,
    ),
    sigmas: finite(0.5, 20),
    handCounts: fc.option(fc.integer({ min: -100_000_000, max: 100_000_000 })),
  }),
  dwells: fc.record({
    gate: fc.constantFrom('all' as const, 'reference' as const, 'driven' as const, 'sham' as const),
  }),
  fit: fc.record({
    laws: fc.subarray([...LAWS], { minLength: 1 }),
    shown: fc.record({ on: shown, off: shown }),
    shortest: fc.record({
      rule: fc.constantFrom('largest' as const, 'hand' as const),
      subBinSafeBins: fc.integer({ min: 1, max: 1000 }),
      handBins: fc.record({ on: bins, off: bins }),
    }),
    confidence: finite(0.5, 0.999),
  }),
  goodness: fc.record({
    samples: fc.integer({ min: 10, max: 100_000 }),
    seed: fc.integer({ min: 0, max: 4_294_967_295 }),
  }),
})
