import { describe, expect, it } from 'vitest'
import { gaussLegendre, integrate } from '../../../src/core/numeric/gauss-legendre.ts'

describe('gaussLegendre', () => {
  it('has the closed forms of 1, 2, 3 and 5 points (DLMF 3.5)', () => {
    expect(gaussLegendre(1).weights).toEqual([2])
    expect(gaussLegendre(1).nodes[0]).toBeCloseTo(0, 15)
    expect(gaussLegendre(2).nodes[1]).toBeCloseTo(1 / Math.sqrt(3), 15)
    expect(gaussLegendre(3).nodes[2]).toBeCloseTo(Math.sqrt(0.6), 15)
    expect(gaussLegendre(3).weights[1]).toBeCloseTo(8 / 9, 15)
    expect(gaussLegendre(5).nodes[4]).toBeCloseTo(Math.sqrt(5 + 2 * Math.sqrt(10 / 7)) / 3, 15)
    expect(gaussLegendre(5).weights[0]).toBeCloseTo((322 - 13 * Math.sqrt(70)) / 900, 15)
  })

  it('integrates powers up to 2n - 1 exactly, and the next one not', () => {
    for (let n = 1; n <= 24; n++) {
      const { nodes, weights } = gaussLegendre(n)
      const moment = (k: number): number => nodes.reduce((sum, x, i) => sum + weights[i] * x ** k, 0)
      for (let k = 0; k < 2 * n; k++) {
        expect(Math.abs(moment(k) - (k % 2 === 0 ? 2 / (k + 1) : 0)), `n = ${n}, k = ${k}`).toBeLessThan(
          3e-15,
        )
      }
      if (n < 12) expect(Math.abs(moment(2 * n) - 2 / (2 * n + 1))).toBeGreaterThan(1e-8)
      expect([...nodes].sort((a, b) => a - b)).toEqual(nodes)
    }
  })

  it('keeps a rule once made', () => {
    expect(gaussLegendre(7)).toBe(gaussLegendre(7))
  })
})

describe('integrate', () => {
  it('scales to any range, also backwards', () => {
    expect(integrate(Math.exp, 0, 1)).toBeCloseTo(Math.E - 1, 14)
    expect(integrate((x) => 1 / x, 2, 1, 20)).toBeCloseTo(-Math.LN2, 14)
  })
})
