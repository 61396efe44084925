import type { Frame, Mark, Panel } from './scene.ts'

export interface StabilityPanelInput {
  readonly frame: Frame
  /** Title over the panel, e.g. `α`, `τ (s)`. */
  readonly label: string
  readonly kind: 'linear' | 'log'
  readonly domain: readonly [number, number]
  /** The count axis, shared with trace and histogram. */
  readonly counts: readonly [number, number]
  readonly curves: readonly {
    readonly role: 'on' | 'off'
    /** Threshold of each point, counts. */
    readonly thresholds: ArrayLike<number>
    readonly values: ArrayLike<number>
    readonly lows: ArrayLike<number> | null
    readonly highs: ArrayLike<number> | null
  }[]
  readonly description: string
}

/** One quantity for every threshold, lying on the side so that it shares the threshold axis. */
export function stabilityPanel(input: StabilityPanelInput): Panel {
  const marks: Mark[] = []
  for (const { role, thresholds, values, lows, highs } of input.curves) {
    if (lows !== null && highs !== null) {
      const boxes: number[] = []
      for (let i = 0; i < thresholds.length; i++) {
        if (Number.isFinite(lows[i]) && Number.isFinite(highs[i])) {
          boxes.push(lows[i], highs[i], thresholds[i] - 0.5, thresholds[i] + 0.5)
        }
      }
      marks.push({ kind: 'boxes', boxes, fill: role === 'on' ? 'on-soft' : 'off-soft' })
    }
    marks.push({ kind: 'line', xs: values, ys: thresholds, stroke: { role, weight: 1.4 } })
  }
  return {
    frame: input.frame,
    x: { kind: input.kind, domain: input.domain, label: input.label, side: 'bottom', ticks: 2 },
    y: { kind: 'linear', domain: input.counts, label: '', side: 'none', ticks: 5 },
    marks,
    letter: '',
    description: input.description,
  }
}
