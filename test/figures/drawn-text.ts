import { drawScene } from '../../src/figures/paint/draw-scene.ts'
import type { Surface } from '../../src/figures/paint/surface.ts'
import { formulaRuns } from '../../src/figures/scene/formula-runs.ts'
import { LIGHT } from '../../src/figures/scene/palette.ts'
import type { Scene } from '../../src/figures/scene/scene.ts'
import { textWidth } from '../../src/figures/scene/text-width.ts'

export interface Box {
  readonly text: string
  readonly left: number
  readonly right: number
  readonly top: number
  readonly bottom: number
}

/** Every text of a scene as the box it takes, and every vertical rule [x, top, bottom], as a painter is told to draw them. */
export function drawnText(scene: Scene): { texts: Box[]; rules: [number, number, number][] } {
  const texts: Box[] = []
  const rules: [number, number, number][] = []
  const surface: Surface = {
    polyline(points, _colour, _width, dash) {
      if (points.length === 4 && dash.length > 0 && points[0] === points[2])
        rules.push([points[0], Math.min(points[1], points[3]), Math.max(points[1], points[3])])
    },
    polygon() {},
    rectangles() {},
    discs() {},
    clip() {},
    unclip() {},
    text(text, x, y, { size, anchor, upright, formula }) {
      const plain =
        formula === true
          ? formulaRuns(text)
              .map((run) => run.text)
              .join('')
          : text
      const width = textWidth(plain, size)
      const before = anchor === 'end' ? width : anchor === 'middle' ? width / 2 : 0
      // Ascent and descent without accents.
      const [up, down] = [0.72 * size, 0.2 * size]
      texts.push(
        upright === true
          ? { text, left: x - up, right: x + down, top: y - (width - before), bottom: y + before }
          : { text, left: x - before, right: x - before + width, top: y - up, bottom: y + down },
      )
    },
  }
  drawScene(scene, LIGHT, surface)
  return { texts, rules }
}
