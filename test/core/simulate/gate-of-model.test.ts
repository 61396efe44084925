import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { GateModel } from '../../../src/core/simulate/emitter-model.ts'
import { drivenSpans, gateOfModel } from '../../../src/core/simulate/gate-of-model.ts'

const GATE: GateModel = {
  halfPeriodSeconds: 20,
  offsetSeconds: 0,
  duty: 0.5,
  guardSeconds: 0,
  leakCps: 0,
  clockErrorSeconds: 0,
}
const anyGate = fc.record({
  halfPeriodSeconds: fc.double({ min: 0.3, max: 30, noNaN: true }),
  offsetSeconds: fc.double({ min: -100, max: 100, noNaN: true }),
  duty: fc.double({ min: 0, max: 1, noNaN: true }),
  guardSeconds: fc.double({ min: 0, max: 2, noNaN: true }),
  leakCps: fc.constant(0),
  clockErrorSeconds: fc.double({ min: -1, max: 1, noNaN: true }),
})

describe('drivenSpans', () => {
  it('starts with a reference half and alternates', () => {
    expect([...drivenSpans(GATE, 100)]).toEqual([20, 40, 60, 80])
    expect([...drivenSpans({ ...GATE, offsetSeconds: 5 }, 50)]).toEqual([0, 5, 25, 45])
    expect([...drivenSpans({ ...GATE, duty: 0.25 }, 80)]).toEqual([30, 40, 70, 80])
    expect([...drivenSpans({ ...GATE, duty: 0 }, 80)]).toEqual([])
    expect([...drivenSpans({ ...GATE, duty: 1 }, 80)]).toEqual([0, 80])
    expect([...drivenSpans(null, 80)]).toEqual([])
  })

  it('agrees with the wave at any time', () => {
    fc.assert(
      fc.property(anyGate, fc.double({ min: 0, max: 59.9, noNaN: true }), (gate, t) => {
        const spans = drivenSpans(gate, 60)
        let driven = false
        for (let i = 0; i < spans.length; i += 2) driven ||= t >= spans[i] && t < spans[i + 1]
        const cycles = (t - gate.offsetSeconds) / (2 * gate.halfPeriodSeconds)
        const phase = cycles - Math.floor(cycles)
        // Rounding may put a time on either side of an edge.
        fc.pre(Math.abs(phase - (1 - gate.duty)) > 1e-9 && phase > 1e-9 && phase < 1 - 1e-9)
        expect(driven).toBe(phase > 1 - gate.duty)
      }),
      { seed: 21, numRuns: 500 },
    )
  })
})

describe('gateOfModel', () => {
  it('covers the record without overlap, whatever the wave', () => {
    fc.assert(
      fc.property(anyGate, (gate) => {
        const { windows } = gateOfModel(gate, 60)
        let at = 0
        for (const window of windows) {
          expect(window.startSeconds).toBe(at)
          expect(window.endSeconds).toBeGreaterThan(at)
          at = window.endSeconds
        }
        expect(at).toBe(60)
      }),
      { seed: 22, numRuns: 300 },
    )
  })

  it('puts a guard after each edge and moves edges by the clock error', () => {
    const { windows } = gateOfModel({ ...GATE, guardSeconds: 0.5, clockErrorSeconds: 1 }, 50)
    expect(windows.map((w) => [w.startSeconds, w.endSeconds, w.gateClass])).toEqual([
      [0, 1, 'driven'],
      [1, 1.5, 'guard'],
      [1.5, 21, 'reference'],
      [21, 21.5, 'guard'],
      [21.5, 41, 'driven'],
      [41, 41.5, 'guard'],
      [41.5, 50, 'reference'],
    ])
  })
})
