import { benchNumbers } from '../../src/core/pipeline/bench-numbers.ts'
import { corridorOf } from '../../src/core/pipeline/corridor.ts'
import { fitRow } from '../../src/core/pipeline/fit-row.ts'
import type { RowFits } from '../../src/core/pipeline/analysis-products.ts'
import { DEFAULT_RECIPE } from '../../src/core/recipe/default-recipe.ts'
import { DEMONSTRATION } from '../../src/core/simulate/demonstration.ts'
import { simulateTrace } from '../../src/core/simulate/simulate-trace.ts'

/** A demonstration emitter, binned and analysed with the default recipe. Deterministic: seeds are part of the emitter. */
export function analysedRecord(index: number) {
  const emitter = DEMONSTRATION[index]
  const { trace, gate } = simulateTrace(emitter.model, 0.01, emitter.seed)
  const corridor = corridorOf({ record: trace, gate })
  const product = corridor.thresholds(DEFAULT_RECIPE)
  const prepared = corridor.prepared(DEFAULT_RECIPE)
  const numbers = benchNumbers(prepared, product, DEFAULT_RECIPE, product.byRule.counts)
  const rows = new Map<number, RowFits>()
  for (let row = 0; row < product.table.rows; row += 7) {
    rows.set(row, fitRow(product, prepared.levelled, DEFAULT_RECIPE, row, 'none'))
  }
  return { name: emitter.name, trace: corridor.traceProduct(DEFAULT_RECIPE), product, numbers, rows }
}
