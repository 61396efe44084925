import type { Frame } from '../../figures/scene/scene.ts'

/** Frames of the upper picture, CSS px: trace, histogram and three stability columns share one count axis. */
export interface UpperLayout {
  readonly trace: Frame
  readonly histogram: Frame
  readonly stability: readonly [Frame, Frame, Frame]
}

export const FONT_SIZE = 11
const LEFT = 52
const TOP = 10
const BOTTOM = 34
const GAP = 14
const RIGHT = 14

export function upperLayout(width: number, height: number): UpperLayout {
  const narrow = width < 640
  const histogramWidth = narrow ? 72 : 92
  const column = narrow ? 50 : 64
  const frameHeight = Math.max(20, height - TOP - BOTTOM)
  const right = 3 * column + 3 * GAP + RIGHT
  const traceWidth = Math.max(60, width - LEFT - histogramWidth - GAP - right)
  const at = (x: number, frameWidth: number): Frame => ({ x, y: TOP, width: frameWidth, height: frameHeight })
  const first = LEFT + traceWidth + histogramWidth + 2 * GAP
  return {
    trace: at(LEFT, traceWidth),
    histogram: at(LEFT + traceWidth + GAP, histogramWidth - GAP),
    stability: [at(first, column), at(first + column + GAP, column), at(first + 2 * (column + GAP), column)],
  }
}

/** Frame of a dwell plot. */
export function dwellFrame(width: number, height: number): Frame {
  return { x: 62, y: 12, width: Math.max(40, width - 76), height: Math.max(40, height - 52) }
}
