import { expect, it } from 'vitest'
import { fuzzReaders } from '../../fuzz/fuzz-readers.ts'

/** The long run is `npm run fuzz`. */
it('damaged files are refused in a sentence or read to the last number', async () => {
  const report = await fuzzReaders(3000, 20)
  expect(report.faults).toEqual([])
  expect(report.read).toBeGreaterThan(450)
  expect(report.refused).toBeGreaterThan(600)
})
