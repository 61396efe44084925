import { gammaP } from '../numeric/gamma.ts'
import { lnPoisson, poissonUpperTail } from '../numeric/poisson.ts'
import { countHistogram } from '../states/count-histogram.ts'
import type { LevelledTrace } from '../states/levels.ts'
import type { ThresholdTable } from '../states/threshold-table.ts'

/** Bins between the levels against what switching at the observed rate explains. */
export interface MixedBins {
  /** Usable bins whose height lies in the middle of the two levels. */
  readonly observed: number
  /** Expected: one mixed bin per switch, its share on uniform over (0, 1), plus the Poisson tails of both levels. */
  readonly expected: number
  /** observed / expected; null when nothing is expected. */
  readonly ratio: number | null
  /** P(at least the observed number | expected), Poisson. */
  readonly upperTail: number
}

/** The window is the middle of the interval between the levels, in shares of it. */
const WINDOW = [0.3, 0.7] as const

/**
 * Mixed-bin excess: a switch inside a bin leaves a share of the bin on that is uniform on (0, 1), so the number of
 * bins between the levels is known from the number of switches. Many more mean an intermediate level or
 * switching faster than the bin. Derived here; the noise is Poisson: the integral over the share u of
 * Poisson(k; mu0 + uA) is [P(k + 1, mu1) - P(k + 1, mu0)] / A with P the regularised lower incomplete gamma.
 */
export function mixedBins(levelled: LevelledTrace, table: ThresholdTable, row: number): MixedBins {
  const { offCounts, onCounts } = levelled
  const span = onCounts - offCounts
  if (!(span > 0)) return { observed: 0, expected: 0, ratio: null, upperTail: 1 }
  const from = Math.ceil(offCounts + WINDOW[0] * span)
  const to = Math.floor(offCounts + WINDOW[1] * span)
  const histogram = countHistogram(levelled)
  const [off, on] = table.blocks[0]
  const columns = table.grid.edges.length - 1
  let switches = 0
  for (let column = 0; column < columns; column++) {
    switches += off.completeCount[row * columns + column] + on.completeCount[row * columns + column]
  }
  const offBins = off.stateBins[row]
  const onBins = on.stateBins[row]
  let observed = 0
  let expected = 0
  for (let k = from; k <= to; k++) {
    observed += histogram.counts[k - histogram.first] ?? 0
    const mixed = (gammaP(k + 1, onCounts) - gammaP(k + 1, offCounts)) / span
    expected +=
      switches * mixed +
      offBins * Math.exp(lnPoisson(k, offCounts)) +
      onBins * Math.exp(lnPoisson(k, onCounts))
  }
  return {
    observed,
    expected,
    ratio: expected > 0 ? observed / expected : null,
    upperTail: expected > 0 ? poissonUpperTail(observed, expected) : 1,
  }
}
