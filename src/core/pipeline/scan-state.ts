import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Estimate } from '../fits/fit.ts'
import { scanShortest } from '../fits/shortest-fitted.ts'
import { lawNamed } from '../laws/all-laws.ts'
import type { Recipe } from '../recipe/recipe.ts'
import type { StateFits } from './analysis-products.ts'

/** First parameter of the shown law when the shortest fitted dwell is moved. */
export interface ScanRow {
  readonly shortestBins: number
  readonly shortestSeconds: number
  readonly parameter: string
  readonly value: Estimate
  readonly complete: number
}

const SCANNED_BINS = [1, 2, 3, 4, 5, 7, 10, 14, 20, 30, 40, 60] as const

/** Empty when no law was fitted. */
export function scanState(fits: StateFits, sample: DwellSample, recipe: Recipe): ScanRow[] {
  const shown = fits.fits[fits.shown]
  if (shown === undefined) return []
  const bins = [...new Set([...SCANNED_BINS, fits.shortest.bins])].sort((a, b) => a - b)
  return scanShortest(lawNamed(shown.law), sample, bins, { confidence: recipe.fit.confidence }).flatMap(
    (fit) => {
      const [name, value] = Object.entries(fit.parameters)[0] ?? []
      return name === undefined || value === undefined || value.estimate === null
        ? []
        : [
            {
              shortestBins: fit.shortestBins,
              shortestSeconds: fit.shortestSeconds,
              parameter: name,
              value,
              complete: fit.complete,
            },
          ]
    },
  )
}
