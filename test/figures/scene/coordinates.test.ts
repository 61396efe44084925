import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { coordinates, powerOfTen, shareOf, ticksOf, valueAt } from '../../../src/figures/scene/coordinates.ts'
import type { Axis } from '../../../src/figures/scene/scene.ts'

const axis = (kind: 'linear' | 'log', low: number, high: number): Axis => ({
  kind,
  domain: [low, high],
  label: '',
  side: 'bottom',
  ticks: 5,
})

describe('coordinates', () => {
  it('are undone by valueAt, on both kinds of axis', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('linear' as const, 'log' as const),
        fc.double({ min: 1e-6, max: 10, noNaN: true }),
        fc.double({ min: 1.01, max: 1e6, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (kind, low, ratio, share) => {
          const one = axis(kind, low, low * ratio)
          expect(shareOf(one, valueAt(one, share))).toBeCloseTo(share, 8)
        },
      ),
      { seed: 5 },
    )
  })

  it('agree with shareOf and turn the y axis upwards', () => {
    const frame = { x: 20, y: 30, width: 200, height: 100 }
    const at = coordinates(frame, axis('log', 0.01, 100), axis('linear', 0, 4))
    expect(at.x(0.01)).toBeCloseTo(20, 9)
    expect(at.x(1)).toBeCloseTo(120, 9)
    expect(at.x(100)).toBeCloseTo(220, 9)
    expect(at.y(0)).toBe(130)
    expect(at.y(4)).toBe(30)
    expect(at.x(0)).toBe(Number.NEGATIVE_INFINITY)
  })
})

describe('ticks', () => {
  it('label decades and mark 2 to 9 where there is room', () => {
    const ticks = ticksOf(axis('log', 0.01, 100), 400, 10)
    expect(ticks.filter(({ label }) => label !== '').map(({ label }) => label)).toEqual([
      '0.01',
      '0.1',
      '1',
      '10',
      '100',
    ])
    expect(ticks).toHaveLength(4 * 9 + 1)
  })

  it('thin out when crowded and stay inside the axis', () => {
    const ticks = ticksOf(axis('log', 1e-9, 1e3), 100, 10)
    expect(ticks.filter(({ label }) => label !== '').length).toBeLessThanOrEqual(7)
    for (const { value } of ticks) {
      expect(value).toBeGreaterThanOrEqual(1e-9 * (1 - 1e-9))
      expect(value).toBeLessThanOrEqual(1e3 * (1 + 1e-9))
    }
  })

  it('write powers and signs as print does', () => {
    expect(powerOfTen(-4)).toBe('10⁻⁴')
    expect(powerOfTen(12)).toBe('10¹²')
    expect(powerOfTen(-1)).toBe('0.1')
    expect(ticksOf(axis('linear', -1, 1), 100, 10).map(({ label }) => label)).toContain('−0.5')
  })

  it('are none on an axis without extent', () => {
    expect(ticksOf(axis('linear', 3, 3), 100, 10)).toEqual([])
  })
})
