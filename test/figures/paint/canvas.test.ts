import { describe, expect, it } from 'vitest'
import { paintScene, type Pen } from '../../../src/figures/paint/canvas.ts'
import { LIGHT } from '../../../src/figures/scene/palette.ts'
import type { Mark, Scene } from '../../../src/figures/scene/scene.ts'

/** A pen that writes down what it is told. */
function recordingPen() {
  const calls: { name: string; values: readonly unknown[] }[] = []
  const note =
    (name: string) =>
    (...values: readonly unknown[]): void => {
      calls.push({ name, values })
    }
  const pen: Pen = {
    fillStyle: '',
    strokeStyle: '',
    lineWidth: 1,
    font: '',
    textAlign: '',
    textBaseline: '',
    lineJoin: '',
    beginPath: note('beginPath'),
    closePath: note('closePath'),
    moveTo: note('moveTo'),
    lineTo: note('lineTo'),
    arc: note('arc'),
    rect: note('rect'),
    fillRect: note('fillRect'),
    fill: note('fill'),
    stroke: note('stroke'),
    clip: note('clip'),
    save: note('save'),
    restore: note('restore'),
    translate: note('translate'),
    rotate: note('rotate'),
    setLineDash: note('setLineDash'),
    fillText: note('fillText'),
    // Every letter one unit wide.
    measureText: (text) => ({ width: text.length }),
  }
  const of = (name: string): (readonly unknown[])[] =>
    calls.filter((call) => call.name === name).map(({ values }) => values)
  return { pen, calls, of }
}

function sceneOf(marks: readonly Mark[]): Scene {
  return {
    width: 120,
    height: 120,
    unit: 'px',
    fontSize: 10,
    hairline: 1,
    notes: [],
    panels: [
      {
        frame: { x: 10, y: 10, width: 100, height: 100 },
        x: { kind: 'linear', domain: [0, 10], label: '', side: 'none', ticks: 5 },
        y: { kind: 'linear', domain: [0, 10], label: '', side: 'none', ticks: 5 },
        marks,
        letter: '',
        description: '',
      },
    ],
  }
}

describe('the canvas painter', () => {
  it('puts a line at its data and lifts the pen where a value has no place', () => {
    const { pen, of } = recordingPen()
    paintScene(
      sceneOf([
        { kind: 'line', xs: [0, 5, 6, 10], ys: [0, 10, Number.NaN, 5], stroke: { role: 'ink', weight: 1 } },
      ]),
      LIGHT,
      pen,
    )
    expect(of('moveTo')).toEqual([
      [10, 110],
      [110, 60],
    ])
    expect(of('lineTo')).toEqual([[60, 10]])
  })

  it('cuts marks to the frame and always takes the cut back', () => {
    const { pen, of } = recordingPen()
    paintScene(sceneOf([{ kind: 'span', from: 2, to: 4, fill: 'driven' }]), LIGHT, pen)
    expect(of('rect')).toEqual([[10, 10, 100, 100]])
    expect(of('save').length).toBe(of('restore').length)
    expect(of('fillRect')).toEqual([[30, 10, 20, 100]])
  })

  it('draws an envelope as one bar a column and leaves out columns outside the record', () => {
    const { pen, of } = recordingPen()
    paintScene(
      sceneOf([
        {
          kind: 'envelope',
          lows: Float32Array.of(1, Number.NaN, 3, 4),
          highs: Float32Array.of(2, Number.NaN, 5, 4),
          columns: 4,
          role: 'trace',
        },
      ]),
      LIGHT,
      pen,
    )
    const bars = of('fillRect') as number[][]
    expect(bars).toHaveLength(3)
    expect(bars[0][0]).toBe(10)
    expect(bars[0][2]).toBe(25)
    // Half a hairline more on either side, so that a single value is seen.
    expect(bars[0][1]).toBeCloseTo(90 - 0.5, 9)
    expect(bars[0][3]).toBeCloseTo(10 + 1, 9)
    expect(bars[2][3]).toBeCloseTo(1, 9)
  })

  it('raises powers after what stands before them, the whole ending at its anchor, and leaves plain text alone', () => {
    const { pen, of } = recordingPen()
    const text = { kind: 'text', x: 1, y: 0.5, anchor: 'end', role: 'ink' } as const
    paintScene(
      sceneOf([
        { ...text, text: 'at^−α b', formula: true },
        { ...text, text: 'emitter_1' },
      ]),
      LIGHT,
      pen,
    )
    const [first, power, last, plain] = of('fillText')
    expect(first).toEqual(['at', 104, 60])
    expect(power[0]).toBe('−α')
    expect(power[1]).toBe(106)
    expect(power[2]).toBeLessThan(60)
    expect(last).toEqual([' b', 108, 60])
    expect(plain).toEqual(['emitter_1', 110, 60])
  })

  it('joins equal neighbouring states into one box, and draws cut ones hollow', () => {
    const { pen, of } = recordingPen()
    paintScene(
      sceneOf([
        { kind: 'states', states: Uint8Array.of(3, 3, 1, 1, 0, 2, 255, 4), columns: 8, thickness: 4 },
      ]),
      LIGHT,
      pen,
    )
    // off, on, both: one box each; the two cut stretches are outlines.
    expect(of('fillRect')).toEqual([
      [60, 106, 12.5, 4],
      [35, 106, 25, 4],
      [72.5, 106, 12.5, 4],
    ])
    expect(of('stroke')).toHaveLength(2)
  })
})
