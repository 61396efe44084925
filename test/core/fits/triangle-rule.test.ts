import { describe, expect, it } from 'vitest'
import { triangleRule } from '../../../src/core/fits/triangle-rule.ts'

describe('triangleRule', () => {
  it.each([1, 2, 3, 5, 8, 10, 12])('of %i points gives all moments up to degree 2n - 1', (n) => {
    const { nodes, weights } = triangleRule(n)
    for (let degree = 0; degree < 2 * n; degree++) {
      const moment = nodes.reduce((sum, x, i) => sum + weights[i] * x ** degree, 0)
      // Integral of |x|^k (1 - |x|) over [-1, 1].
      const exact = degree % 2 === 1 ? 0 : 2 / ((degree + 1) * (degree + 2))
      expect(moment).toBeCloseTo(exact, 13)
    }
  })

  it('has the rule with nodes 0 and -/+ sqrt(0.4) for three points', () => {
    const { nodes, weights } = triangleRule(3)
    expect(nodes[2]).toBeCloseTo(Math.sqrt(0.4), 14)
    expect(weights[1]).toBeCloseTo(7 / 12, 14)
  })
})
