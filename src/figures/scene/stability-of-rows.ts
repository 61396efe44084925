import { onFractionOfRow } from '../../core/dwells/on-fraction.ts'
import type { RowFits, ThresholdProduct } from '../../core/pipeline/analysis-products.ts'
import { thresholdOf } from '../../core/pipeline/study-thresholds.ts'
import type { Frame, Panel } from './scene.ts'
import { stabilityPanel } from './stability-panel.ts'

interface Curve {
  readonly role: 'on' | 'off'
  readonly thresholds: number[]
  readonly values: number[]
  readonly lows: number[]
  readonly highs: number[]
}

function curveOf(
  product: ThresholdProduct,
  rows: ReadonlyMap<number, RowFits>,
  state: 0 | 1,
  name: string,
): Curve {
  const curve: Curve = { role: state === 1 ? 'on' : 'off', thresholds: [], values: [], lows: [], highs: [] }
  for (let row = 0; row < product.table.rows; row++) {
    const fits = rows.get(row)?.states[state]
    const value = fits?.fits[fits.shown]?.parameters[name]
    curve.thresholds.push(thresholdOf(product.table, row))
    // A gap where nothing was fitted yet: the line lifts its pen.
    curve.values.push(value?.estimate ?? Number.NaN)
    curve.lows.push(value?.low ?? Number.NaN)
    curve.highs.push(value?.high ?? (value?.low == null ? Number.NaN : Number.POSITIVE_INFINITY))
  }
  return curve
}

/** Exponent, cutoff and on fraction for every threshold, on the threshold axis of the trace. */
export function stabilityPanels(
  product: ThresholdProduct,
  rows: ReadonlyMap<number, RowFits>,
  counts: readonly [number, number],
  recordSeconds: number,
  frames: readonly [Frame, Frame, Frame],
): Panel[] {
  const { table, group } = product
  const both = (name: string): Curve[] => [curveOf(product, rows, 1, name), curveOf(product, rows, 0, name)]
  const clipHigh = (curve: Curve): Curve => ({
    ...curve,
    highs: curve.highs.map((high) => (high === Number.POSITIVE_INFINITY ? recordSeconds * 10 : high)),
  })
  const fraction = Array.from(
    { length: table.rows },
    (_, row) =>
      onFractionOfRow(
        table,
        row,
        { falseOnPerBin: product.falseOnPerBin[row], falseOffPerBin: product.falseOffPerBin[row] },
        group,
      ) ?? Number.NaN,
  )
  const thresholds = Array.from({ length: table.rows }, (_, row) => thresholdOf(table, row))
  return [
    stabilityPanel({
      frame: frames[0],
      label: 'α',
      kind: 'linear',
      domain: [0.6, 2.4],
      counts,
      curves: both('alpha'),
      description: 'Exponent of on and off times for every threshold.',
    }),
    stabilityPanel({
      frame: frames[1],
      label: 'τ  (s)',
      kind: 'log',
      domain: [3 * table.binSeconds, recordSeconds],
      counts,
      curves: both('tauSeconds').map(clipHigh),
      description: 'Cutoff time of on and off times for every threshold.',
    }),
    stabilityPanel({
      frame: frames[2],
      label: 'on fraction',
      kind: 'linear',
      domain: [0, 1],
      counts,
      curves: [{ role: 'on', thresholds, values: fraction, lows: null, highs: null }],
      description: 'Corrected on fraction for every threshold.',
    }),
  ]
}
