import { expect, it } from 'vitest'
import { recordStart } from '../../../src/core/read/record-start.ts'

it('the zero of the clock when the first photon comes in the first hundredth, else the first photon', () => {
  expect(recordStart(0, 1000).startTick).toBe(0)
  expect(recordStart(10, 1000).startTick).toBe(0)
  expect(recordStart(11, 1000).startTick).toBe(11)
  expect(recordStart(1e12, 1e12 + 5)).toEqual({
    startTick: 1e12,
    note: 'The record is taken to run from its first photon to its last',
  })
})
