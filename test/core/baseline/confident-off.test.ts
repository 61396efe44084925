import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { confidentOff } from '../../../src/core/baseline/confident-off.ts'

/** The equations of the expectation step and of the erosion, one bin at a time, exponentials and all. */
function slow(
  counts: Uint16Array,
  unusable: Uint8Array | null,
  n: number,
  lnBaseline: Float64Array,
  doubt: Float64Array | null,
  signal: number,
  onShare: number,
) {
  const knots = lnBaseline.length
  const linear = (values: (j: number) => number, i: number): number => {
    const place = Math.min(Math.max((i + 0.5) / n - 0.5, 0), knots - 1)
    const j = Math.min(Math.floor(place), Math.max(knots - 2, 0))
    return knots === 1 ? values(0) : values(j) + (place - j) * (values(j + 1) - values(j))
  }
  const b = (j: number): number => Math.exp(lnBaseline[j])
  const weights = Array.from(counts, (k, i) => {
    const ratio = linear(
      (j) => Math.log(1 + signal / (b(j) * Math.exp(doubt === null ? 0 : -Math.min(doubt[j], 0.35)))),
      i,
    )
    return 1 / (1 + Math.exp(k * ratio - signal + Math.log(onShare / (1 - onShare))))
  })
  const usable = (i: number): boolean => unusable === null || unusable[i] === 0
  const passes = (i: number): boolean => i < 0 || i >= counts.length || !usable(i) || weights[i] > 0.5
  const sums = {
    exposure: Array.from({ length: knots }, () => 0),
    counts: Array.from({ length: knots }, () => 0),
    support: Array.from({ length: knots }, () => 0),
    onBins: 0,
    onExcess: 0,
    innerOnBins: 0,
    innerOnExcess: 0,
  }
  counts.forEach((k, i) => {
    if (!usable(i)) return
    const w = weights[i]
    sums.onBins += 1 - w
    sums.onExcess += (1 - w) * (k - linear(b, i))
    if ([i - 1, i + 1].every((m) => m >= 0 && m < counts.length && usable(m) && weights[m] <= 0.5)) {
      sums.innerOnBins += 1 - w
      sums.innerOnExcess += (1 - w) * (k - linear(b, i))
    }
    if (!(w > 0.5 && passes(i - 1) && passes(i + 1))) return
    const j = Math.floor(i / n)
    sums.exposure[j] += (w * linear(b, i)) / b(j)
    sums.counts[j] += w * k
    sums.support[j] += w
  })
  return sums
}

describe('confidentOff', () => {
  it('equals the equations taken one bin at a time', () => {
    const level = fc.integer({ min: 0, max: 40 })
    fc.assert(
      fc.property(
        fc.array(level, { minLength: 1, maxLength: 120 }),
        fc.integer({ min: 1, max: 25 }),
        fc.array(fc.double({ min: 0.5, max: 3, noNaN: true }), { minLength: 120, maxLength: 120 }),
        fc.double({ min: 1, max: 60, noNaN: true }),
        fc.double({ min: 0.01, max: 0.99, noNaN: true }),
        fc.boolean(),
        fc.integer({ min: 2, max: 9 }),
        (numbers, n, lns, signal, onShare, doubted, every) => {
          const counts = Uint16Array.from(numbers)
          const knots = Math.ceil(counts.length / n)
          const lnBaseline = Float64Array.from(lns.slice(0, knots))
          const doubt = doubted ? lnBaseline.map((v) => v / 4) : null
          const unusable = doubted ? Uint8Array.from(counts, (_, i) => (i % every === 0 ? 1 : 0)) : null
          const fast = confidentOff(counts, unusable, n, lnBaseline, doubt, signal, onShare)
          const plain = slow(counts, unusable, n, lnBaseline, doubt, signal, onShare)
          // The table of the logistic function is right to 3e-6, and counts go to 40. A probability of exactly 1/2 would be a tie.
          const near = (a: number, b: number): void => expect(Math.abs(a - b)).toBeLessThan(0.02)
          near(fast.onBins, plain.onBins)
          near(fast.onExcess, plain.onExcess)
          near(fast.innerOnBins, plain.innerOnBins)
          near(fast.innerOnExcess, plain.innerOnExcess)
          for (let j = 0; j < knots; j++) {
            near(fast.exposure[j], plain.exposure[j])
            near(fast.counts[j], plain.counts[j])
            near(fast.support[j], plain.support[j])
          }
        },
      ),
      { seed: 61, numRuns: 400 },
    )
  })

  it('takes every usable bin as off without signal', () => {
    const counts = Uint16Array.from({ length: 35 }, (_, i) => i)
    const sums = confidentOff(counts, null, 10, new Float64Array(4), null, 0, 0)
    expect([...sums.support]).toEqual([10, 10, 10, 5])
    expect([...sums.counts]).toEqual([45, 145, 245, 160])
    expect(sums.onBins).toBe(0)
    expect(sums.usableBins).toBe(35)
  })

  it('erodes one bin on either side of an on-time, across knots too', () => {
    const counts = new Uint16Array(30).fill(10)
    counts.fill(100, 9, 12)
    const sums = confidentOff(counts, null, 10, new Float64Array(3).fill(Math.log(10)), null, 90, 0.1)
    expect([...sums.support].map((v) => Math.round(v * 1e6) / 1e6)).toEqual([8, 7, 10])
  })
})
