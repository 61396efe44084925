import { spawnSync } from 'node:child_process'
import { describe, expect, it } from 'vitest'
import { sceneToSvg } from '../../src/figures/paint/svg.ts'
import { benchFigure } from '../../src/figures/scene/bench-figure.ts'
import { extractMetadata, type FigureMetadata } from '../../src/figures/scene/figure-metadata.ts'
import { LIGHT } from '../../src/figures/scene/palette.ts'
import { analysedRecord } from './analysed-record.ts'
import { expectApproved } from './approved.ts'
import { drawnText } from './drawn-text.ts'
import { xmlProblem } from './well-formed.ts'

const RECORDS = [analysedRecord(0), analysedRecord(2), analysedRecord(1)]

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
    [2, 85, 'density'],
  ] as const) {
    const kind = ['textbook', 'drifting', 'dim'][index]
    it(`looks as approved: emitter ${kind}, ${millimetres} mm, ${plot}`, () => {
      const { svg } = figure(RECORDS[index], millimetres, plot)
      expect(xmlProblem(svg)).toBeNull()
      expectApproved(`bench-${kind}-${millimetres}-${plot}`, svg)
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
      .svg.replace(/<\/?tspan[^>]*>/g, '')
      .replace(/<[^>]+>/g, ' ')
      .replace(/\s+/g, ' ')
    const [off, on] = RECORDS[0].numbers.states
    for (const words of [
      'n = ',
      'fitted from 30 ms',
      'P(t) ∝ t−α exp(−t/τ)',
      'exponent of the density, P(t) ∝ t−α',
      'names the form of its cutoff τ',
      'in bins of 10 ms',
      `Off-times: ${off.dwells.complete} complete, ${off.dwells.censored} cut, ${off.dwells.startUnseen} of unseen start; fitted from 3 bins`,
      `On-times: ${on.dwells.complete} complete, ${on.dwells.censored} cut, ${on.dwells.startUnseen} of unseen start; fitted from 3 bins`,
      'gate-on windows ochre',
    ]) {
      expect(text).toContain(words)
    }
  })

  it('has no two texts in one place, none outside the page, and no vertical mark through a text', () => {
    const page = (value: number, end: number): boolean => value >= 0 && value <= end
    for (const record of RECORDS) {
      for (const millimetres of [85, 178]) {
        for (const plot of ['density', 'neighbour', 'survival', 'hazard'] as const) {
          const { scene } = figure(record, millimetres, plot)
          const { texts, rules } = drawnText(scene)
          const where = `${record.name}, ${millimetres} mm, ${plot}`
          const outside = texts.filter(
            ({ left, right, top, bottom }) =>
              !page(left, scene.width) ||
              !page(right, scene.width) ||
              !page(top, scene.height) ||
              !page(bottom, scene.height),
          )
          expect(outside.map(({ text }) => `${where}: ${text}`)).toEqual([])
          const clashes = texts.flatMap((a, i) =>
            texts
              .slice(i + 1)
              .filter((b) => a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom)
              .map((b) => `${where}: ${a.text} / ${b.text}`),
          )
          expect(clashes).toEqual([])
          const struck = rules.flatMap(([x, top, bottom]) =>
            texts
              .filter((box) => x > box.left && x < box.right && top < box.bottom && box.top < bottom)
              .map((box) => `${where}: mark at ${x} through ${box.text}`),
          )
          expect(struck).toEqual([])
          expect(rules.length).toBeGreaterThanOrEqual(2)
        }
      }
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
