import type { Frame, Mark, Panel } from './scene.ts'

export interface TracePanelInput {
  readonly frame: Frame
  /** Visible stretch, s. */
  readonly window: readonly [number, number]
  /** Counts axis. */
  readonly counts: readonly [number, number]
  readonly countsLabel: string
  readonly timeLabel: string
  /** Lowest and highest counts per column. */
  readonly lows: Float32Array
  readonly highs: Float32Array
  readonly columns: number
  /** Baseline and its band in counts per bin at times (s); levelled traces give a flat one. */
  readonly baseline: {
    readonly seconds: ArrayLike<number>
    readonly counts: ArrayLike<number>
    readonly low: ArrayLike<number>
    readonly high: ArrayLike<number>
  } | null
  /** Windows of the gate by class, s. */
  readonly driven: readonly (readonly [number, number])[]
  readonly sham: readonly (readonly [number, number])[]
  readonly unsupported: readonly (readonly [number, number])[]
  readonly excluded: readonly (readonly [number, number])[]
  readonly description: string
  readonly letter: string
  /** About how many numbers on the time axis. */
  readonly timeTicks: number
}

/** Counts per bin against time, without what moves with the threshold: see `thresholdMarks`. */
export function tracePanel(input: TracePanelInput): Panel {
  const marks: Mark[] = [
    ...input.driven.map(([from, to]): Mark => ({ kind: 'span', from, to, fill: 'driven' })),
    ...input.sham.map(([from, to]): Mark => ({ kind: 'span', from, to, fill: 'sham' })),
    ...input.excluded.map(([from, to]): Mark => ({ kind: 'span', from, to, fill: 'guard' })),
    { kind: 'envelope', lows: input.lows, highs: input.highs, columns: input.columns, role: 'trace' },
    ...input.unsupported.map(
      ([from, to]): Mark => ({ kind: 'span', from, to, fill: 'unsupported', hatch: true }),
    ),
  ]
  if (input.baseline !== null) {
    const { seconds, counts, low, high } = input.baseline
    marks.push(
      { kind: 'area', xs: seconds, lows: low, highs: high, fill: 'baseline-band' },
      { kind: 'line', xs: seconds, ys: counts, stroke: { role: 'baseline', weight: 1.6 } },
    )
  }
  return {
    frame: input.frame,
    x: {
      kind: 'linear',
      domain: input.window,
      label: input.timeLabel,
      side: 'bottom',
      ticks: input.timeTicks,
    },
    y: { kind: 'linear', domain: input.counts, label: input.countsLabel, side: 'left', ticks: 5 },
    marks,
    letter: input.letter,
    description: input.description,
  }
}

/** The threshold across a trace, following the baseline, and the strip of states below. */
export function thresholdMarks(
  threshold: number,
  line: { readonly seconds: ArrayLike<number>; readonly counts: ArrayLike<number> } | null,
  states: { readonly states: Uint8Array; readonly columns: number; readonly thickness: number } | null,
): Mark[] {
  const stroke = { role: 'threshold', weight: 1.4, dash: [5, 3] } as const
  const marks: Mark[] = [
    line === null
      ? { kind: 'rule', across: 'y', at: threshold, stroke }
      : { kind: 'line', xs: line.seconds, ys: line.counts, stroke },
  ]
  if (states !== null) marks.push({ kind: 'states', ...states })
  return marks
}
