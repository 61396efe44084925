import type { Frame, Mark } from './scene.ts'
import { textWidth } from './text-width.ts'

/** Lines of text in an upper corner of a plot, and the room they take, in figure units from the frame's corner. */
export interface DwellLegend {
  readonly marks: readonly Mark[]
  readonly left: number
  readonly right: number
  readonly bottom: number
}

/**
 * Legend in the corner that data leave free: upper right where curves fall, upper left for t x hazard, there to the right of
 * the mark of the shortest fitted dwell when that leaves room.
 * @param clearOf place of that mark, figure units from the frame's left; null without one
 */
export function dwellLegend(
  lines: readonly string[],
  corner: 'left' | 'right',
  frame: Frame,
  fontSize: number,
  clearOf: number | null,
): DwellLegend {
  let widest = 0
  for (const text of lines) widest = Math.max(widest, textWidth(text, fontSize))
  const lineHeight = Math.min(1.3 * fontSize, frame.height / 8)
  const inset = 0.6 * fontSize
  const clear =
    clearOf !== null && clearOf + widest + 2 * inset < 0.75 * frame.width ? Math.max(0, clearOf) : 0
  const x = corner === 'right' ? frame.width - inset : clear + inset
  return {
    marks: lines.map((text, index) => ({
      kind: 'text',
      x: x / frame.width,
      y: (lineHeight * (index + 0.95)) / frame.height,
      text,
      anchor: corner === 'right' ? 'end' : 'start',
      role: index === 0 ? 'ink' : 'soft',
      formula: true,
    })),
    left: corner === 'right' ? x - widest : x,
    right: corner === 'right' ? x : x + widest,
    bottom: lines.length === 0 ? 0 : lineHeight * (lines.length + 0.35),
  }
}

/** Where a vertical rule at `along` (figure units from the left) must begin to leave the legend alone, share of the height. */
export function beneathLegend(legend: DwellLegend, along: number, frame: Frame, fontSize: number): number {
  const near = 0.4 * fontSize
  return along > legend.left - near && along < legend.right + near ? legend.bottom / frame.height : 0
}
