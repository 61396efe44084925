import { embedMetadata, type FigureMetadata } from '../scene/figure-metadata.ts'
import { FONT_STACK, type Palette } from '../scene/palette.ts'
import { formulaRuns, SCRIPT_RISE, scriptSize } from '../scene/formula-runs.ts'
import type { Scene } from '../scene/scene.ts'
import { escapeXml } from '../scene/xml-text.ts'
import { drawScene } from './draw-scene.ts'
import type { Surface } from './surface.ts'

/** Three decimals, no trailing zeros: a thousandth of a point is beyond any printer. */
function n(value: number): string {
  const text = value.toFixed(3).replace(/\.?0+$/, '')
  return text === '-0' ? '0' : text
}

/** Colour and opacity as separate attributes, as print programs want them. */
function paint(attribute: 'fill' | 'stroke', colour: string): string {
  const rgba = /^rgba\((\d+),(\d+),(\d+),([\d.]+)\)$/.exec(colour)
  if (rgba === null) return `${attribute}="${colour}"`
  const hex = [rgba[1], rgba[2], rgba[3]].map((part) => Number(part).toString(16).padStart(2, '0')).join('')
  return `${attribute}="#${hex}" ${attribute}-opacity="${rgba[4]}"`
}

/** Raised and lowered pieces as spans; each undoes the shift of the one before it. */
function formulaSpans(text: string, size: number): string {
  let level = 0
  let out = ''
  for (const run of formulaRuns(text)) {
    const shift = (level - run.level) * SCRIPT_RISE * size
    level = run.level
    const words = escapeXml(run.text)
    out +=
      shift === 0 && level === 0
        ? words
        : `<tspan dy="${n(shift)}"${level === 0 ? '' : ` font-size="${n(scriptSize(size))}"`}>${words}</tspan>`
  }
  return out
}

/**
 * A scene as SVG text: text stays text, sizes are physical for `pt` scenes, ids are numbered from the start of the figure
 * so that equal scenes give equal files. Everything that came from a user is escaped.
 */
export function sceneToSvg(
  scene: Scene,
  palette: Palette,
  title: string,
  metadata: FigureMetadata | null,
): string {
  const parts: string[] = []
  let clips = 0
  const surface: Surface = {
    polyline(points, colour, width, dash) {
      let path = ''
      let down = false
      for (let i = 0; i + 1 < points.length; i += 2) {
        const x = points[i]
        const y = points[i + 1]
        if (!Number.isFinite(x) || !Number.isFinite(y)) down = false
        else {
          path += `${down ? 'L' : 'M'}${n(x)} ${n(y)}`
          down = true
        }
      }
      if (path === '') return
      const dashes = dash.length === 0 ? '' : ` stroke-dasharray="${dash.map(n).join(' ')}"`
      parts.push(
        `<path d="${path}" fill="none" ${paint('stroke', colour)} stroke-width="${n(width)}" stroke-linejoin="round"${dashes}/>`,
      )
    },
    polygon(points, colour) {
      const corners: string[] = []
      for (let i = 0; i + 1 < points.length; i += 2) corners.push(`${n(points[i])},${n(points[i + 1])}`)
      parts.push(`<polygon points="${corners.join(' ')}" ${paint('fill', colour)}/>`)
    },
    rectangles(boxes, colour) {
      let path = ''
      for (let i = 0; i + 3 < boxes.length; i += 4) {
        path += `M${n(boxes[i])} ${n(boxes[i + 1])}h${n(boxes[i + 2])}v${n(boxes[i + 3])}h${n(-boxes[i + 2])}z`
      }
      if (path !== '') parts.push(`<path d="${path}" ${paint('fill', colour)}/>`)
    },
    discs(points, radius, fill, edge, width) {
      for (let i = 0; i + 1 < points.length; i += 2) {
        parts.push(
          `<circle cx="${n(points[i])}" cy="${n(points[i + 1])}" r="${n(radius)}" ${paint('fill', fill)} ${paint('stroke', edge)} stroke-width="${n(width)}"/>`,
        )
      }
    },
    text(text, x, y, { size, colour, anchor, bold, upright, formula }) {
      const turn = upright === true ? ` transform="rotate(-90 ${n(x)} ${n(y)})"` : ''
      const weight = bold === true ? ' font-weight="700"' : ''
      // Spaces at the edges of spans are dropped by some readers unless told not to.
      const keep = formula === true && /[\^_]/.test(text) ? ' xml:space="preserve"' : ''
      parts.push(
        `<text x="${n(x)}" y="${n(y)}" font-size="${n(size)}" text-anchor="${anchor}" ${paint('fill', colour)}${weight}${turn}${keep}>${formula === true ? formulaSpans(text, size) : escapeXml(text)}</text>`,
      )
    },
    clip(x, y, width, height) {
      clips++
      parts.push(
        `<clipPath id="frame-${clips}"><rect x="${n(x)}" y="${n(y)}" width="${n(width)}" height="${n(height)}"/></clipPath><g clip-path="url(#frame-${clips})">`,
      )
    },
    unclip() {
      parts.push('</g>')
    },
  }
  drawScene(scene, palette, surface)
  const words = scene.panels.map((panel) => panel.description).join(' ')
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" width="${n(scene.width)}${scene.unit}" height="${n(scene.height)}${scene.unit}" viewBox="0 0 ${n(scene.width)} ${n(scene.height)}" font-family="${escapeXml(FONT_STACK)}" role="img">`,
    `<title>${escapeXml(title)}</title>`,
    `<desc>${escapeXml(words)}</desc>`,
    metadata === null ? '' : embedMetadata(metadata),
    `<rect width="${n(scene.width)}" height="${n(scene.height)}" fill="${palette.paper}"/>`,
    ...parts,
    '</svg>',
    '',
  ]
    .filter((line, index, all) => line !== '' || index === all.length - 1)
    .join('\n')
}
