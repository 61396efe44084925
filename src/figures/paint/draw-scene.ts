import { coordinates, shareOf, ticksOf } from '../scene/coordinates.ts'
import type { Palette } from '../scene/palette.ts'
import { type Axis, type Frame, LETTER_INDENT, type Panel, type Scene } from '../scene/scene.ts'
import { drawMark } from './draw-marks.ts'
import type { Surface } from './surface.ts'

/** Length of a tick and distance of its number, in font sizes. */
const TICK = 0.32
const MINOR_TICK = 0.2
const NUMBER_GAP = 0.24

/** Draws a scene: marks cut to their frame, then axes over them, then notes. The same for every surface. */
export function drawScene(scene: Scene, palette: Palette, surface: Surface): void {
  for (const panel of scene.panels) drawPanel(panel, scene, palette, surface)
  for (const note of scene.notes) {
    surface.text(note.text, note.x, note.y, {
      size: note.size,
      colour: palette.ink,
      anchor: note.anchor,
      bold: note.bold === true,
      formula: note.formula === true,
    })
  }
}

function drawPanel(panel: Panel, scene: Scene, palette: Palette, surface: Surface): void {
  const { frame } = panel
  const { hairline, fontSize } = scene
  const at = coordinates(frame, panel.x, panel.y)
  surface.clip(frame.x, frame.y, frame.width, frame.height)
  for (const mark of panel.marks) drawMark(mark, { surface, palette, frame, at, hairline, fontSize })
  surface.unclip()
  drawAxis(panel.x, frame, scene, palette, surface)
  drawAxis(panel.y, frame, scene, palette, surface)
  if (panel.letter !== '') {
    surface.text(panel.letter, frame.x - letterIndent(panel, fontSize), frame.y - 0.35 * fontSize, {
      size: fontSize * 1.14,
      colour: palette.ink,
      anchor: 'start',
      bold: true,
    })
  }
}

function letterIndent(panel: Panel, fontSize: number): number {
  return panel.y.side === 'left' ? LETTER_INDENT * fontSize : 0
}

function drawAxis(
  axis: Axis,
  frame: Frame,
  { hairline, fontSize }: Scene,
  palette: Palette,
  surface: Surface,
): void {
  if (axis.side === 'none') return
  const horizontal = axis.side === 'bottom' || axis.side === 'top'
  const length = horizontal ? frame.width : frame.height
  const sign = axis.side === 'bottom' || axis.side === 'right' ? 1 : -1
  const edge = edgeOf(axis.side, frame)
  const lines: number[] = horizontal
    ? [frame.x, edge, frame.x + frame.width, edge]
    : [edge, frame.y, edge, frame.y + frame.height]
  let numbers = 0
  for (const { value, label } of ticksOf(axis, length, fontSize)) {
    const share = shareOf(axis, value)
    if (share < -1e-9 || share > 1 + 1e-9) continue
    if (axis.ticksFrom !== undefined && value < axis.ticksFrom) continue
    const size = sign * (label === '' ? MINOR_TICK : TICK) * fontSize
    const along = horizontal ? frame.x + share * frame.width : frame.y + (1 - share) * frame.height
    lines.push(Number.NaN, Number.NaN)
    if (horizontal) lines.push(along, edge, along, edge + size)
    else lines.push(edge, along, edge + size, along)
    if (label === '') continue
    numbers = Math.max(numbers, label.length)
    const away = edge + sign * (TICK + NUMBER_GAP) * fontSize
    surface.text(
      label,
      horizontal ? along : away,
      horizontal ? away + (sign > 0 ? 0.72 * fontSize : 0) : along + 0.35 * fontSize,
      {
        size: fontSize,
        colour: palette.soft,
        anchor: horizontal ? 'middle' : sign > 0 ? 'start' : 'end',
      },
    )
  }
  surface.polyline(lines, palette.faint, hairline, [])
  if (axis.label === '') return
  const middle = horizontal ? frame.x + frame.width / 2 : frame.y + frame.height / 2
  if (horizontal) {
    const y = sign > 0 ? edge + 2.55 * fontSize : edge - 1.75 * fontSize
    surface.text(axis.label, middle, y, { size: fontSize, colour: palette.ink, anchor: 'middle' })
  } else {
    const x = edge + sign * (axis.labelDistance ?? (1.35 + 0.56 * Math.max(2, numbers)) * fontSize)
    surface.text(axis.label, x, middle, {
      size: fontSize,
      colour: palette.ink,
      anchor: 'middle',
      upright: true,
    })
  }
}

function edgeOf(side: Axis['side'], frame: Frame): number {
  if (side === 'bottom') return frame.y + frame.height
  if (side === 'top') return frame.y
  return side === 'left' ? frame.x : frame.x + frame.width
}
