import { boundaryLikelihoodRatio, vuong } from '../fits/compare-fits.ts'
import type { DwellSample } from '../dwells/dwell-sample.ts'
import { lawNamed } from '../laws/all-laws.ts'
import type { LawName } from '../laws/law.ts'
import type { StateFits } from './analysis-products.ts'

/** Two laws on the same dwells. */
export interface LawComparison {
  readonly first: LawName
  readonly second: LawName
  readonly test: 'likelihood ratio, boundary corrected' | 'Vuong'
  /** Likelihood ratio statistic 2 dl, or Vuong's z (positive favours the first). */
  readonly statistic: number
  readonly p: number
  /** One sentence: which law the dwells favour, or that they cannot tell. */
  readonly sentence: string
}

const CUTOFFS: readonly LawName[] = ['power-cutoff-survival', 'power-cutoff-density']
const TELLING = 0.05

/** Power against each cutoff form (nested), and the shown law against every law it does not contain (Vuong 1989). */
export function lawComparisons(fits: StateFits, sample: DwellSample): LawComparison[] {
  const rows: LawComparison[] = []
  const power = fits.fits.find((fit) => fit.law === 'power')
  for (const cutoff of fits.fits.filter((fit) => CUTOFFS.includes(fit.law))) {
    if (power === undefined) continue
    const result = boundaryLikelihoodRatio(power, cutoff)
    if (result === null) continue
    rows.push({
      first: cutoff.law,
      second: 'power',
      test: 'likelihood ratio, boundary corrected',
      statistic: result.statistic,
      p: result.p,
      sentence:
        result.p < TELLING
          ? `${lawNamed(cutoff.law).label} against plain power law: the cutoff improves the fit (p = ${result.p.toPrecision(2)}).`
          : `${lawNamed(cutoff.law).label} against plain power law: no cutoff is shown (p = ${result.p.toPrecision(2)}).`,
    })
  }
  const shown = fits.fits[fits.shown]
  if (shown === undefined) return rows
  for (const rival of fits.fits) {
    if (rival.law === shown.law || nested(rival.law, shown.law)) continue
    const result = vuong(shown, rival, sample)
    if (result === null) continue
    const pair = `${lawNamed(shown.law).label} against ${lawNamed(rival.law).label}`
    const name = lawNamed(result.z > 0 ? shown.law : rival.law).label
    rows.push({
      first: shown.law,
      second: rival.law,
      test: 'Vuong',
      statistic: result.z,
      p: result.p,
      sentence:
        result.p < TELLING
          ? `${pair}: the dwells favour ${name} (p = ${result.p.toPrecision(2)}).`
          : `${pair}: ${shown.complete} dwells cannot tell them apart (p = ${result.p.toPrecision(2)}).`,
    })
  }
  return rows
}

function nested(a: LawName, b: LawName): boolean {
  const inside = (inner: LawName, outer: LawName): boolean =>
    (inner === 'power' && CUTOFFS.includes(outer)) ||
    (inner === 'exponential' && (CUTOFFS.includes(outer) || outer === 'stretched'))
  return inside(a, b) || inside(b, a)
}
