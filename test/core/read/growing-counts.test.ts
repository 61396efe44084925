import { expect, it } from 'vitest'
import { growingCounts } from '../../../src/core/read/growing-counts.ts'

it('keeps every count over growth and skips, in 2 bytes while they fit', () => {
  const counts = growingCounts()
  const expected: number[] = []
  for (let i = 0; i < 50_000; i++) {
    counts.push(i)
    expected.push(i)
    if (i % 1000 === 0) {
      counts.skip(37)
      for (let k = 0; k < 37; k++) expected.push(0)
    }
  }
  expect(counts.length).toBe(expected.length)
  const small = counts.finish()
  expect(small).toBeInstanceOf(Uint16Array)
  expect(Array.from(small)).toEqual(expected)
  counts.push(65536)
  const large = counts.finish()
  expect(large).toBeInstanceOf(Uint32Array)
  expect(Array.from(large)).toEqual([...expected, 65536])
  expect(growingCounts().finish().length).toBe(0)
})
