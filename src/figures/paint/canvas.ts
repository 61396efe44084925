import { formulaRuns, SCRIPT_RISE, scriptSize } from '../scene/formula-runs.ts'
import { FONT_STACK, type Palette } from '../scene/palette.ts'
import type { Scene } from '../scene/scene.ts'
import { drawScene } from './draw-scene.ts'
import type { Surface } from './surface.ts'

/** What is used of a canvas context; CanvasRenderingContext2D fits. */
export interface Pen {
  fillStyle: unknown
  strokeStyle: unknown
  lineWidth: number
  font: string
  textAlign: string
  textBaseline: string
  lineJoin: string
  beginPath(): void
  closePath(): void
  moveTo(x: number, y: number): void
  lineTo(x: number, y: number): void
  arc(x: number, y: number, radius: number, from: number, to: number): void
  rect(x: number, y: number, width: number, height: number): void
  fillRect(x: number, y: number, width: number, height: number): void
  fill(): void
  stroke(): void
  clip(): void
  save(): void
  restore(): void
  translate(x: number, y: number): void
  rotate(angle: number): void
  setLineDash(segments: number[]): void
  fillText(text: string, x: number, y: number): void
  measureText(text: string): { readonly width: number }
}

/** Paints a scene on a canvas whose units are the scene's. */
export function paintScene(scene: Scene, palette: Palette, pen: Pen): void {
  drawScene(scene, palette, canvasSurface(pen))
}

export function canvasSurface(pen: Pen): Surface {
  return {
    polyline(points, colour, width, dash) {
      pen.strokeStyle = colour
      pen.lineWidth = width
      pen.lineJoin = 'round'
      pen.setLineDash([...dash])
      pen.beginPath()
      let down = false
      for (let i = 0; i + 1 < points.length; i += 2) {
        const x = points[i]
        const y = points[i + 1]
        if (!Number.isFinite(x) || !Number.isFinite(y)) down = false
        else if (down) pen.lineTo(x, y)
        else {
          pen.moveTo(x, y)
          down = true
        }
      }
      pen.stroke()
    },
    polygon(points, colour) {
      pen.fillStyle = colour
      pen.beginPath()
      for (let i = 0; i + 1 < points.length; i += 2) {
        if (i === 0) pen.moveTo(points[i], points[i + 1])
        else pen.lineTo(points[i], points[i + 1])
      }
      pen.closePath()
      pen.fill()
    },
    rectangles(boxes, colour) {
      pen.fillStyle = colour
      for (let i = 0; i + 3 < boxes.length; i += 4)
        pen.fillRect(boxes[i], boxes[i + 1], boxes[i + 2], boxes[i + 3])
    },
    discs(points, radius, fill, edge, width) {
      pen.fillStyle = fill
      pen.strokeStyle = edge
      pen.lineWidth = width
      pen.setLineDash([])
      pen.beginPath()
      for (let i = 0; i + 1 < points.length; i += 2) {
        pen.moveTo(points[i] + radius, points[i + 1])
        pen.arc(points[i], points[i + 1], radius, 0, 2 * Math.PI)
      }
      pen.fill()
      pen.stroke()
    },
    text(text, x, y, { size, colour, anchor, bold, upright, formula }) {
      pen.fillStyle = colour
      pen.font = `${bold === true ? '600 ' : ''}${size}px ${FONT_STACK}`
      pen.textAlign = anchor === 'middle' ? 'center' : anchor
      pen.textBaseline = 'alphabetic'
      if (formula === true && /[\^_]/.test(text)) {
        writeFormula(pen, text, x, y, size, anchor)
        return
      }
      if (upright !== true) {
        pen.fillText(text, x, y)
        return
      }
      pen.save()
      pen.translate(x, y)
      pen.rotate(-Math.PI / 2)
      pen.fillText(text, 0, 0)
      pen.restore()
    },
    clip(x, y, width, height) {
      pen.save()
      pen.beginPath()
      pen.rect(x, y, width, height)
      pen.clip()
    },
    unclip() {
      pen.restore()
    },
  }
}

/** Pieces of a formula one after the other; the whole is measured first when it does not start at x. */
function writeFormula(
  pen: Pen,
  text: string,
  x: number,
  y: number,
  size: number,
  anchor: 'start' | 'middle' | 'end',
): void {
  const script = scriptSize(size)
  const widths: number[] = []
  let whole = 0
  const runs = formulaRuns(text)
  for (const run of runs) {
    pen.font = `${run.level === 0 ? size : script}px ${FONT_STACK}`
    const { width } = pen.measureText(run.text)
    widths.push(width)
    whole += width
  }
  let at = x - (anchor === 'start' ? 0 : anchor === 'middle' ? whole / 2 : whole)
  pen.textAlign = 'start'
  for (const [i, run] of runs.entries()) {
    pen.font = `${run.level === 0 ? size : script}px ${FONT_STACK}`
    pen.fillText(run.text, at, y - run.level * SCRIPT_RISE * size)
    at += widths[i]
  }
}
