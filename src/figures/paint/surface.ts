/** Where a scene is drawn: SVG text or a canvas. Absolute figure units, y downwards, colours as CSS text. */
export interface Surface {
  /** Open polyline through [x0, y0, x1, y1, ...]; NaN lifts the pen. */
  polyline(points: ArrayLike<number>, colour: string, width: number, dash: readonly number[]): void
  /** Filled polygon. */
  polygon(points: ArrayLike<number>, colour: string): void
  /** Filled rectangles [x, y, width, height] one after the other. */
  rectangles(boxes: ArrayLike<number>, colour: string): void
  /** Discs, filled and outlined. */
  discs(points: ArrayLike<number>, radius: number, fill: string, edge: string, width: number): void
  text(text: string, x: number, y: number, options: TextOptions): void
  /** Everything until `unclip` is cut to this rectangle. */
  clip(x: number, y: number, width: number, height: number): void
  unclip(): void
}

export interface TextOptions {
  readonly size: number
  readonly colour: string
  readonly anchor: 'start' | 'middle' | 'end'
  readonly bold?: boolean
  /** Turned a quarter anticlockwise. */
  readonly upright?: boolean
  /** `^` raises and `_` lowers what follows, see `formulaRuns`; off for text that came from a user. */
  readonly formula?: boolean
}
