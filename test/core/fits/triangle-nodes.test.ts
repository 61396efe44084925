import { describe, expect, it } from 'vitest'
import { triangleNodes } from '../../../src/core/fits/triangle-nodes.ts'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import type { LawAt } from '../../../src/core/laws/law.ts'
import { power } from '../../../src/core/laws/power.ts'
import { plainMass, TYPICAL } from './plain-likelihood.ts'

function fastMass(at: LawAt, m: number, edgeShare: number, binSeconds: number, support: number): number {
  const nodes = triangleNodes([m], 1 - 2 * edgeShare, binSeconds, support * binSeconds)
  let mass = 0
  for (let n = nodes.first[0]; n < nodes.first[1]; n++) {
    mass += nodes.weights[n] * Math.exp(at.logDensity(nodes.seconds[n]))
  }
  return mass
}

describe('triangleNodes', () => {
  // Bin-exact probabilities derived for a = 0.5, t0 = 2 bins, theta = 1/2, where the support begins inside the first kernels.
  it.each([
    [2, 0.101],
    [3, 0.1411],
    [4, 0.0902],
    [5, 0.0641],
    [10, 0.0224],
  ])('gives P(%i) = %f for a power law that begins at two bins', (m, expected) => {
    const at = power.at([1.5], 0.02)
    expect(plainMass(at, m, 0.5, 0.01, 2)).toBeCloseTo(expected, 4)
    expect(fastMass(at, m, 0.5, 0.01, 2)).toBeCloseTo(expected, 4)
    expect(fastMass(at, m, 0.5, 0.01, 2) / plainMass(at, m, 0.5, 0.01, 2)).toBeCloseTo(1, 9)
  })

  it.each(Object.values(LAWS))('agrees with dense integration to 1e-9 for the $name law', (law) => {
    for (const edgeShare of [0, 0.4, 0.5, 1]) {
      const support = 1 + 2 * edgeShare
      const at = law.at(TYPICAL[law.name], support * 0.01)
      for (const m of [3, 4, 5, 6, 7, 8, 9, 12, 23, 24, 50, 181, 182, 300, 1000]) {
        const slow = plainMass(at, m, edgeShare, 0.01, support)
        expect(Math.abs(fastMass(at, m, edgeShare, 0.01, support) / slow - 1)).toBeLessThan(1e-9)
      }
    }
  })

  it('keeps 1e-9 for exponents from 1.05 to 3', () => {
    for (const alpha of [1.05, 2, 3]) {
      const at = power.at([alpha], 0.01)
      for (let m = 3; m < 300; m++) {
        const slow = plainMass(at, m, 0, 0.01, 1)
        expect(Math.abs(fastMass(at, m, 0, 0.01, 1) / slow - 1)).toBeLessThan(1e-9)
      }
    }
  })

  it('puts panels where the kernel reaches down to nothing', () => {
    const at = power.at([1.5], 0.0005)
    // Simpson on a steep density is itself only good to 1e-5 here.
    for (const m of [1, 2])
      expect(fastMass(at, m, 0.5, 0.01, 0.05) / plainMass(at, m, 0.5, 0.01, 0.05)).toBeCloseTo(1, 4)
  })

  it('gives masses that add up to one over all m', () => {
    const at = power.at([1.5], 0.02)
    let sum = 0
    for (let m = 2; m <= 4000; m++) sum += fastMass(at, m, 0.5, 0.01, 2)
    // What is left: Sbar beyond 4000 bins of a law that begins at 2.
    const rest = 2 * (Math.sqrt(4001) - Math.sqrt(4000)) * Math.sqrt(2)
    const first = fastMass(at, 1, 0.5, 0.01, 2)
    expect(first).toBe(0)
    expect(sum + rest).toBeCloseTo(1, 8)
  })
})
