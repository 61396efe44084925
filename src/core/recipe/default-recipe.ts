import type { Recipe } from './recipe.ts'

/** What the app and the batch command start from. */
export const DEFAULT_RECIPE: Recipe = {
  version: 1,
  bin: { seconds: 0.01 },
  baseline: { method: 'automatic', stiffnessSeconds: 4.65, excludedSeconds: [] },
  threshold: { rule: 'crossing', sigmas: 4, handCounts: null },
  dwells: { gate: 'all' },
  fit: {
    laws: ['power', 'power-cutoff-survival', 'power-cutoff-density', 'exponential', 'log-normal', 'stretched'],
    shown: { on: 'best', off: 'best' },
    shortest: { rule: 'largest', subBinSafeBins: 3, handBins: { on: null, off: null } },
    confidence: 0.95,
  },
  goodness: { samples: 1000, seed: 1 },
}
