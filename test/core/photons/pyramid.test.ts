import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { buildPyramid, envelope } from '../../../src/core/photons/pyramid.ts'

/** Every bin a column touches, looked at one by one. */
function slowEnvelope(
  values: ArrayLike<number>,
  from: number,
  to: number,
  columns: number,
): [number, number][] {
  const width = (to - from) / columns
  return Array.from({ length: columns }, (_, j) => {
    const left = from + j * width
    const right = j + 1 === columns ? to : from + (j + 1) * width
    let low = Number.NaN
    let high = Number.NaN
    for (let i = 0; i < values.length; i++) {
      if (!(i < right && i + 1 > left)) continue
      low = Number.isNaN(low) ? values[i] : Math.min(low, values[i])
      high = Number.isNaN(high) ? values[i] : Math.max(high, values[i])
    }
    return [low, high]
  })
}

describe('envelope', () => {
  it('equals looking at every bin, for any range and number of columns', () => {
    fc.assert(
      fc.property(
        fc.array(fc.nat(70000), { maxLength: 1300 }),
        fc.boolean(),
        fc.double({ min: -0.3, max: 1.2, noNaN: true }),
        fc.double({ min: 0.0001, max: 1.5, noNaN: true }),
        fc.integer({ min: 1, max: 40 }),
        (numbers, wide, start, length, columns) => {
          const values = wide ? Uint32Array.from(numbers) : Uint16Array.from(numbers)
          const from = start * values.length
          const to = from + length * values.length
          const low = new Float32Array(columns)
          const high = new Float32Array(columns)
          envelope(buildPyramid(values), values, from, to, columns, low, high)
          const slow = slowEnvelope(values, from, to, columns)
          expect(Array.from(low)).toEqual(slow.map((c) => c[0]))
          expect(Array.from(high)).toEqual(slow.map((c) => c[1]))
        },
      ),
      { seed: 31, numRuns: 400 },
    )
  })

  it('shows the one bin under a column narrower than a bin', () => {
    const values = Uint16Array.from([4, 9, 2])
    const low = new Float32Array(6)
    const high = new Float32Array(6)
    envelope(buildPyramid(values), values, 0, 3, 6, low, high)
    expect(Array.from(low)).toEqual([4, 4, 9, 9, 2, 2])
    expect(Array.from(high)).toEqual([4, 4, 9, 9, 2, 2])
  })

  it('finds a single spike in a million bins at every zoom', () => {
    const values = new Uint16Array(1_000_003)
    values[777_777] = 900
    const pyramid = buildPyramid(values)
    const high = new Float32Array(100)
    const low = new Float32Array(100)
    for (let half = 400_000; half > 1; half /= 3) {
      envelope(pyramid, values, 777_777.5 - half, 777_777.5 + half, 100, low, high)
      expect(Math.max(...high.filter((v) => !Number.isNaN(v)))).toBe(900)
    }
  })

  it('keeps the levels below 0.3 of the memory of the values', () => {
    const values = new Uint16Array(100_000)
    const bytes = buildPyramid(values).levels.reduce(
      (sum, l) => sum + l.low.byteLength + l.high.byteLength,
      0,
    )
    expect(bytes).toBeLessThan(0.3 * values.byteLength)
  })

  it('leaves NaN outside the record, in an empty record and in an empty range', () => {
    const columns = new Float32Array(2)
    const highs = new Float32Array(2)
    const empty = new Uint16Array(0)
    envelope(buildPyramid(empty), empty, 0, 10, 2, columns, highs)
    expect([...columns, ...highs].every(Number.isNaN)).toBe(true)
    const one = Uint16Array.from([5])
    envelope(buildPyramid(one), one, -1, 1, 2, columns, highs)
    expect([...highs]).toEqual([Number.NaN, 5])
    envelope(buildPyramid(one), one, 0.5, 0.5, 2, columns, highs)
    expect([...highs].every(Number.isNaN)).toBe(true)
  })
})
