import type { Frame, Mark, Panel } from './scene.ts'

export interface DwellPoints {
  readonly seconds: ArrayLike<number>
  readonly values: ArrayLike<number>
  readonly lows: ArrayLike<number> | null
  readonly highs: ArrayLike<number> | null
}

export interface DwellPanelInput {
  readonly frame: Frame
  readonly state: 'on' | 'off'
  readonly plot: 'density' | 'neighbour' | 'survival' | 'hazard'
  /** Points with exact bars (density, hazard). */
  readonly points: DwellPoints
  /** Upper limits where nothing was seen. */
  readonly limits: { readonly seconds: ArrayLike<number>; readonly highs: ArrayLike<number> }
  /** Steps with band (survival). */
  readonly steps:
    | (DwellPoints & { readonly lows: ArrayLike<number>; readonly highs: ArrayLike<number> })
    | null
  /** Fitted law, and from which duration on it was fitted, s. */
  readonly curve: {
    readonly seconds: ArrayLike<number>
    readonly values: ArrayLike<number>
    readonly fittedFrom: number
    readonly fittedTo: number
  } | null
  /** Predicted spurious and split dwells as a density per stretch [from, to, value], s and 1/s. */
  readonly spurious: ArrayLike<number>
  readonly split: ArrayLike<number>
  readonly artefactSeconds: number | null
  readonly shortestSeconds: number | null
  /** Durations pointed at, s. */
  readonly hover: readonly [number, number] | null
  readonly cut: ArrayLike<number>
  /** Numbers at risk under the survival curve: durations (s) and numbers. */
  readonly atRisk: { readonly seconds: ArrayLike<number>; readonly numbers: ArrayLike<number> } | null
  /** Lines of text in the upper right corner: n, law, numbers. */
  readonly legend: readonly string[]
  readonly xDomain: readonly [number, number]
  readonly yDomain: readonly [number, number]
  readonly letter: string
  readonly axisTitle: boolean
  /** Distance of lines of the legend, figure units. */
  readonly lineHeight: number
}

const Y_LABEL = {
  density: 'P(t)  (s⁻¹)',
  neighbour: 'P(t), neighbour-spaced  (s⁻¹)',
  survival: 'S(t)',
  hazard: 't · hazard',
} as const

/** Dwell times of one state on logarithmic axes, with everything that says how far to trust them. */
export function dwellPanel(input: DwellPanelInput): Panel {
  const { state, plot } = input
  const soft = state === 'on' ? 'on-soft' : 'off-soft'
  const marks: Mark[] = []
  const { hover, steps, curve } = input
  if (hover !== null) marks.push({ kind: 'span', from: hover[0], to: hover[1], fill: 'hover' })
  if (plot === 'density') {
    marks.push({ kind: 'boxes', boxes: stacked(input.split, input.yDomain[0]), fill: 'split' })
    marks.push({ kind: 'boxes', boxes: stacked(input.spurious, input.yDomain[0]), fill: 'spurious' })
  }
  if (input.artefactSeconds !== null) {
    marks.push({
      kind: 'rule',
      across: 'x',
      at: input.artefactSeconds,
      stroke: { role: 'artefact', weight: 1.2, dash: [2, 2] },
      label: 'artefact cutoff',
    })
  }
  if (input.shortestSeconds !== null) {
    marks.push({
      kind: 'rule',
      across: 'x',
      at: input.shortestSeconds,
      stroke: { role: 'soft', weight: 1, dash: [4, 2] },
    })
  }
  if (steps !== null) {
    marks.push({
      kind: 'area',
      xs: steps.seconds,
      lows: steps.lows,
      highs: steps.highs,
      fill: soft,
      steps: true,
    })
    marks.push({
      kind: 'line',
      xs: steps.seconds,
      ys: steps.values,
      stroke: { role: state, weight: 1.6 },
      steps: true,
    })
    marks.push({
      kind: 'points',
      xs: input.cut,
      ys: Array.from(input.cut, (at) => stepValue(steps, at)),
      lows: null,
      highs: null,
      role: state,
      hollow: true,
      radius: 3,
    })
  }
  marks.push(...curveMarks(curve))
  marks.push({
    kind: 'limits',
    xs: input.limits.seconds,
    highs: input.limits.highs,
    role: soft === 'on-soft' ? 'on' : 'off',
  })
  marks.push({
    kind: 'points',
    xs: input.points.seconds,
    ys: input.points.values,
    lows: input.points.lows,
    highs: input.points.highs,
    role: state,
    hollow: state === 'off',
    radius: 3.2,
  })
  if (input.atRisk !== null) {
    const { seconds, numbers } = input.atRisk
    for (let i = 0; i < seconds.length; i++) {
      const x = Math.log(seconds[i] / input.xDomain[0]) / Math.log(input.xDomain[1] / input.xDomain[0])
      marks.push({ kind: 'text', x, y: 0.965, text: String(numbers[i]), anchor: 'middle', role: 'soft' })
    }
    marks.push({ kind: 'text', x: 0.01, y: 0.9, text: 'numbers at risk', anchor: 'start', role: 'soft' })
  }
  for (const [index, text] of input.legend.entries()) {
    marks.push({
      kind: 'text',
      x: plot === 'hazard' ? 0.03 : 0.975,
      y: legendPlace(input, index),
      text,
      anchor: plot === 'hazard' ? 'start' : 'end',
      role: index === 0 ? 'ink' : 'soft',
    })
  }
  return {
    frame: input.frame,
    x: {
      kind: 'log',
      domain: input.xDomain,
      label: input.axisTitle ? (state === 'on' ? 'on-time t  (s)' : 'off-time t  (s)') : '',
      side: 'bottom',
      ticks: 5,
    },
    y: { kind: 'log', domain: input.yDomain, label: Y_LABEL[plot], side: 'left', ticks: 5 },
    marks,
    letter: input.letter,
    description: `${state === 'on' ? 'On-times' : 'Off-times'}, ${plot}: ${input.legend.join('; ')}.`,
  }
}

function legendPlace({ frame, lineHeight }: DwellPanelInput, index: number): number {
  const line = Math.min(lineHeight, frame.height / 8)
  return (line * (index + 1.05)) / frame.height
}

function stacked(stretches: ArrayLike<number>, floor: number): number[] {
  const boxes: number[] = []
  for (let i = 0; i + 2 < stretches.length; i += 3) {
    if (stretches[i + 2] > floor) boxes.push(stretches[i], stretches[i + 1], floor, stretches[i + 2])
  }
  return boxes
}

function stepValue(steps: DwellPoints, at: number): number {
  let value = 1
  for (let i = 0; i < steps.seconds.length && steps.seconds[i] <= at; i++) value = steps.values[i]
  return value
}

/** Solid over the fitted range, dashed outside it. */
function curveMarks(curve: DwellPanelInput['curve']): Mark[] {
  if (curve === null) return []
  const parts: { xs: number[]; ys: number[]; inside: boolean }[] = []
  for (let i = 0; i < curve.seconds.length; i++) {
    const inside = curve.seconds[i] >= curve.fittedFrom && curve.seconds[i] <= curve.fittedTo
    const last = parts.at(-1)
    if (last === undefined || last.inside !== inside) {
      const joint = last === undefined ? [] : [last.xs.at(-1) as number]
      const jointY = last === undefined ? [] : [last.ys.at(-1) as number]
      parts.push({ xs: [...joint, curve.seconds[i]], ys: [...jointY, curve.values[i]], inside })
    } else {
      last.xs.push(curve.seconds[i])
      last.ys.push(curve.values[i])
    }
  }
  return parts.map(({ xs, ys, inside }) => ({
    kind: 'line',
    xs,
    ys,
    stroke: inside ? { role: 'ink', weight: 1.5 } : { role: 'ink', weight: 1, dash: [3, 3] },
  }))
}
