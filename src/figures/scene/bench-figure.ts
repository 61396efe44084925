import type { ThresholdProduct, TraceProduct } from '../../core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../core/pipeline/emitter-numbers.ts'
import { benchCaption, type Paragraph } from './bench-caption.ts'
import { dwellDomains, type DwellPlotKind, dwellsAtThreshold } from './dwells-at-threshold.ts'
import { recordHistogram } from './histogram-of-record.ts'
import { type Frame, LETTER_INDENT, type Note, type Panel, type Scene } from './scene.ts'
import { wrapText } from './text-width.ts'
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
const FONT = 7
const CAPTION = 6.5
const HAIRLINE = 0.5
/** One distance for the labels of all left axes, so that they stand in line. */
const LABEL_DISTANCE = 24.5
const RIGHT = 5
/** Columns of the trace per point of width: finer than print shows. */
const COLUMNS_PER_POINT = 4

/**
 * The Bench as a figure for print: a trace with baseline, threshold and states, b its count histogram, c off-times, d
 * on-times with fits. Same panels as on screen, lengths in points, text 6 to 8 pt.
 */
export function benchFigure(input: BenchFigureInput): Scene {
  const width = input.millimetres * POINTS_PER_MILLIMETRE
  const wide = input.millimetres > 120
  const left = 33
  const upperHeight = wide ? 105 : 78
  const lowerHeight = wide ? 142 : 108
  const histogramWidth = wide ? 58 : 38
  const gap = wide ? 9 : 11
  const top = 15
  const traceFrame: Frame = {
    x: left,
    y: top,
    width: width - left - histogramWidth - gap - RIGHT,
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
  const plotWidth = stacked ? width - left - RIGHT : (width - 2 * left - 9 - RIGHT) / 2
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
  const bottom = plotFrame(1).y + lowerHeight + 29
  const edge = left - LETTER_INDENT * FONT
  const notes = captionNotes(benchCaption(input), edge, bottom, width - edge - RIGHT)
  return {
    width,
    height: (notes.at(-1)?.y ?? bottom) + 0.5 * CAPTION + 3,
    unit: 'pt',
    fontSize: FONT,
    hairline: HAIRLINE,
    panels: panels.map((panel) =>
      panel.y.side === 'left' ? { ...panel, y: { ...panel.y, labelDistance: LABEL_DISTANCE } } : panel,
    ),
    notes,
  }
}

/** Paragraphs wrapped to a width, the first line of each at its own place. */
function captionNotes(paragraphs: readonly Paragraph[], x: number, top: number, width: number): Note[] {
  const notes: Note[] = []
  for (const { text, formula } of paragraphs) {
    for (const line of wrapText(text, CAPTION, width)) {
      notes.push({
        x,
        y: top + (notes.length + 0.8) * CAPTION * 1.3,
        text: line,
        anchor: 'start',
        size: CAPTION,
        formula,
      })
    }
  }
  return notes
}
