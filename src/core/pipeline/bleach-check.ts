import type { DwellSample } from '../dwells/dwell-sample.ts'
import { fitLaw } from '../fits/fit-law.ts'
import { lawNamed } from '../laws/all-laws.ts'
import type { LawName } from '../laws/law.ts'
import type { StateFits } from './analysis-products.ts'
import type { StateDwells } from './state-dwells.ts'

/** The last dwell of a record that ends dark, against the off-times before it. */
export interface BleachCheck {
  readonly lastSeconds: number
  /**
   * Chance that the longest of as many off-times of the law shown is at least as long: 1 - [1 - S(t)]^n. A finite record
   * cuts long off-times, so that a cutoff is easily fitted where there is none and this chance comes out too small.
   */
  readonly chance: number
  /** The same under a plain power law, the most forgiving law here. */
  readonly chanceScaleFree: number
}

/**
 * Null when the record does not end dark, the end is shorter than what is fitted, or the complete off-times cannot be
 * fitted. The terminal dwell itself takes no part in the fits: it would make itself look usual.
 */
export function bleachCheck(
  off: StateDwells,
  fits: StateFits,
  sample: DwellSample,
  confidence: number,
): BleachCheck | null {
  const shown = fits.fits[fits.shown]
  const last = off.lastSeconds
  if (shown === undefined || last === null || last <= shown.shortestSeconds) return null
  const none = new Float64Array(0)
  const complete = {
    ...sample,
    censoredBins: none,
    censoredWeights: none,
    enteredBins: none,
    enteredWeights: none,
  }
  const under = (law: LawName): number | null => {
    const before = fitLaw(lawNamed(law), complete, shown.shortestBins, { confidence, intervals: false })
    if (before.coordinates.length === 0) return null
    const survival = Math.exp(lawNamed(law).at(before.coordinates, before.shortestSeconds).logSurvival(last))
    return -Math.expm1(before.complete * Math.log1p(-survival))
  }
  const chance = under(shown.law)
  const chanceScaleFree = under('power')
  return chance === null || chanceScaleFree === null ? null : { lastSeconds: last, chance, chanceScaleFree }
}
