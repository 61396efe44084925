import type { ScanRow } from '../../core/pipeline/scan-state.ts'
import type { Frame, Panel } from './scene.ts'

export interface ScanPanelInput {
  readonly frame: Frame
  readonly state: 'on' | 'off'
  readonly rows: readonly ScanRow[]
  /** Shortest fitted dwell in force, s. */
  readonly shortestSeconds: number | null
  readonly xDomain: readonly [number, number]
  readonly letter: string
}

const LABELS: Readonly<Record<string, string>> = {
  alpha: 'exponent α',
  tauSeconds: 'τ  (s)',
  medianSeconds: 'median  (s)',
}

/**
 * First parameter of the law shown against the shortest fitted dwell. A level stretch says that short dwells do not
 * drag the answer; a slope at the left says that they do (blinking inside the bin, shot noise).
 */
export function scanPanel(input: ScanPanelInput): Panel {
  const parameter = input.rows[0]?.parameter ?? 'alpha'
  const values = input.rows.flatMap(({ value }) =>
    [value.estimate, value.low, value.high].flatMap((x) => (x === null ? [] : [x])),
  )
  const exponent = parameter === 'alpha'
  const domain: [number, number] = exponent
    ? [Math.min(1, ...values) - 0.05, Math.max(2, Math.min(4, Math.max(2, ...values))) + 0.05]
    : [Math.min(...values, 1) * 0.8, Math.max(...values, 1) * 1.25]
  return {
    frame: input.frame,
    x: {
      kind: 'log',
      domain: input.xDomain,
      label: `shortest fitted ${input.state}-time  (s)`,
      side: 'bottom',
      ticks: 5,
    },
    y: {
      kind: exponent ? 'linear' : 'log',
      domain,
      label: LABELS[parameter] ?? parameter,
      side: 'left',
      ticks: 6,
    },
    marks: [
      ...(input.shortestSeconds === null
        ? []
        : [
            {
              kind: 'rule',
              across: 'x',
              at: input.shortestSeconds,
              stroke: { role: 'soft', weight: 1, dash: [4, 2] },
            } as const,
          ]),
      {
        kind: 'points',
        xs: input.rows.map(({ shortestSeconds }) => shortestSeconds),
        ys: input.rows.map(({ value }) => value.estimate ?? Number.NaN),
        lows: input.rows.map(({ value }) => value.low ?? domain[0]),
        highs: input.rows.map(({ value }) => value.high ?? domain[1]),
        role: input.state,
        hollow: input.state === 'off',
        radius: 3.2,
      },
      ...(input.rows.length === 0
        ? [
            {
              kind: 'text',
              x: 0.5,
              y: 0.5,
              text: 'waiting for the settled fit',
              anchor: 'middle',
              role: 'soft',
            } as const,
          ]
        : []),
    ],
    letter: input.letter,
    description: `${LABELS[parameter] ?? parameter} of ${input.state}-times against the shortest fitted dwell, ${input.rows.length} points.`,
  }
}
