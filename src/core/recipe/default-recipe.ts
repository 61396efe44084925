import type { Recipe } from './recipe.ts'

/** What the app and the batch command start from. */
export const DEFAULT_RECIPE: Recipe = {
  version: 1,
  bin: { seconds: 0.01 },
  baseline: { method: 'automatic', stiffnessSeconds: 20, excludedSeconds: [] },
  threshold: { rule: 'half', sigmas: 4, handCounts: null },
  dwells: { gate: 'all' },
  fit: {
    laws: [
      'power',
      'power-cutoff-survival',
      'power-cutoff-density',
      'exponential',
      'log-normal',
      'stretched',
    ],
    // The field's usual numbers; weights and goodness of fit stand beside them.
    shown: { on: 'power-cutoff-density', off: 'power-cutoff-density' },
    shortest: { rule: 'largest', subBinSafeBins: 3, handBins: { on: null, off: null } },
    confidence: 0.95,
  },
  goodness: { samples: 1000, seed: 1 },
}
