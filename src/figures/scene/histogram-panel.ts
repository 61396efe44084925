import type { Frame, Mark, Panel } from './scene.ts'

export interface HistogramPanelInput {
  readonly frame: Frame
  readonly counts: readonly [number, number]
  /** Value of the first entry of `bins`. */
  readonly first: number
  /** Bins of the trace per value. */
  readonly bins: ArrayLike<number>
  /** Expected bins per value of the two Poisson levels, same values; null leaves them out. */
  readonly off: ArrayLike<number> | null
  readonly on: ArrayLike<number> | null
  readonly description: string
  readonly letter: string
}

/** Count histogram lying on the side, sharing the count axis of the trace; bins on a logarithmic axis. */
export function histogramPanel(input: HistogramPanelInput): Panel {
  const { bins, first } = input
  let most = 1
  for (let i = 0; i < bins.length; i++) most = Math.max(most, bins[i])
  // One outline, so that neighbouring rows leave no seams.
  const outline: number[] = [0.5, first - 0.5]
  for (let i = 0; i < bins.length; i++) {
    const length = Math.max(0.5, bins[i])
    outline.push(length, first + i - 0.5, length, first + i + 0.5)
  }
  outline.push(0.5, first + bins.length - 0.5)
  const marks: Mark[] = [{ kind: 'outline', points: outline, fill: 'trace' }]
  const level = (values: ArrayLike<number> | null, role: 'on' | 'off'): void => {
    if (values === null) return
    const xs: number[] = []
    const ys: number[] = []
    for (let i = 0; i < values.length; i++) {
      if (values[i] < 0.3) continue
      xs.push(values[i])
      ys.push(first + i)
    }
    marks.push({ kind: 'line', xs, ys, stroke: { role, weight: 1.6 } })
  }
  level(input.off, 'off')
  level(input.on, 'on')
  return {
    frame: input.frame,
    x: { kind: 'log', domain: [0.5, most * 1.5], label: 'bins', side: 'bottom', ticks: 3 },
    y: { kind: 'linear', domain: input.counts, label: '', side: 'none', ticks: 5 },
    marks,
    letter: input.letter,
    description: input.description,
  }
}
