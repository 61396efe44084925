import { describe, expect, it } from 'vitest'
import type { DurationModel, EmitterModel } from '../../../src/core/simulate/emitter-model.ts'
import { telegraphPath } from '../../../src/core/simulate/telegraph-path.ts'
import { truthOf } from '../../../src/core/simulate/truth.ts'
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'
import reference from '../../reference/telegraph-counts.json' with { type: 'json' }

const exponential = (perSecond: number): DurationModel => ({
  law: 'exponential',
  parameters: { tauSeconds: 1 / perSecond },
  shortestSeconds: 1e-9,
})
const twoRates = (leaveOff: number, leaveOn: number, durationSeconds: number): EmitterModel =>
  twoLevelModel({
    durationSeconds,
    offCps: 1000,
    onCps: 10_000,
    off: exponential(leaveOff),
    on: exponential(leaveOn),
  })

const POWERS = twoLevelModel({
  durationSeconds: 600,
  offCps: 1000,
  onCps: 10_000,
  off: { law: 'power', parameters: { alpha: 1.6 }, shortestSeconds: 0.01 },
  on: { law: 'power-cutoff-density', parameters: { alpha: 1.5, tauSeconds: 5 }, shortestSeconds: 0.01 },
})

describe('telegraphPath', () => {
  it('covers the record with alternating states and is the same for the same seed', () => {
    const path = telegraphPath(POWERS, 'a')
    expect(path.startSeconds[0]).toBe(0)
    for (let i = 1; i < path.states.length; i++) {
      expect(path.startSeconds[i]).toBeGreaterThanOrEqual(path.startSeconds[i - 1] + 0.01)
      expect(path.states[i]).toBe(1 - path.states[i - 1])
    }
    expect(path.startSeconds.at(-1)).toBeLessThan(600)
    expect(telegraphPath(POWERS, 'a')).toEqual(path)
    expect(telegraphPath(POWERS, 'b')).not.toEqual(path)
  })

  it('keeps its switches when only levels, leak or detector change', () => {
    const brighter: EmitterModel = {
      ...POWERS,
      baseline: { cps: 50, drift: [{ kind: 'linear', perSecond: 1 }] },
      detector: { deadTimeSeconds: 1e-7, afterpulsing: null },
      gate: {
        halfPeriodSeconds: 1,
        offsetSeconds: 0,
        duty: 0.5,
        guardSeconds: 0,
        leakCps: 300,
        clockErrorSeconds: 0,
      },
    }
    expect(telegraphPath(brighter, 'a')).toEqual(telegraphPath(POWERS, 'a'))
  })

  it('starts in each state with equal chances', () => {
    let on = 0
    for (let i = 0; i < 2000; i++)
      on += telegraphPath({ ...POWERS, durationSeconds: 0.02 }, `start ${i}`).states[0]
    // 4.5 standard errors of a fair coin: false alarm 7e-6.
    expect(Math.abs(on - 1000)).toBeLessThan(4.5 * Math.sqrt(500))
  })

  it('draws dwells by their law: median of the power law', () => {
    const path = telegraphPath({ ...POWERS, durationSeconds: 1e5 }, 'median')
    let below = 0
    let all = 0
    const median = 0.01 * 2 ** (1 / 0.6)
    // The first half of the switches, far from the end of the record: no dwell of it can be cut.
    for (let i = 0; i < path.states.length / 2; i++) {
      if (path.states[i] !== 0) continue
      all++
      if (path.startSeconds[i + 1] - path.startSeconds[i] < median) below++
    }
    expect(all).toBeGreaterThan(500)
    // 4.5 standard errors: false alarm 7e-6.
    expect(Math.abs(below - all / 2)).toBeLessThan(4.5 * Math.sqrt(all / 4))
  })

  it('follows the occupancy rule of three states', () => {
    const [off, on] = twoRates(10, 10, 2000).states
    const model: EmitterModel = {
      ...twoRates(10, 10, 2000),
      states: [
        { ...off, next: [0, 1, 3] },
        { ...on, name: 'grey', signalCps: 4000, next: [1, 0, 0] },
        { ...on, next: [1, 1, 0] },
      ],
    }
    const { states } = telegraphPath(model, 'grey')
    let [toGrey, toOn] = [0, 0]
    for (let i = 1; i < states.length; i++) {
      if (states[i - 1] === 1) expect(states[i]).toBe(0)
      if (states[i - 1] !== 0) continue
      if (states[i] === 1) toGrey++
      else toOn++
    }
    const n = toGrey + toOn
    expect(n).toBeGreaterThan(3000)
    // 4.5 standard errors of a share of 1/4: false alarm 7e-6.
    expect(Math.abs(toGrey - n / 4)).toBeLessThan(4.5 * Math.sqrt((3 / 16) * n))
  })

  it('refuses a model with what was expected and received', () => {
    expect(() => telegraphPath({ ...POWERS, durationSeconds: 0 }, 'x')).toThrow(
      'The record length must be above 0 s; received 0 s.',
    )
    expect(() =>
      telegraphPath({ ...POWERS, baseline: { cps: 5, drift: [{ kind: 'linear', perSecond: -1 }] } }, 'x'),
    ).toThrow(/baseline falls to -/)
    const [off, on] = POWERS.states
    expect(() =>
      telegraphPath(
        { ...POWERS, states: [off, { ...on, flicker: { relativeSd: 0.1, meanSeconds: 0 } }] },
        'x',
      ),
    ).toThrow(/State 1 \(on\) needs flicker .* received 0.1 over 0 s/)
    expect(() => telegraphPath({ ...POWERS, states: [off, { ...on, next: [1, 1] }] }, 'x')).toThrow(
      /State 1 \(on\) needs one weight per next state/,
    )
    expect(() =>
      telegraphPath(
        {
          ...POWERS,
          states: [off, { ...on, dwell: { law: 'power', parameters: {}, shortestSeconds: 0.1 } }],
        },
        'x',
      ),
    ).toThrow(/power needs alpha between .* received nothing/)
  })

  it('joins runs over missed gaps like the closed form', () => {
    for (const { k_off, k_on, resolution, apparent_mean_on } of reference.missed_events) {
      const { startSeconds, states } = telegraphPath(
        twoRates(k_on, k_off, 20_000),
        `missed ${resolution} ${k_off}`,
      )
      const runs: number[] = []
      let run = 0
      for (let i = 1; i + 1 < states.length; i++) {
        const length = startSeconds[i + 1] - startSeconds[i]
        if (states[i] === 1) run += length
        else if (length < resolution) run += run > 0 ? length : 0
        else if (run > 0) {
          runs.push(run)
          run = 0
        }
      }
      const mean = runs.reduce((sum, r) => sum + r, 0) / runs.length
      const sd = Math.sqrt(runs.reduce((sum, r) => sum + (r - mean) ** 2, 0) / runs.length)
      // Five cases at 4.5 standard errors: false alarm 3e-5 in all.
      expect(Math.abs(mean - apparent_mean_on)).toBeLessThan((4.5 * sd) / Math.sqrt(runs.length))
    }
  })

  it('sampled at equal times is the two-state chain of the closed form', () => {
    for (const { k_on, k_off, bin, P_on_on } of reference.point_sampled) {
      const { startSeconds, states } = telegraphPath(twoRates(k_on, k_off, 3000), `sampled ${bin}`)
      let stay = 0
      let [fromOn, onOn] = [0, 0]
      let previous = -1
      for (let t = 1; t < 3000; t += bin) {
        while (stay + 1 < states.length && startSeconds[stay + 1] <= t) stay++
        if (previous === 1) {
          fromOn++
          onOn += states[stay]
        }
        previous = states[stay]
      }
      // A chain's steps are independent: binomial. Three cases at 4.5 standard errors: false alarm 2e-5.
      expect(Math.abs(onOn - fromOn * P_on_on)).toBeLessThan(
        4.5 * Math.sqrt(fromOn * P_on_on * (1 - P_on_on)),
      )
    }
  })
})

describe('truthOf', () => {
  it('reports dwells that add up to the record, the last one cut', () => {
    const path = telegraphPath(POWERS, 'truth')
    const { dwells, onFraction, stateCps } = truthOf(POWERS, path, null)
    const n = dwells.state.length
    expect(dwells.durationSeconds.reduce((sum, d) => sum + d, 0)).toBeCloseTo(600, 8)
    expect([...dwells.endSeen.subarray(0, n - 1)].every((seen) => seen === 1)).toBe(true)
    expect(dwells.endSeen[n - 1]).toBe(0)
    const on = dwells.durationSeconds.reduce((sum, d, i) => sum + d * dwells.state[i], 0)
    expect(onFraction).toBeCloseTo(on / 600, 12)
    expect([...stateCps]).toEqual([1000, 10_000])
  })

  it('joins grey and on, and marks the end by bleaching as unseen', () => {
    const [off, on] = twoRates(2, 2, 100).states
    const model: EmitterModel = {
      ...twoRates(2, 2, 100),
      bleachSeconds: 40,
      states: [
        { ...off, next: [0, 1, 1] },
        { ...on, name: 'grey', signalCps: 4000, next: [1, 0, 1] },
        { ...on, next: [1, 1, 0] },
      ],
    }
    const path = telegraphPath(model, 'bleach')
    expect(path.bleachedAtSeconds).toBe(40)
    expect(path.states.at(-1)).toBe(0)
    const truth = truthOf(model, path, null)
    const { dwells } = truth
    const n = dwells.state.length
    for (let i = 1; i < n; i++) expect(dwells.state[i]).not.toBe(dwells.state[i - 1])
    expect(dwells.endSeen[n - 1]).toBe(0)
    expect(dwells.startSeconds[n - 1]).toBeLessThanOrEqual(40)
    if (dwells.startSeconds[n - 1] === 40) expect(dwells.endSeen[n - 2]).toBe(0)
    expect(truth.onFractionBeforeBleaching).toBeCloseTo(truth.onFraction * 2.5, 12)
  })
})
