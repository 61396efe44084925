import type { Role } from './palette.ts'

/** A figure as a value: panels with axes, marks in data units. Lengths of frames and strokes in the figure's unit. */
export interface Scene {
  readonly width: number
  readonly height: number
  /** `pt` for print (1/72 inch), `px` for the screen. */
  readonly unit: 'pt' | 'px'
  readonly fontSize: number
  /** Stroke of axes and hairlines. */
  readonly hairline: number
  readonly panels: readonly Panel[]
  /** Text outside the panels, at absolute places. */
  readonly notes: readonly Note[]
}

/** Distance of a panel's letter from the left axis, font sizes. */
export const LETTER_INDENT = 3.2

export interface Frame {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

export interface Axis {
  readonly kind: 'linear' | 'log'
  /** [value at the left or bottom, value at the right or top]. */
  readonly domain: readonly [number, number]
  /** Label with unit; empty draws none. */
  readonly label: string
  /** Where the numbers stand; `none` keeps the scale but draws nothing. */
  readonly side: 'bottom' | 'top' | 'left' | 'right' | 'none'
  /** About how many labelled ticks on a linear axis. */
  readonly ticks: number
  /** Values below it have no tick: they lie in a strip with text of its own. */
  readonly ticksFrom?: number
  /** Distance of a vertical axis' label from the axis, figure units; by the widest number unless given. */
  readonly labelDistance?: number
}

export interface Panel {
  readonly frame: Frame
  readonly x: Axis
  readonly y: Axis
  readonly marks: readonly Mark[]
  /** Bold letter of the panel in print; empty on screen. */
  readonly letter: string
  /** Words for those who cannot see the panel. */
  readonly description: string
}

export interface Stroke {
  readonly role: Role
  /** In hairlines. */
  readonly weight: number
  /** Dash pattern in hairlines; empty is solid. */
  readonly dash?: readonly number[]
}

export type Mark =
  | {
      readonly kind: 'line'
      readonly xs: ArrayLike<number>
      readonly ys: ArrayLike<number>
      readonly stroke: Stroke
      readonly steps?: boolean
    }
  | {
      readonly kind: 'area'
      readonly xs: ArrayLike<number>
      readonly lows: ArrayLike<number>
      readonly highs: ArrayLike<number>
      readonly fill: Role
      readonly steps?: boolean
    }
  /** Filled polygon [x0, y0, x1, y1, ...]. */
  | { readonly kind: 'outline'; readonly points: ArrayLike<number>; readonly fill: Role }
  /** Rectangles [x0, x1, y0, y1] one after the other. */
  | { readonly kind: 'boxes'; readonly boxes: ArrayLike<number>; readonly fill: Role }
  | {
      readonly kind: 'points'
      readonly xs: ArrayLike<number>
      readonly ys: ArrayLike<number>
      /** Ends of the vertical bars; null without bars. */
      readonly lows: ArrayLike<number> | null
      readonly highs: ArrayLike<number> | null
      readonly role: Role
      readonly hollow: boolean
      /** Radius in hairlines. */
      readonly radius: number
    }
  /** Upper limits: a bar from the limit down with an arrow head. */
  | {
      readonly kind: 'limits'
      readonly xs: ArrayLike<number>
      readonly highs: ArrayLike<number>
      readonly role: Role
    }
  | {
      readonly kind: 'rule'
      readonly across: 'x' | 'y'
      readonly at: number
      readonly stroke: Stroke
      readonly label?: string
      /** Side of the label of a rule across x; right unless said. */
      readonly labelSide?: 'left' | 'right'
      /** Rules across x begin at this share of the frame from its top, to leave room for text; 0 unless said. */
      readonly from?: number
      /** Where they end, share from the top; 1 unless said. The label stands at this foot. */
      readonly to?: number
    }
  | {
      readonly kind: 'span'
      readonly from: number
      readonly to: number
      readonly fill: Role
      readonly hatch?: boolean
    }
  /** Lowest and highest value per column, columns evenly over the frame's width. */
  | {
      readonly kind: 'envelope'
      readonly lows: Float32Array
      readonly highs: Float32Array
      readonly columns: number
      readonly role: Role
    }
  /** State per column of the frame's width: 0 off, 1 on, 2 both, 3 off and 4 on of a cut dwell (hollow), 255 gap; a strip at the bottom. */
  | {
      readonly kind: 'states'
      readonly states: Uint8Array
      readonly columns: number
      readonly thickness: number
    }
  | {
      readonly kind: 'text'
      /** Share of the frame, 0..1 from left and from top. */
      readonly x: number
      readonly y: number
      readonly text: string
      readonly anchor: 'start' | 'middle' | 'end'
      readonly role: Role
      /** Powers and indices as `^` and `_`, see `formulaRuns`. */
      readonly formula?: boolean
    }

export interface Note {
  readonly x: number
  readonly y: number
  readonly text: string
  readonly anchor: 'start' | 'middle' | 'end'
  readonly size: number
  readonly bold?: boolean
  readonly formula?: boolean
}
