import { describe, expect, it } from 'vitest'
import { durationEdges } from '../../../src/core/dwells/duration-edges.ts'
import { durationGrid } from '../../../src/core/states/duration-grid.ts'

describe('durationEdges', () => {
  it('are whole numbers from the duration grid, about as many to a decade as asked for', () => {
    const edges = durationEdges(100000, 7)
    const grid = new Set(durationGrid(200000).edges)
    expect(edges.every((edge) => grid.has(edge))).toBe(true)
    expect(edges.slice(0, 7)).toEqual([1, 2, 3, 4, 5, 7, 10])
    expect(edges[edges.length - 1]).toBeGreaterThan(100000)
    const perDecade = edges.filter((edge) => edge >= 1000 && edge < 100000).length / 2
    expect(Math.abs(perDecade - 7)).toBeLessThanOrEqual(1)
  })

  it('close the last stretch just above the longest duration', () => {
    for (const longest of [1, 2, 5, 63, 64, 65, 999]) {
      const edges = durationEdges(longest, 7)
      expect(edges[edges.length - 1]).toBeGreaterThan(longest)
      expect(edges[edges.length - 2]).toBeLessThanOrEqual(longest)
    }
  })
})
