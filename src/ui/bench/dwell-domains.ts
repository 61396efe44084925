import type { ThresholdProduct } from '../../core/pipeline/analysis-products.ts'
import { type DwellDomains, dwellDomains } from '../../figures/scene/dwells-at-threshold.ts'
import type { DwellPlot } from '../../session/schema/session.ts'
import type { AppModel } from '../bridge/app-model.ts'
import { benchNow } from './bench-state.ts'

/** Axes are kept per table and plot: they must not move while the threshold does. */
const keptDomains = new WeakMap<ThresholdProduct['table'], Map<string, DwellDomains>>()

export function domainsOf(app: AppModel, plot: DwellPlot): DwellDomains | null {
  const now = benchNow(app)
  if (now?.product == null) return null
  const kept = keptDomains.get(now.product.table) ?? new Map<string, DwellDomains>()
  keptDomains.set(now.product.table, kept)
  const key = `${plot} ${now.product.group}`
  const domains =
    kept.get(key) ?? dwellDomains(now.product, now.trace.levelled, plot === 'scan' ? 'density' : plot)
  kept.set(key, domains)
  return domains
}
