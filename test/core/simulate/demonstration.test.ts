import { describe, expect, it } from 'vitest'
import { DEMONSTRATION } from '../../../src/core/simulate/demonstration.ts'
import { modelProblem } from '../../../src/core/simulate/model-problem.ts'
import { simulateTrace } from '../../../src/core/simulate/simulate-trace.ts'

const TRUTHS = DEMONSTRATION.map(({ model, seed }) => simulateTrace(model, 0.01, seed))

describe('DEMONSTRATION', () => {
  it('has six emitters with names of their own and models that are plain JSON', () => {
    expect(DEMONSTRATION.length).toBe(6)
    expect(new Set(DEMONSTRATION.map(({ name }) => name)).size).toBe(6)
    for (const { model } of DEMONSTRATION) {
      expect(modelProblem(model)).toBeNull()
      expect(JSON.parse(JSON.stringify(model))).toEqual(model)
    }
  })

  it('shows under a gate of 20 s half-periods with field off first', () => {
    for (const { gate } of TRUTHS) {
      const classes = gate?.windows.filter((w) => w.gateClass !== 'guard') ?? []
      expect(classes[0]).toEqual({ startSeconds: 0, endSeconds: 20, gateClass: 'reference' })
      expect(classes[1].gateClass).toBe('driven')
      expect(classes[1].endSeconds).toBe(40)
    }
  })

  it('holds records that blink: both states, dwells enough to fit', () => {
    for (const { truth } of TRUTHS) {
      const on = truth.dwells.state.reduce((sum, s) => sum + s, 0)
      expect(on).toBeGreaterThan(50)
      expect(truth.onFractionBeforeBleaching).toBeGreaterThan(0.2)
      expect(truth.onFractionBeforeBleaching).toBeLessThan(0.8)
    }
  })

  it('makes each point: bleaching half way, grey time, dwells below the bin, long on-times under the drift', () => {
    const [textbook, , drifting, bleached, grey, fast] = TRUTHS.map(({ truth }) => truth)
    expect(textbook.path.bleachedAtSeconds).toBeNull()
    expect(bleached.path.bleachedAtSeconds).toBe(bleached.path.durationSeconds / 2)
    expect(
      Math.max(...drifting.dwells.durationSeconds.filter((_, i) => drifting.dwells.state[i] === 1)),
    ).toBeGreaterThan(40)
    let greySeconds = 0
    grey.path.states.forEach((state, i) => {
      if (state === 1) greySeconds += (grey.path.startSeconds[i + 1] ?? 400) - grey.path.startSeconds[i]
    })
    expect(greySeconds / 400).toBeGreaterThan(0.08)
    const short = fast.dwells.durationSeconds.filter((d) => d < 0.01).length
    expect(short / fast.dwells.durationSeconds.length).toBeGreaterThan(0.5)
  })
})
