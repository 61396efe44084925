import { describe, expect, it } from 'vitest'
import type { PhotonStream } from '../../../src/core/photons/photon-stream.ts'
import { binPhotons } from '../../../src/core/photons/bin-photons.ts'
import type { EmitterModel } from '../../../src/core/simulate/emitter-model.ts'
import { simulateRecord } from '../../../src/core/simulate/simulate-record.ts'
import { simulateTrace } from '../../../src/core/simulate/simulate-trace.ts'
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'

const MODEL = twoLevelModel({
  durationSeconds: 60,
  offCps: 1000,
  onCps: 10_000,
  off: { law: 'power', parameters: { alpha: 1.6 }, shortestSeconds: 0.01 },
  on: { law: 'power-cutoff-density', parameters: { alpha: 1.5, tauSeconds: 5 }, shortestSeconds: 0.01 },
})
const GATE = {
  halfPeriodSeconds: 2,
  offsetSeconds: 0.5,
  duty: 0.25,
  guardSeconds: 0,
  leakCps: 500,
  clockErrorSeconds: 0,
}

function ticksOf(stream: PhotonStream): number[] {
  return stream.chunks.flatMap((chunk) =>
    Array.from(chunk.offsets.subarray(0, chunk.count), (offset) => chunk.baseTick + offset),
  )
}

describe('simulateRecord', () => {
  it('gives sorted ticks inside the exposure and counts that add up', () => {
    const model: EmitterModel = {
      ...MODEL,
      detector: {
        deadTimeSeconds: 5e-7,
        afterpulsing: {
          probability: 0.02,
          delay: { law: 'exponential', parameters: { tauSeconds: 1e-6 }, shortestSeconds: 5e-7 },
        },
      },
    }
    const { stream, truth } = simulateRecord(model, 'sorted')
    const ticks = ticksOf(stream)
    expect(ticks.length).toBe(stream.photons)
    for (let i = 1; i < ticks.length; i++) if (ticks[i] < ticks[i - 1]) expect.fail(`tick ${i} decreases`)
    expect(ticks[0]).toBeGreaterThanOrEqual(stream.startTick)
    expect(ticks.at(-1)).toBeLessThan(stream.endTick)
    expect(stream.endTick * stream.tickSeconds).toBeCloseTo(60, 9)
    const { arrived, lostToDeadTime, afterpulses } =
      truth.detector ?? expect.fail('a record has detector counts')
    expect(lostToDeadTime).toBeGreaterThan(0)
    expect(afterpulses).toBeGreaterThan(0)
    expect(stream.photons).toBe(arrived - lostToDeadTime + afterpulses)
  })

  it('repeats for equal seeds, differs for others, and splits its streams', () => {
    const first = simulateRecord(MODEL, 'seed')
    expect(simulateRecord(MODEL, 'seed')).toEqual(first)
    expect(simulateRecord(MODEL, 'other').stream.photons).not.toBe(first.stream.photons)
    // A detector that loses photons must not change which photons arrive, nor the switches.
    const dead = simulateRecord({ ...MODEL, detector: { deadTimeSeconds: 1e-4, afterpulsing: null } }, 'seed')
    expect(dead.truth.path).toEqual(first.truth.path)
    expect(dead.truth.detector?.arrived).toBe(first.truth.detector?.arrived)
    const all = new Set(ticksOf(first.stream))
    expect(ticksOf(dead.stream).every((tick) => all.has(tick))).toBe(true)
  })

  it('loses the dead-time share r / (1 + r tau) of a steady emitter, after ticks too', () => {
    const steady: EmitterModel = {
      ...MODEL,
      baseline: { cps: 50_000, drift: [] },
      states: MODEL.states.map((state) => ({ ...state, signalCps: 0 })),
      detector: { deadTimeSeconds: 1e-6, afterpulsing: null },
    }
    const mean = (50_000 * 60) / (1 + 0.05)
    // Renewal counts, F = (1 + r tau)^-2. 4.5 standard errors: false alarm 7e-6.
    expect(Math.abs(simulateRecord(steady, 'steady').stream.photons - mean)).toBeLessThan(
      (4.5 * Math.sqrt(mean)) / 1.05,
    )
  })

  it('folds the leak on the gate period where it should be', () => {
    const model: EmitterModel = {
      ...MODEL,
      durationSeconds: 400,
      gate: GATE,
      states: MODEL.states.map((state) => ({ ...state, signalCps: 0 })),
    }
    for (const counts of [
      binPhotons(simulateRecord(model, 'fold').stream, 0.1).counts,
      simulateTrace(model, 0.1, 'fold').trace.counts,
    ]) {
      const folded = new Float64Array(40)
      for (let i = 0; i < counts.length; i++) folded[i % 40] += counts[i]
      for (let phase = 0; phase < 40; phase++) {
        // Offset 0.5 s, reference for 3 s, driven for 1 s.
        const cycle = (((phase + 0.5) * 0.1 - 0.5 + 4) % 4) / 4
        const mean = (cycle >= 0.75 ? 1500 : 1000) * 0.1 * 100
        // 80 phases at 5 standard errors: false alarm 5e-5 in all.
        expect(Math.abs(folded[phase] - mean)).toBeLessThan(5 * Math.sqrt(mean))
      }
    }
  })

  it('shortens on-times while driven when the effect is real, and only then', () => {
    const rate = 2
    const dwell = { law: 'exponential' as const, parameters: { tauSeconds: 1 / rate }, shortestSeconds: 1e-9 }
    const base: EmitterModel = {
      ...twoLevelModel({ durationSeconds: 4000, offCps: 1, onCps: 2, off: dwell, on: dwell }),
      gate: { ...GATE, duty: 0.5, leakCps: 0 },
    }
    const [off, on] = base.states
    const effect: EmitterModel = {
      ...base,
      states: [off, { ...on, driven: { hazardFactor: 1.5, extraPerSecond: 0.5 } }],
    }
    for (const [model, expected] of [
      [base, rate],
      [effect, 1.5 * rate + 0.5],
    ] as const) {
      const { dwells } = simulateTrace(model, 10, 'effect').truth
      let [ends, atRisk] = [0, 0]
      // Driven while the time after offset 0.5 s is in the second half of each 4 s.
      for (let i = 0; i < dwells.state.length; i++) {
        if (dwells.state[i] !== 1) continue
        const start = dwells.startSeconds[i]
        const end = start + dwells.durationSeconds[i]
        if (dwells.endSeen[i] === 1 && (end + 3.5) % 4 >= 2) ends++
        for (let span = Math.floor((start + 3.5) / 4) * 4 - 1.5; span < end; span += 4)
          atRisk += Math.max(0, Math.min(end, span + 2) - Math.max(start, span))
      }
      // Ends given time at risk are Poisson for exponential dwells. 4.5 standard errors, twice: false alarm 1.4e-5.
      expect(Math.abs(ends / atRisk - expected)).toBeLessThan((4.5 * Math.sqrt(ends)) / atRisk)
      expect(ends).toBeGreaterThan(500)
    }
  })

  it('goes dark when it bleaches', () => {
    const { stream } = simulateRecord({ ...MODEL, bleachSeconds: 20 }, 'bleach')
    const { counts } = binPhotons(stream, 1)
    let dark = 0
    for (let i = 20; i < 60; i++) dark += counts[i]
    // 4.5 standard errors: false alarm 7e-6.
    expect(Math.abs(dark - 40_000)).toBeLessThan(4.5 * 200)
  })
})
