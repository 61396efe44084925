import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { correctedOnFraction } from '../../../src/core/states/corrected-on-fraction.ts'

describe('correctedOnFraction', () => {
  it('undoes what the errors do to the share seen on', () => {
    const unit = { min: 0, max: 1, noNaN: true }
    fc.assert(
      fc.property(
        fc.double(unit),
        fc.double({ ...unit, max: 0.4 }),
        fc.double({ ...unit, max: 0.4 }),
        (f, p0, p1) => {
          expect(correctedOnFraction(f * (1 - p1) + (1 - f) * p0, p0, p1)).toBeCloseTo(f, 12)
        },
      ),
      { seed: 8 },
    )
  })

  it('leaves the share alone without errors, clips, and gives null where nothing is left', () => {
    expect(correctedOnFraction(0.37, 0, 0)).toBe(0.37)
    expect(correctedOnFraction(0.01, 0.05, 0)).toBe(0)
    expect(correctedOnFraction(0.99, 0, 0.05)).toBe(1)
    expect(correctedOnFraction(0.5, 0.6, 0.4)).toBeNull()
    expect(correctedOnFraction(Number.NaN, 0, 0)).toBeNull()
  })
})
