import { describe, expect, it } from 'vitest'
import { chiSquareUpperTail } from '../../../src/core/numeric/chi-square.ts'
import { seededRandom, splitSeed } from '../../../src/core/numeric/seeded-random.ts'
import { kolmogorovDistance, kolmogorovLimit } from './kolmogorov.ts'

/** Chance that one random check here fails although the generator is right. */
const FALSE_ALARM = 1e-4

describe('seededRandom', () => {
  it('repeats for equal seeds, as a number or as its text, and differs for others', () => {
    const first = (seed: number | string): number[] => {
      const random = seededRandom(seed)
      return [random.uniform(), random.uniform(), random.uniform()]
    }
    expect(first('emitter 3')).toEqual(first('emitter 3'))
    expect(first(42)).toEqual(first('42'))
    const seeds = [
      '',
      'a',
      'b',
      'ab',
      'ba',
      'aa',
      0,
      1,
      -1,
      0.5,
      splitSeed(1, 'gate'),
      splitSeed(1, 'photons'),
    ]
    expect(new Set(seeds.map((seed) => first(seed)[0])).size).toBe(seeds.length)
  })

  it('stays what it is: seeded records must not change between versions', () => {
    const random = seededRandom('heliograph')
    expect([random.uniform(), random.uniform()]).toEqual([0.6426788611851879, 0.34943141131059535])
  })

  it('is uniform in (0, 1), also in its low bits', () => {
    const random = seededRandom(7)
    const n = 50_000
    const values = Float64Array.from({ length: n }, () => random.uniform())
    expect(Math.min(...values.subarray(0, 1000))).toBeGreaterThan(0)
    expect(kolmogorovDistance(values, (x) => x)).toBeLessThan(kolmogorovLimit(n, FALSE_ALARM))
    const low = values.map((x) => (x * 2 ** 30) % 1)
    expect(kolmogorovDistance(low, (x) => x)).toBeLessThan(kolmogorovLimit(n, FALSE_ALARM))
  })

  it('gives independent first numbers to neighbouring seeds (16 by 16 cells)', () => {
    const n = 40_000
    const cells = new Float64Array(256)
    let before = seededRandom(splitSeed('study', 0)).uniform()
    for (let i = 1; i <= n; i++) {
      const next = seededRandom(splitSeed('study', i)).uniform()
      cells[Math.floor(before * 16) * 16 + Math.floor(next * 16)]++
      before = next
    }
    let statistic = 0
    for (const seen of cells) statistic += (seen - n / 256) ** 2 / (n / 256)
    expect(chiSquareUpperTail(statistic, 255)).toBeGreaterThan(FALSE_ALARM)
  })
})
