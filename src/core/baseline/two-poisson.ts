/** Two Poisson levels in a histogram of counts per bin. Means in counts per bin. */
export interface TwoPoisson {
  readonly offMean: number
  readonly onMean: number
  /** Share of bins in the on component, 0..1. */
  readonly onShare: number
  readonly logLikelihood: number
  readonly rounds: number
  /**
   * `one-level`: two levels describe the histogram no better than one (Bayesian information criterion, Schwarz
   * 1978); then both means are the mean and the share is 0. `not-separable`: two levels, less than two standard deviations apart.
   */
  readonly status: 'ok' | 'not-separable' | 'one-level'
}

const MOST_ROUNDS = 500
const CONVERGED = 1e-9
/** Least distance of two levels, in standard deviations of one bin. */
export const SEPARABLE_DEVIATIONS = 2

/** Distance of two Poisson means in standard deviations: 2 (sqrt b - sqrt a), as the root of a count has variance 1/4 (Bartlett 1936). */
export function levelDistance(offMean: number, onMean: number): number {
  return 2 * (Math.sqrt(onMean) - Math.sqrt(Math.max(0, offMean)))
}

/** The histogram without its empty entries. */
interface Entries {
  readonly values: Float64Array
  readonly bins: Float64Array
  readonly lnFactorials: Float64Array
  readonly total: number
  readonly mean: number
}

/**
 * Maximum-likelihood mixture of two Poisson distributions by expectation-maximisation (Dempster, Laird & Rubin 1977),
 * on the histogram, so that the cost does not grow with the record.
 *
 * Started from the splits of the histogram at its least within-class variance (Otsu 1979) and at its 0.1, 0.5 and
 * 0.9 quantiles; the best likelihood is kept.
 *
 * @param histogram bins with value `offset + i`; finite, >= 0
 * @param offset value of entry 0; values below 0 (a levelled trace has some) are taken as 0
 * @returns means with offMean <= onMean; all zero and `one-level` for an empty histogram
 */
export function fitTwoPoisson(histogram: ArrayLike<number>, offset = 0): TwoPoisson {
  const entries = entriesOf(histogram, offset)
  const { mean, total } = entries
  const single = singleLogLikelihood(entries)
  const oneLevel: TwoPoisson = {
    offMean: mean,
    onMean: mean,
    onShare: 0,
    logLikelihood: single,
    rounds: 0,
    status: 'one-level',
  }
  if (entries.values.length < 2) return oneLevel
  let best: TwoPoisson | null = null
  for (const split of startSplits(entries)) {
    const found = expectationMaximisation(entries, split)
    if (best === null || found.logLikelihood > best.logLikelihood) best = found
  }
  // Two more parameters must earn ln(total) of log-likelihood.
  if (best === null || best.logLikelihood - single <= Math.log(total)) return oneLevel
  const distance = levelDistance(best.offMean, best.onMean)
  return distance < SEPARABLE_DEVIATIONS ? { ...best, status: 'not-separable' } : best
}

function entriesOf(histogram: ArrayLike<number>, offset: number): Entries {
  const values: number[] = []
  const bins: number[] = []
  const lnFactorials: number[] = []
  let total = 0
  let sum = 0
  let lnFactorial = 0
  let reached = 0
  for (let i = 0; i < histogram.length; i++) {
    if (!(histogram[i] > 0)) continue
    const value = Math.max(0, offset + i)
    while (reached < value) lnFactorial += Math.log(++reached)
    values.push(value)
    bins.push(histogram[i])
    lnFactorials.push(lnFactorial)
    total += histogram[i]
    sum += histogram[i] * value
  }
  return {
    values: Float64Array.from(values),
    bins: Float64Array.from(bins),
    lnFactorials: Float64Array.from(lnFactorials),
    total,
    mean: total > 0 ? sum / total : 0,
  }
}

function singleLogLikelihood({ values, bins, lnFactorials, mean }: Entries): number {
  let sum = 0
  for (let i = 0; i < values.length; i++)
    sum += bins[i] * ((values[i] > 0 ? values[i] * Math.log(mean) : 0) - mean - lnFactorials[i])
  return sum
}

/** Entries [0, split) start as off, the others as on; 1 <= split < entries. */
function startSplits({ values, bins, total, mean }: Entries): number[] {
  const splits = new Set<number>()
  let below = 0
  let belowSum = 0
  let bestBetween = -1
  let otsu = 1
  const quantiles = [0.1, 0.5, 0.9]
  for (let i = 0; i + 1 < values.length; i++) {
    below += bins[i]
    belowSum += bins[i] * values[i]
    while (quantiles.length > 0 && below >= quantiles[0] * total) {
      quantiles.shift()
      splits.add(i + 1)
    }
    const between = (belowSum - mean * below) ** 2 / (below * (total - below))
    if (between > bestBetween) {
      bestBetween = between
      otsu = i + 1
    }
  }
  splits.add(otsu)
  return [...splits]
}

function expectationMaximisation(
  { values, bins, lnFactorials, total, mean }: Entries,
  split: number,
): TwoPoisson {
  let offBins = 0
  let offSum = 0
  for (let i = 0; i < split; i++) {
    offBins += bins[i]
    offSum += bins[i] * values[i]
  }
  const allSum = mean * total
  // Half a count in all the bins keeps a dark level above 0, where its logarithm exists.
  const least = 0.5 / total
  let offMean = Math.max(offSum / offBins, least)
  let onMean = Math.max((allSum - offSum) / (total - offBins), least)
  let onShare = (total - offBins) / total
  let logLikelihood = Number.NEGATIVE_INFINITY
  let rounds = 0
  while (rounds < MOST_ROUNDS) {
    rounds++
    const lnOff = Math.log(offMean)
    const lnRatio = Math.log(onMean / offMean)
    const lnOdds = Math.log(onShare / (1 - onShare)) - (onMean - offMean)
    const lnOffShare = Math.log1p(-onShare)
    let onBins = 0
    let onSum = 0
    let sum = 0
    for (let i = 0; i < values.length; i++) {
      const x = values[i] * lnRatio + lnOdds
      const share = 1 / (1 + Math.exp(-x))
      onBins += bins[i] * share
      onSum += bins[i] * share * values[i]
      // ln(off part + on part) = ln off part + ln(1 + e^x)
      const lnOne = x > 0 ? x + Math.log1p(Math.exp(-x)) : Math.log1p(Math.exp(x))
      sum += bins[i] * (lnOffShare + values[i] * lnOff - offMean - lnFactorials[i] + lnOne)
    }
    const gained = sum - logLikelihood
    logLikelihood = sum
    if (!(onBins > 0 && onBins < total) || gained < CONVERGED * total) break
    onShare = onBins / total
    onMean = Math.max(onSum / onBins, least)
    offMean = Math.max((allSum - onSum) / (total - onBins), least)
  }
  const swapped = offMean > onMean
  return {
    offMean: swapped ? onMean : offMean,
    onMean: swapped ? offMean : onMean,
    onShare: swapped ? 1 - onShare : onShare,
    logLikelihood,
    rounds,
    status: 'ok',
  }
}
