import type { Trace } from '../photons/trace.ts'
import type { Recipe } from '../recipe/recipe.ts'
import type { ThresholdProduct, TraceProduct } from './analysis-products.ts'
import {
  prepareTrace,
  traceOf,
  traceProductOf,
  type PreparedTrace,
  type RecordInHand,
} from './prepare-trace.ts'
import { groupIndex, ruledThreshold, studyThresholds } from './study-thresholds.ts'

/**
 * One record on its way through the rooms. Each stage is kept until a choice it depends on changes:
 * bins depend on the bin width; baseline and levels on the bins and the baseline choices; the table of all
 * thresholds on the levels; only the group and the rule's threshold are read anew from the recipe.
 */
export interface Corridor {
  prepared(recipe: Recipe): PreparedTrace
  traceProduct(recipe: Recipe): TraceProduct
  thresholds(recipe: Recipe): ThresholdProduct
}

export function corridorOf(inHand: RecordInHand): Corridor {
  let binned: { key: string; trace: Trace } | null = null
  let ready: { key: string; prepared: PreparedTrace } | null = null
  let drawn: { key: string; product: TraceProduct } | null = null
  let studied: { key: string; product: ThresholdProduct } | null = null

  const prepared = (recipe: Recipe): PreparedTrace => {
    const binKey = JSON.stringify(recipe.bin)
    if (binned?.key !== binKey) binned = { key: binKey, trace: traceOf(inHand.record, recipe.bin.seconds) }
    const key = binKey + JSON.stringify(recipe.baseline)
    if (ready?.key !== key) ready = { key, prepared: prepareTrace(inHand, recipe, binned.trace) }
    return ready.prepared
  }
  const keyOf = (recipe: Recipe): string => JSON.stringify([recipe.bin, recipe.baseline])

  return {
    prepared,
    traceProduct(recipe) {
      const key = keyOf(recipe)
      if (drawn?.key !== key) drawn = { key, product: traceProductOf(prepared(recipe)) }
      return drawn.product
    },
    thresholds(recipe) {
      const key = keyOf(recipe)
      const here = prepared(recipe)
      if (studied?.key !== key) studied = { key, product: studyThresholds(here, recipe) }
      const { product } = studied
      return {
        ...product,
        group: groupIndex(product.table, recipe.dwells.gate),
        byRule: ruledThreshold(
          recipe,
          here.levelled,
          this.traceProduct(recipe).histogram,
          product.table,
          product,
        ),
      }
    },
  }
}
