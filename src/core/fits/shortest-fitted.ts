import type { DwellSample } from '../dwells/dwell-sample.ts'
import type { Law } from '../laws/law.ts'
import type { Recipe } from '../recipe/recipe.ts'
import type { Fit } from './fit.ts'
import { fitLaw } from './fit-law.ts'

/** Below this many bins shot noise and the bins' edges blur durations. */
export const FEWEST_BINS = 3

export interface ShortestFitted {
  readonly bins: number
  /** Which rule set it, in a few words. */
  readonly rule: string
  readonly message: string
}

/**
 * The shortest fitted dwell: the largest of three bins, the length from which predicted spurious events are rare, and
 * the number chosen as safe against blinking inside a bin; or the number set by hand.
 * @param spuriousSafe bins; Infinity when no length is safe
 */
export function shortestFitted(
  choices: Recipe['fit']['shortest'],
  state: 'on' | 'off',
  spuriousSafe: number,
): ShortestFitted {
  const hand = choices.handBins[state]
  const safe = Number.isFinite(spuriousSafe) ? spuriousSafe : FEWEST_BINS
  const unsafe = Number.isFinite(spuriousSafe)
    ? ''
    : 'Predicted spurious events stay above 5 % at every length: widen the bin or move the threshold.'
  if (choices.rule === 'hand' && hand !== null) {
    const below = Math.max(FEWEST_BINS, safe)
    return {
      bins: hand,
      rule: 'set by hand',
      message:
        hand < below
          ? `Below the ${below} bins that the rule asks for: short dwells are distorted there.`
          : unsafe,
    }
  }
  const candidates = [
    { bins: FEWEST_BINS, rule: 'three bins' },
    { bins: safe, rule: 'spurious events below 5 %' },
    { bins: choices.subBinSafeBins, rule: 'chosen against sub-bin blinking' },
  ]
  const largest = candidates.reduce((top, one) => (one.bins > top.bins ? one : top))
  return { bins: largest.bins, rule: largest.rule, message: unsafe }
}

/** The same law fitted from each of several shortest durations: alpha against the shortest fitted dwell. */
export function scanShortest(
  law: Law,
  sample: DwellSample,
  shortestBins: readonly number[],
  options: { readonly confidence: number },
): Fit[] {
  const fits: Fit[] = []
  for (const bins of shortestBins) {
    const before = fits.at(-1)
    const start = before !== undefined && before.coordinates.length > 0 ? { start: before.coordinates } : {}
    fits.push(fitLaw(law, sample, bins, { confidence: options.confidence, intervals: true, ...start }))
  }
  return fits
}
