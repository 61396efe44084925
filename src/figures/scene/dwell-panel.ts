import { beneathLegend, dwellLegend } from './dwell-legend.ts'
import { type RiskCounts, riskMarks, shareOnLog } from './risk-strip.ts'
import type { Frame, Mark, Panel } from './scene.ts'
import { textWidth } from './text-width.ts'

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
  readonly atRisk: RiskCounts | null
  /** Lines of text in the upper right corner: n, law, numbers. */
  readonly legend: readonly string[]
  readonly xDomain: readonly [number, number]
  readonly yDomain: readonly [number, number]
  readonly letter: string
  readonly axisTitle: boolean
  /** Font size of the scene, figure units. */
  readonly fontSize: number
}

const Y_LABEL = {
  density: 'P(t)  (s⁻¹)',
  neighbour: 'P(t), neighbour-spaced  (s⁻¹)',
  survival: 'S(t)',
  hazard: 't · hazard',
} as const

/** Dwell times of one state on logarithmic axes, with everything that says how far to trust them. */
export function dwellPanel(input: DwellPanelInput): Panel {
  const { state, plot, frame, fontSize } = input
  const soft = state === 'on' ? 'on-soft' : 'off-soft'
  const marks: Mark[] = []
  const { hover, steps, curve } = input
  const along = (seconds: number): number => shareOnLog(seconds, input.xDomain) * frame.width
  const shortest = input.shortestSeconds === null ? null : along(input.shortestSeconds)
  const corner = plot === 'hazard' ? 'left' : 'right'
  const legend = dwellLegend(input.legend, corner, frame, fontSize, corner === 'left' ? shortest : null)
  // Numbers at risk have a strip of their own below everything drawn; the axis is stretched down by it.
  const strip = input.atRisk === null ? 0 : Math.min(0.25, (2.5 * fontSize) / frame.height)
  const [floor, top] = input.yDomain
  const yDomain: [number, number] = [floor / (top / floor) ** (strip / (1 - strip)), top]
  if (hover !== null) marks.push({ kind: 'span', from: hover[0], to: hover[1], fill: 'hover' })
  if (plot === 'density') {
    marks.push({ kind: 'boxes', boxes: stacked(input.split, floor), fill: 'split' })
    marks.push({ kind: 'boxes', boxes: stacked(input.spurious, floor), fill: 'spurious' })
  }
  const extent = (place: number): { from: number; to: number } => ({
    from: beneathLegend(legend, place, frame, fontSize),
    to: 1 - strip,
  })
  if (input.artefactSeconds !== null) {
    const place = along(input.artefactSeconds)
    marks.push({
      kind: 'rule',
      across: 'x',
      at: input.artefactSeconds,
      stroke: { role: 'artefact', weight: 1.2, dash: [2, 2] },
      label: ARTEFACT,
      labelSide: leftIsFree(place, shortest, fontSize) ? 'left' : 'right',
      ...extent(place),
    })
  }
  if (input.shortestSeconds !== null && shortest !== null) {
    marks.push({
      kind: 'rule',
      across: 'x',
      at: input.shortestSeconds,
      stroke: { role: 'soft', weight: 1, dash: [4, 2] },
      ...extent(shortest),
    })
  }
  if (steps !== null) {
    marks.push({
      kind: 'area',
      xs: steps.seconds,
      lows: Array.from(steps.lows, (low) => Math.max(low, floor)),
      highs: steps.highs,
      fill: soft,
      steps: true,
    })
    marks.push({
      kind: 'line',
      xs: steps.seconds,
      ys: atLeast(steps.values, floor),
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
  marks.push(...curveMarks(curve, strip > 0 ? floor : 0))
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
  if (input.atRisk !== null) marks.push(...riskMarks(input, input.atRisk, 1 - strip, floor))
  marks.push(...legend.marks)
  return {
    frame: input.frame,
    x: {
      kind: 'log',
      domain: input.xDomain,
      label: input.axisTitle ? (state === 'on' ? 'on-time t  (s)' : 'off-time t  (s)') : '',
      side: 'bottom',
      ticks: 5,
    },
    y: { kind: 'log', domain: yDomain, label: Y_LABEL[plot], side: 'left', ticks: 5, ticksFrom: floor },
    marks,
    letter: input.letter,
    description: `${state === 'on' ? 'On-times' : 'Off-times'}, ${plot}: ${input.legend.join('; ')}.`,
  }
}

const ARTEFACT = 'artefact cutoff'

/** Below falling curves the left of a mark is free; not so when the frame or the shortest fitted dwell is close. */
function leftIsFree(place: number, shortest: number | null, fontSize: number): boolean {
  const needed = textWidth(ARTEFACT, fontSize) + fontSize
  return place > needed && (shortest === null || shortest > place || place - shortest > needed)
}

/** Values below the floor have no place above the strip: the line ends there. Floor 0 leaves all to the frame's cut. */
function atLeast(values: ArrayLike<number>, floor: number): number[] {
  return Array.from(values, (value) => (value < floor ? Number.NaN : value))
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
function curveMarks(curve: DwellPanelInput['curve'], floor: number): Mark[] {
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
    ys: atLeast(ys, floor),
    stroke: inside ? { role: 'ink', weight: 1.5 } : { role: 'ink', weight: 1, dash: [3, 3] },
  }))
}
