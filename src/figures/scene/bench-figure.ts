import type { ThresholdProduct, TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'
import { roundTo, siDuration } from '../../core/numeric/units.ts'
import { dwellDomains, type DwellPlotKind, dwellsAtThreshold } from './dwells-at-threshold.ts'
import { recordHistogram } from './histogram-of-record.ts'
import type { Frame, Panel, Scene } from './scene.ts'
import {
  countsDomain,
  fillColumns,
  recordPanel,
  recordThresholdMarks,
  traceColumns,
} from './trace-of-record.ts'

export interface BenchFigureInput {
  /** Width of the figure: 85 for one column, 178 for two. */
  readonly millimetres: number
  readonly trace: TraceProduct
  readonly product: ThresholdProduct
  readonly numbers: BenchNumbers
  readonly window: readonly [number, number]
  readonly plot: DwellPlotKind
  readonly name: string
  readonly excluded: readonly (readonly [number, number])[]
  readonly confidence: number
}

const POINTS_PER_MILLIMETRE = 72 / 25.4
const FONT = 6.5
const HAIRLINE = 0.5
/** Columns of the trace per point of width: finer than print shows. */
const COLUMNS_PER_POINT = 4

/**
 * The Bench as a figure for print: a trace with baseline, threshold and states, b its count histogram, c off-times, d
 * on-times with fits. Same panels as on screen, lengths in points, text 6 to 8 pt.
 */
export function benchFigure(input: BenchFigureInput): Scene {
  const width = input.millimetres * POINTS_PER_MILLIMETRE
  const wide = input.millimetres > 120
  const left = 31
  const upperHeight = wide ? 105 : 78
  const lowerHeight = wide ? 142 : 108
  const histogramWidth = wide ? 58 : 38
  const gap = 7
  const top = 15
  const traceFrame: Frame = {
    x: left,
    y: top,
    width: width - left - histogramWidth - gap - 5,
    height: upperHeight,
  }
  const histogramFrame: Frame = {
    x: traceFrame.x + traceFrame.width + gap,
    y: top,
    width: histogramWidth,
    height: upperHeight,
  }
  const lowerTop = top + upperHeight + 34
  const stacked = !wide
  const plotWidth = stacked ? width - left - 5 : (width - 2 * left - 14) / 2
  const plotFrame = (index: number): Frame => ({
    x: stacked ? left : left + index * (plotWidth + left + 9),
    y: stacked ? lowerTop + index * (lowerHeight + 34) : lowerTop,
    width: plotWidth,
    height: lowerHeight,
  })

  const columns = traceColumns(Math.round(traceFrame.width * COLUMNS_PER_POINT))
  fillColumns(columns, input.trace, input.window)
  const record = recordPanel(input.trace, {
    frame: traceFrame,
    window: input.window,
    columns,
    excluded: input.excluded,
    letter: 'a',
    spacing: 6 * FONT,
  })
  const { threshold } = input.numbers
  const histogram = recordHistogram(input.trace, histogramFrame, 'b')
  const domains = dwellDomains(input.product, input.trace.levelled, input.plot)
  const dwells = ([0, 1] as const).map((state) =>
    dwellsAtThreshold(input.product, input.trace.levelled, {
      frame: plotFrame(state),
      state,
      plot: input.plot,
      threshold,
      fits: input.numbers.states[state].fits,
      liveShortestBins: null,
      hover: null,
      domains,
      letter: state === 0 ? 'c' : 'd',
      fontSize: FONT,
      confidence: input.confidence,
    }),
  )
  const panels: Panel[] = [
    {
      ...record,
      marks: [...record.marks, ...recordThresholdMarks(input.trace, columns, input.window, threshold, 2)],
    },
    {
      ...histogram,
      y: { ...histogram.y, domain: countsDomain(input.trace) },
      marks: [
        ...histogram.marks,
        {
          kind: 'rule',
          across: 'y',
          at: threshold,
          stroke: { role: 'threshold', weight: 1.4, dash: [5, 3] },
        },
      ],
    },
    ...dwells,
  ]
  const bottom = plotFrame(1).y + lowerHeight + 24
  const lines = captionLines(input, wide ? 150 : 70)
  return {
    width,
    height: bottom + lines.length * FONT * 1.25 + 5,
    unit: 'pt',
    fontSize: FONT,
    hairline: HAIRLINE,
    panels,
    notes: lines.map((text, index) => ({
      x: left - 20,
      y: bottom + (index + 0.8) * FONT * 1.25,
      text,
      anchor: 'start',
      size: FONT - 0.3,
    })),
  }
}

/** What a reader must know to use the figure: bins, threshold, conventions, censoring. */
function captionLines({ trace, numbers, name, confidence }: BenchFigureInput, width: number): string[] {
  const bin = siDuration(trace.levelled.binSeconds)
  const [off, on] = numbers.states
  const gated = (trace.gate?.windows ?? []).some(({ gateClass }) => gateClass === 'driven')
    ? 'Shaded: gate on. '
    : ''
  const text =
    `${name}: ${siDuration(trace.durationSeconds, 4)} in bins of ${bin}; on at ${numbers.threshold} counts or more ` +
    `(${roundTo(numbers.countsAboveBaseline, null, 3)} above the ${numbers.baseline.method} baseline). ` +
    `α is the exponent of the density, P(t) ∝ t^−α; the law shown names the form of its cutoff τ. ` +
    `Lines: maximum likelihood with bin-exact probabilities, solid over the fitted range (off from ${off.fits.shortest.bins} bins, ` +
    `on from ${on.fits.shortest.bins} bins); brackets: ${Number((100 * confidence).toPrecision(3))} % profile-likelihood intervals. ` +
    `Bars: exact Poisson. ${gated}Dwells cut: ${off.dwells.censored + on.dwells.censored}; of unseen start, not fitted: ${off.dwells.startUnseen + on.dwells.startUnseen}.`
  const lines: string[] = []
  let line = ''
  for (const word of text.split(' ')) {
    if (line.length + word.length + 1 > width) {
      lines.push(line)
      line = word
    } else line = line === '' ? word : `${line} ${word}`
  }
  return [...lines, line]
}
