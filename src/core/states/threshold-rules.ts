import type { Recipe } from '../recipe/recipe.ts'
import type { CountHistogram } from './count-histogram.ts'
import type { LevelledTrace } from './levels.ts'

/**
 * Threshold at which a count is equally likely off and on, both misclassifications costing the same: the
 * smallest integer c with Poisson(c; on) >= Poisson(c; off), c = ceil[(on - off) / ln(on / off)]. 1 when the
 * off level is 0; the level itself, rounded up, when both are equal; NaN unless 0 <= off <= on and both are
 * finite.
 *
 * @param offMean mean counts per bin off
 * @param onMean mean counts per bin on
 */
export function crossingThreshold(offMean: number, onMean: number): number {
  if (!(offMean >= 0 && onMean >= offMean && Number.isFinite(onMean))) return Number.NaN
  if (offMean === 0) return 1
  // log1p keeps its digits when the levels are close.
  const excess = (onMean - offMean) / offMean
  return Math.ceil(excess === 0 ? offMean : (onMean - offMean) / Math.log1p(excess))
}

/**
 * Smallest count above off + sigmas x sqrt(off). For counts this is not a fixed error rate: at an off level of
 * 1, five standard deviations let through 8e-5 of the off bins, not 3e-7. NaN unless off >= 0.
 */
export function sigmaThreshold(offMean: number, sigmas: number): number {
  return Math.floor(offMean + sigmas * Math.sqrt(offMean)) + 1
}

/**
 * Threshold that splits the histogram with the greatest variance between the two sides, w0 w1 (m1 - m0)^2 (Otsu, IEEE
 * Trans. Syst. Man Cybern. 9, 62 (1979)); a bin is on from the threshold up. Across an empty stretch the
 * criterion is flat: the middle is taken. NaN with fewer than two different values.
 */
export function leastVarianceThreshold({ first, counts }: CountHistogram): number {
  let total = 0
  let moment = 0
  for (let i = 0; i < counts.length; i++) {
    total += counts[i]
    moment += i * counts[i]
  }
  let best = 0
  let from = Number.NaN
  let to = Number.NaN
  let below = 0
  let momentBelow = 0
  for (let i = 1; i < counts.length; i++) {
    const added = counts[i - 1]
    below += added
    momentBelow += (i - 1) * added
    const above = total - below
    if (below === 0 || above === 0) continue
    const between = (momentBelow * total - moment * below) ** 2 / (below * above)
    if (between > best) {
      best = between
      from = i
      to = i
    } else if (added === 0 && to === i - 1) to = i
  }
  return first + Math.floor((from + to) / 2)
}

/** A threshold in counts per bin on the levelled axis, the rule that gave it, and why. */
export interface RuledThreshold {
  readonly counts: number
  readonly rule: string
  readonly message: string
}

const counted = (counts: number): string => `${Number(counts.toPrecision(4))}`

/**
 * Threshold by the recipe's rule. When the rule cannot be applied (levels not found, no threshold set by hand,
 * a single value), the next one that can is used, and the message says so: crossing, least-variance, one above
 * the lowest.
 *
 * @param half result of `halfThreshold`; NaN where shot noise forbids the middle
 */
export function thresholdByRule(
  choices: Recipe['threshold'],
  { offCounts, onCounts }: Pick<LevelledTrace, 'offCounts' | 'onCounts'>,
  histogram: CountHistogram,
  half = Number.NaN,
): RuledThreshold {
  const apart = offCounts >= 0 && onCounts > offCounts && Number.isFinite(onCounts)
  const levels = `off ${counted(offCounts)}, on ${counted(onCounts)} counts per bin`
  const ordered: { rule: Recipe['threshold']['rule']; counts: number; why: string; missing: string }[] = [
    {
      rule: 'hand',
      counts: choices.handCounts === null ? Number.NaN : Math.ceil(choices.handCounts),
      why: 'Set by hand.',
      missing: 'No threshold was set by hand.',
    },
    {
      rule: 'half',
      counts: half,
      why: `Nearest to half way between the levels (${levels}) where shot noise is expected to miscall fewer than 0.05 bins of the record; there durations are rounded without bias.`,
      missing: apart
        ? 'Shot noise would miscall bins at any threshold near half way.'
        : 'Two separate levels were not found.',
    },
    {
      rule: 'sigma',
      counts: sigmaThreshold(offCounts, choices.sigmas),
      why: `First count above the off level plus ${choices.sigmas} standard deviations (${levels}).`,
      missing: 'The off level was not found.',
    },
    {
      rule: 'crossing',
      counts: apart ? crossingThreshold(offCounts, onCounts) : Number.NaN,
      why: `Off and on are equally likely just below this count (${levels}).`,
      missing: 'Two separate levels were not found.',
    },
    {
      rule: 'least-variance',
      counts: leastVarianceThreshold(histogram),
      why: 'Splits the histogram with the least variance within the two sides.',
      missing: 'All usable bins hold the same count.',
    },
  ]
  const wanted = ordered.find(({ rule }) => rule === choices.rule)
  const fallBack = ordered.filter(({ rule }) => rule === 'crossing' || rule === 'least-variance')
  let missing = ''
  for (const candidate of [...(wanted === undefined ? [] : [wanted]), ...fallBack]) {
    if (Number.isFinite(candidate.counts))
      return {
        counts: candidate.counts,
        rule: candidate.rule,
        message: missing === '' ? candidate.why : `${missing} ${candidate.why} Check it by eye.`,
      }
    if (missing === '') missing = candidate.missing
  }
  return {
    counts: histogram.first + 1,
    rule: choices.rule,
    message: `${missing} No threshold divides this record: choose another bin width or set the record aside.`,
  }
}
