import { onFractionOfRow } from '../../core/dwells/on-fraction.ts'
import type { Estimate, Fit } from '../../core/fits/fit.ts'
import { lawNamed } from '../../core/laws/all-laws.ts'
import { formatEstimate, roundTo, siDuration } from '../../core/numeric/units.ts'
import type { RowFits, StateFits, ThresholdProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'
import { rowOf, thresholdOf } from '../../core/pipeline/study-thresholds.ts'
import type { LevelledTrace } from '../../core/states/levels.ts'

/** One line of the reading column: fixed place, text, detail, plain warning. */
export interface ReadingLine {
  readonly key: string
  readonly label: string
  readonly text: string
  readonly detail: string
  readonly help: string
  readonly warning: string | null
}

export interface StateReading {
  readonly title: string
  readonly lines: readonly ReadingLine[]
  /** Law weights in the order of the recipe; null where not fitted yet. */
  readonly weights: readonly {
    readonly label: string
    readonly weight: number | null
    readonly shown: boolean
  }[]
}

/** Everything the reading column says at one threshold. Built by look-up: cost bounded by the table's columns. */
export interface LiveReading {
  readonly general: readonly ReadingLine[]
  readonly states: readonly [StateReading, StateReading]
}

const WAITING = '…'
/** An artefact cutoff this many records long has no bearing on the record. */
const FAR_RECORDS = 1000

function line(
  key: string,
  label: string,
  text: string,
  detail: string,
  help: string,
  warning: string | null = null,
): ReadingLine {
  return { key, label, text, detail, help, warning }
}

function chance(p: number): string {
  if (p < 1e-12) return '< 10⁻¹²'
  return p >= 0.001 ? roundTo(p, null, 2) : p.toExponential(1).replace('-', '−')
}

/** Reading at a threshold; `settled` is used where it belongs to the same threshold. */
export function liveReading(
  product: ThresholdProduct,
  levelled: LevelledTrace,
  wanted: number,
  fits: RowFits | null,
  settled: BenchNumbers | null,
): LiveReading {
  const row = rowOf(product.table, wanted)
  const threshold = thresholdOf(product.table, row)
  const exact = settled !== null && settled.threshold === threshold ? settled : null
  const p0 = product.falseOnPerBin[row]
  const p1 = product.falseOffPerBin[row]
  const { binSeconds } = levelled
  const kcps = (counts: number): string => `${roundTo(counts / binSeconds / 1000, null, 3)} kcps`
  const signal = levelled.onCounts - levelled.offCounts || Number.NaN
  const share = (threshold - levelled.offCounts) / signal
  const estimate = onFractionOfRow(
    product.table,
    row,
    { falseOnPerBin: p0, falseOffPerBin: p1 },
    product.group,
  )
  const onFraction: Estimate = exact?.onFraction ?? { estimate, low: null, high: null, unit: '' }
  const fraction = formatEstimate(onFraction)
  const bins = product.table.usableBins
  const spurious =
    p0 * product.table.blocks[0][0].stateBins[row] + p1 * product.table.blocks[0][1].stateBins[row]

  return {
    general: [
      line(
        'threshold',
        'Threshold',
        `${threshold} counts`,
        `${roundTo(threshold - levelled.offCounts, null, 3)} above baseline, ${roundTo(100 * share, null, 2)} % of the step`,
        'threshold',
      ),
      line(
        'levels',
        'Levels',
        `${kcps(levelled.offCounts)} → ${kcps(levelled.onCounts)}`,
        'off → on, background included',
        'baseline',
      ),
      line(
        'errors',
        'False on, false off',
        `${chance(p0)}, ${chance(p1)}`,
        `per bin; about ${roundTo(spurious, null, 2)} of ${bins} bins`,
        'errors',
        spurious > 20 ? 'Many bins are miscalled by shot noise: widen the bin or move the threshold.' : null,
      ),
      line(
        'on-fraction',
        'On fraction',
        fraction.text,
        fraction.interval || (exact === null ? WAITING : ''),
        'on-fraction',
      ),
    ],
    states: [0, 1].map((state) =>
      stateReading(
        state as 0 | 1,
        product,
        row,
        exact?.states[state].fits ?? fits?.states[state] ?? null,
        binSeconds,
      ),
    ) as [StateReading, StateReading],
  }
}

const SIGNS: Readonly<Record<string, string>> = {
  alpha: 'Exponent α',
  tauSeconds: 'Cutoff τ',
  medianSeconds: 'Median t_m',
  sigma: 'Width σ',
  beta: 'Stretch β',
}

function stateReading(
  state: 0 | 1,
  product: ThresholdProduct,
  row: number,
  fits: StateFits | null,
  binSeconds: number,
): StateReading {
  const block = product.table.blocks[product.group][state]
  const columns = product.table.grid.edges.length - 1
  const sumRow = (values: Float64Array): number => {
    let sum = 0
    for (let column = 0; column < columns; column++) sum += values[row * columns + column]
    return sum
  }
  const fit: Fit | null = fits === null ? null : (fits.fits[fits.shown] ?? null)
  const artefact = (state === 1 ? product.artefactCutoffOnSeconds : product.artefactCutoffOffSeconds)[row]
  const named = artefact < FAR_RECORDS * product.table.usableBins * binSeconds
  const parameters = fit === null ? [] : Object.entries(fit.parameters)
  const slot = (index: number): ReadingLine => {
    const [name, value] = parameters[index] ?? []
    const key = `parameter-${index}`
    if (name === undefined || value === undefined) {
      return line(
        key,
        index === 0 ? 'Exponent α' : 'Cutoff τ',
        fits === null ? WAITING : '—',
        '',
        index === 0 ? 'alpha' : 'tau',
      )
    }
    const { text, interval } = formatEstimate(value)
    const waiting = fit?.status === 'no-interval' ? WAITING : ''
    return line(key, SIGNS[name] ?? name, text, interval || waiting, name === 'alpha' ? 'alpha' : 'tau')
  }
  const tau = fit?.parameters['tauSeconds']
  const reach = tau?.estimate ?? tau?.low ?? null
  return {
    title: state === 1 ? 'On-times' : 'Off-times',
    lines: [
      line(
        'n',
        'Dwells',
        fit === null ? String(sumRow(block.completeCount)) : `${fit.complete} fitted`,
        `${sumRow(block.completeCount)} complete, ${sumRow(block.censoredCount)} cut, longest ${siDuration(block.longestBins[row] * binSeconds)}`,
        'density',
        fit !== null && fit.complete < 50 ? 'Few dwells: read the interval, not the estimate.' : null,
      ),
      line(
        'law',
        'Law',
        fit === null ? WAITING : lawNamed(fit.law).label,
        fit?.weight == null ? '' : `weight ${fit.weight < 0.005 ? '< 0.01' : fit.weight.toFixed(2)}`,
        'weights',
        fit !== null && fit.message !== '' ? fit.message : null,
      ),
      slot(0),
      slot(1),
      line(
        'shortest',
        'Shortest fitted',
        fits === null ? WAITING : siDuration(fits.shortest.bins * binSeconds),
        fits === null ? '' : `${fits.shortest.bins} bins: ${fits.shortest.rule}`,
        'shortest',
        fits !== null && fits.shortest.message !== '' ? fits.shortest.message : null,
      ),
      line(
        'artefact',
        'Artefact cutoff',
        named ? siDuration(artefact) : 'none to speak of',
        named ? 'made by threshold errors alone' : '',
        'artefact',
        reach !== null && artefact < 10 * reach
          ? 'Not ten times longer than the fitted cutoff: do not believe τ.'
          : null,
      ),
    ],
    weights: (fits?.fits ?? []).map((one, index) => ({
      label: lawNamed(one.law).label,
      weight: one.weight,
      shown: index === fits?.shown,
    })),
  }
}
