import type { TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers, StateNumbers } from '../../core/pipeline/emitter-numbers.ts'
import { roundTo, siDuration } from '../../core/numeric/units.ts'
import type { DwellPlotKind } from './dwells-at-threshold.ts'

/** A paragraph of a caption; `formula` reads `^` and `_` as powers and indices, so it holds no text of a user. */
export interface Paragraph {
  readonly text: string
  readonly formula: boolean
}

export interface BenchCaptionInput {
  readonly trace: TraceProduct
  readonly numbers: BenchNumbers
  readonly name: string
  readonly plot: DwellPlotKind
  readonly excluded: readonly (readonly [number, number])[]
  readonly confidence: number
}

/** What a reader must know to use the figure: record, bins, threshold, counts of dwells, conventions, what marks mean. */
export function benchCaption(input: BenchCaptionInput): Paragraph[] {
  const { trace, numbers, name } = input
  const [off, on] = numbers.states
  const bin = siDuration(trace.levelled.binSeconds)
  const record =
    `${name}: ${siDuration(trace.durationSeconds, 4)} in bins of ${bin}; on at ${numbers.threshold} counts or more ` +
    `(${roundTo(numbers.countsAboveBaseline, null, 3)} above the ${numbers.baseline.method} baseline). ` +
    `${countSentence('Off', off)} ${countSentence('On', on)}`
  return [
    { text: record, formula: false },
    { text: [traceSentence(input), plotSentence(input)].join(' '), formula: true },
  ]
}

function countSentence(state: 'Off' | 'On', { dwells, fits }: StateNumbers): string {
  const parts = [
    `${dwells.complete} complete`,
    `${dwells.censored} cut`,
    `${dwells.startUnseen} of unseen start`,
  ]
  return `${state}-times: ${parts.join(', ')}; fitted from ${fits.shortest.bins} bins.`
}

/** Panels a and b: only what can be seen in them. */
function traceSentence({ trace, excluded, numbers }: BenchCaptionInput): string {
  const classes = new Set((trace.gate?.windows ?? []).map(({ gateClass }) => gateClass))
  const marks = [
    `${numbers.baseline.method === 'constant' ? 'baseline' : 'baseline with 95 % band'} green`,
    'threshold dashed',
    ...(classes.has('driven') ? ['gate-on windows ochre'] : []),
    ...(classes.has('sham') ? ['sham windows pale blue'] : []),
    ...(excluded.length > 0 ? ['left out grey'] : []),
    ...(numbers.baseline.method === 'constant'
      ? []
      : ['stretches without off bins to carry the baseline hatched']),
    'states (on vermillion, off blue) at the foot',
  ]
  return `a, b: ${marks.join(', ')}.`
}

const BARS: Readonly<Record<DwellPlotKind, (percent: string) => string>> = {
  density: (percent) =>
    `bars exact Poisson, ${percent}, arrows upper limits of empty bins; predicted spurious (rose) and split (pale rose) dwells;`,
  neighbour: () => 'density by neighbour spacing;',
  survival: (percent) => `Kaplan–Meier with ${percent} log(−log) band, cut dwells hollow;`,
  hazard: (percent) => `time times hazard, bars exact Poisson, ${percent};`,
}

/** Panels c and d, with the convention of the exponent. */
function plotSentence({ plot, confidence }: BenchCaptionInput): string {
  const percent = `${Number((100 * confidence).toPrecision(3))} %`
  return (
    `c, d: ${BARS[plot](percent)} lines maximum likelihood with bin-exact probabilities, ` +
    `solid over the fitted range from the dashed mark on; brackets ${percent} profile-likelihood intervals. ` +
    'α is the exponent of the density, P(t) ∝ t^−α; the law shown names the form of its cutoff τ.'
  )
}
