import { describe, expect, it } from 'vitest'
import { NO_RESULTS, resultsStore, shown } from '../../../src/state/results/results-store.ts'

describe('results store', () => {
  it('begins with nothing', () => {
    expect(resultsStore().getState()).toBe(NO_RESULTS)
  })

  it('shows what arrived, else the last while a newer is on its way', () => {
    expect(shown({ status: 'none' })).toBeNull()
    expect(shown({ status: 'running', last: null })).toBeNull()
    expect(shown({ status: 'running', last: 3 })).toBe(3)
    expect(shown({ status: 'arrived', value: 4 })).toBe(4)
    expect(shown({ status: 'failed', sentence: 'No.' })).toBeNull()
  })
})
