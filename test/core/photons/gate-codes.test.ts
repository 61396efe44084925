import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { GATE_CLASSES, type GateWindow } from '../../../src/core/photons/gate.ts'
import { gateCodes } from '../../../src/core/photons/gate-codes.ts'

/** Class at every 1/64 of a bin, one by one; windows of this test start and end on sixteenths. */
function slowCodes(windows: readonly GateWindow[], bins: number, startSeconds: number): number[] {
  const classAt = (t: number): number => {
    const window = windows.find((w) => t >= w.startSeconds && t < w.endSeconds)
    return window === undefined ? 0 : GATE_CLASSES.indexOf(window.gateClass)
  }
  return Array.from({ length: bins }, (_, i) => {
    const seen = new Set<number>()
    for (let s = 0; s < 64; s++) seen.add(classAt(startSeconds + i + (s + 0.5) / 64))
    return seen.size === 1 ? [...seen][0] : 3
  })
}

describe('gateCodes', () => {
  it('equals looking at the class all through every bin', () => {
    const gaps = fc.array(fc.tuple(fc.nat(40), fc.nat(60), fc.constantFrom(...GATE_CLASSES)), {
      maxLength: 10,
    })
    fc.assert(
      fc.property(gaps, fc.integer({ min: -40, max: 40 }), (pieces, offset) => {
        let t = offset / 16
        const windows = pieces.map(([gap, length, gateClass]) => {
          const startSeconds = t + gap / 16
          t = startSeconds + length / 16
          return { startSeconds, endSeconds: t, gateClass }
        })
        const codes = gateCodes({ windows }, { binSeconds: 1, startSeconds: 0.5, bins: 30 })
        expect(Array.from(codes)).toEqual(slowCodes(windows, 30, 0.5))
      }),
      { seed: 41, numRuns: 500 },
    )
  })

  it('sees no straddling bin in decimal times that meet bin edges', () => {
    const windows = Array.from({ length: 100 }, (_, k) => ({
      startSeconds: 0.1 + k * 0.2,
      endSeconds: 0.2 + k * 0.2,
      gateClass: 'driven' as const,
    }))
    const codes = gateCodes({ windows }, { binSeconds: 0.01, startSeconds: 0, bins: 2000 })
    expect(codes.every((c, i) => c === Math.floor(i / 10) % 2)).toBe(true)
  })

  it('is all reference without windows', () => {
    expect(gateCodes({ windows: [] }, { binSeconds: 1, startSeconds: 0, bins: 3 })).toEqual(new Uint8Array(3))
  })
})
