import { lnPoisson } from '../../core/numeric/poisson.ts'
import type { TraceProduct } from '../../core/pipeline/analysis-products.ts'
import { histogramPanel } from './histogram-panel.ts'
import type { Frame, Panel } from './scene.ts'
import { countsDomain } from './trace-of-record.ts'

/** Count histogram of a record with the two Poisson levels at their shares. */
export function recordHistogram(product: TraceProduct, frame: Frame, letter: string): Panel {
  const { histogram, levelled, baseline, usableBins } = product
  const expected = (mean: number, share: number): Float64Array =>
    Float64Array.from(
      histogram.counts,
      (_, i) => usableBins * share * Math.exp(lnPoisson(Math.max(0, histogram.first + i), mean)),
    )
  const separate = baseline.status === 'ok'
  return histogramPanel({
    frame,
    counts: countsDomain(product),
    first: histogram.first,
    bins: histogram.counts,
    off: separate ? expected(levelled.offCounts, 1 - baseline.onShare) : null,
    on: separate ? expected(levelled.onCounts, baseline.onShare) : null,
    letter,
    description: `Count histogram of ${usableBins} bins with the off and on level.`,
  })
}
