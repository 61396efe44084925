import { spawnSync } from 'node:child_process'
import { describe, expect, it } from 'vitest'
import { sceneToSvg } from '../../src/figures/paint/svg.ts'
import { benchFigure } from '../../src/figures/scene/bench-figure.ts'
import { extractMetadata, type FigureMetadata } from '../../src/figures/scene/figure-metadata.ts'
import { LIGHT } from '../../src/figures/scene/palette.ts'
import { analysedRecord } from './analysed-record.ts'
import { expectApproved } from './approved.ts'
import { xmlProblem } from './well-formed.ts'

const RECORDS = [analysedRecord(0), analysedRecord(2)]

function figure(
  record: (typeof RECORDS)[number],
  millimetres: number,
  plot: 'density' | 'neighbour' | 'survival' | 'hazard',
  name = record.name,
) {
  const scene = benchFigure({
    millimetres,
    trace: record.trace,
    product: record.product,
    numbers: record.numbers,
    // A short stretch keeps the approved pictures small.
    window: [100, 160],
    plot,
    name,
    excluded: [],
    confidence: 0.95,
  })
  return { scene, svg: sceneToSvg(scene, LIGHT, name, null) }
}

describe('the Bench figure', () => {
  for (const [index, millimetres, plot] of [
    [0, 85, 'density'],
    [0, 178, 'survival'],
    [1, 178, 'density'],
    [1, 178, 'hazard'],
    [0, 178, 'neighbour'],
  ] as const) {
    it(`looks as approved: emitter ${index === 0 ? 'textbook' : 'drifting'}, ${millimetres} mm, ${plot}`, () => {
      const { svg } = figure(RECORDS[index], millimetres, plot)
      expect(xmlProblem(svg)).toBeNull()
      expectApproved(`bench-${index === 0 ? 'textbook' : 'drifting'}-${millimetres}-${plot}`, svg)
    })
  }

  it('keeps text between 6 and 8 pt and strokes at 0.25 pt or more, at its physical width', () => {
    for (const millimetres of [85, 178]) {
      const { svg } = figure(RECORDS[0], millimetres, 'density')
      const numbers = (pattern: RegExp): number[] =>
        [...svg.matchAll(pattern)].map(([, value]) => Number(value))
      const sizes = numbers(/font-size="([\d.]+)"/g)
      expect(sizes.length).toBeGreaterThan(40)
      expect(Math.min(...sizes)).toBeGreaterThanOrEqual(6)
      expect(Math.max(...sizes)).toBeLessThanOrEqual(8)
      expect(Math.min(...numbers(/stroke-width="([\d.]+)"/g))).toBeGreaterThanOrEqual(0.25)
      expect(svg).toContain(`width="${((millimetres * 72) / 25.4).toFixed(3)}pt"`)
    }
  })

  it('says what a reader must know: n, law and form of its cutoff, convention, shortest fitted dwell, gate', () => {
    const text = figure(RECORDS[0], 178, 'density')
      .svg.replace(/<[^>]+>/g, ' ')
      .replace(/\s+/g, ' ')
    for (const words of [
      'n = ',
      'fitted from 30 ms',
      't^−α exp(−t/τ)',
      'exponent of the density',
      'off from 3 bins',
      'Shaded: gate on',
    ]) {
      expect(text).toContain(words)
    }
  })

  it('has no two texts in one place', () => {
    for (const [record, millimetres, plot] of [
      [RECORDS[0], 85, 'density'],
      [RECORDS[0], 178, 'density'],
      [RECORDS[1], 178, 'density'],
      [RECORDS[0], 178, 'survival'],
    ] as const) {
      const { svg } = figure(record, millimetres, plot)
      const boxes = [
        ...svg.matchAll(
          /<text x="([\d.-]+)" y="([\d.-]+)" font-size="([\d.]+)" text-anchor="(\w+)"[^>]*?( transform)?[^>]*>([^<]*)<\/text>/g,
        ),
      ]
        .filter((match) => !match[0].includes('transform'))
        .map(([, x, y, size, anchor, , text]) => {
          // Mean advance of a sans serif face is about half its size.
          const width = 0.5 * Number(size) * text.length
          const left = Number(x) - (anchor === 'end' ? width : anchor === 'middle' ? width / 2 : 0)
          return { left, right: left + width, top: Number(y) - 0.7 * Number(size), bottom: Number(y), text }
        })
      const clashes = boxes.flatMap((a, i) =>
        boxes
          .slice(i + 1)
          .flatMap((b) =>
            a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom
              ? [`${a.text} / ${b.text}`]
              : [],
          ),
      )
      expect(clashes).toEqual([])
    }
  })

  it('gives the same text for the same figure, and hostile names stay text', () => {
    const hostile = '</title><script>alert(1)</script>]]>&"\'\u0000'
    expect(figure(RECORDS[0], 85, 'density').svg).toBe(figure(RECORDS[0], 85, 'density').svg)
    const { svg } = figure(RECORDS[0], 85, 'density', hostile)
    expect(xmlProblem(svg)).toBeNull()
    expect(svg).not.toContain('<script')
  })

  it('carries its recipe and numbers, and they come out as they went in', () => {
    const metadata: FigureMetadata = {
      version: '0',
      recipe: { version: 1, name: '</metadata>]]>' },
      recipeHash: '0123456789abcdef',
      emitter: { name: '<a&b>"c\'', origin: { kind: 'demonstration', name: 'x' } },
      threshold: 56,
      window: [1, 2],
      numbers: { on: 0.5 },
    }
    const svg = sceneToSvg(figure(RECORDS[0], 85, 'density').scene, LIGHT, 'x', metadata)
    expect(xmlProblem(svg)).toBeNull()
    expect(extractMetadata(svg)).toEqual({ ok: true, metadata })
  })

  it('is drawn by a second renderer', () => {
    const { svg, scene } = figure(RECORDS[0], 178, 'density')
    const drawn = spawnSync('rsvg-convert', ['--format', 'png', '--zoom', '1'], {
      input: svg,
      maxBuffer: 1 << 26,
    })
    if (drawn.error !== undefined) {
      console.info('rsvg-convert is not on this machine; the second renderer was not asked.')
      return
    }
    expect(drawn.stderr.toString()).toBe('')
    const png = drawn.stdout
    expect([...png.subarray(1, 4)]).toEqual([0x50, 0x4e, 0x47])
    // Points become CSS pixels of 1/96 inch.
    expect(png.readUInt32BE(16)).toBeCloseTo((scene.width * 96) / 72, -1)
    expect(png.length).toBeGreaterThan(10_000)
  })
})
