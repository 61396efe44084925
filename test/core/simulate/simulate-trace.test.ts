import { describe, expect, it } from 'vitest'
import { chiSquareQuantile } from '../../../src/core/numeric/chi-square.ts'
import { binPhotons } from '../../../src/core/photons/bin-photons.ts'
import { driftOf } from '../../../src/core/simulate/drift.ts'
import type { DurationModel, EmitterModel } from '../../../src/core/simulate/emitter-model.ts'
import { simulateRecord } from '../../../src/core/simulate/simulate-record.ts'
import { simulateTrace } from '../../../src/core/simulate/simulate-trace.ts'
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'
import reference from '../../reference/telegraph-counts.json' with { type: 'json' }

const exponential = (perSecond: number): DurationModel => ({
  law: 'exponential',
  parameters: { tauSeconds: 1 / perSecond },
  shortestSeconds: 1e-9,
})
const twoRates = (
  levels: { offCps: number; onCps: number; leaveOff: number; leaveOn: number },
  durationSeconds: number,
): EmitterModel =>
  twoLevelModel({
    durationSeconds,
    offCps: levels.offCps,
    onCps: levels.onCps,
    off: exponential(levels.leaveOff),
    on: exponential(levels.leaveOn),
  })

/** Mean and standard error of var / mean over independent records, each centred on the known mean. */
function fano(model: EmitterModel, binSeconds: number, mean: number, records: number, label: string) {
  const values: number[] = []
  for (let r = 0; r < records; r++) {
    const { counts } = simulateTrace(model, binSeconds, `${label} ${r}`).trace
    let squares = 0
    for (const k of counts) squares += (k - mean) ** 2
    values.push(squares / counts.length / mean)
  }
  const average = values.reduce((sum, f) => sum + f, 0) / records
  const sd = Math.sqrt(values.reduce((sum, f) => sum + (f - average) ** 2, 0) / (records - 1))
  return { average, se: sd / Math.sqrt(records) }
}

describe('simulateTrace', () => {
  it('has the Fano factor of two-state exponential switching', () => {
    // 1 and 20 kcps, 3 per s to on, 5 per s to off. F - 1 = 2 A^2 p (1 - p) tau / I x [1 - (1 - e^-x) / x].
    const model = twoRates({ offCps: 1000, onCps: 20_000, leaveOff: 3, leaveOn: 5 }, 400)
    const cases = [
      [0.01, 101.4],
      [0.05, 457.7],
      [0.2, 1305],
      [1, 2278],
    ]
    for (const [bin, excess] of cases) {
      const { average, se } = fano(model, bin, 8125 * bin, 30, `fano ${bin}`)
      // Student t with 29 degrees of freedom beyond 5: 2.5e-5, four cases: false alarm 1e-4.
      expect(Math.abs(average - 1 - excess)).toBeLessThan(5 * se + 0.0005 * excess)
      expect(se).toBeLessThan(0.03 * excess)
    }
  })

  it('has the Mandel Q of the shared reference values', () => {
    for (const row of reference.telegraph_Q) {
      const bin = Number(row.T)
      // Bins of 0.1 ms would need long records for a sharp test, bins of 10 s few of them.
      if (bin < 0.01 || bin > 1) continue
      const levels = {
        offCps: row.background_rate,
        onCps: row.background_rate + row.I_on_minus_off,
        leaveOff: row.k_on,
        leaveOn: row.k_off,
      }
      const { average, se } = fano(
        twoRates(levels, 600),
        bin,
        row.mean,
        24,
        `Q ${row.T} ${row.background_rate}`,
      )
      // Student t with 23 degrees of freedom beyond 5.2: 3e-5, nine cases: false alarm 3e-4.
      expect(Math.abs(average - row.fano)).toBeLessThan(5.2 * se)
      expect(se).toBeLessThan(0.06 * row.fano)
    }
  })

  it('has the count distribution of a two-state Markov-modulated Poisson process', () => {
    const { I_on, I_off, k_on, k_off, T, pmf_0_to_20 } = reference.mmpp_count_pmf
    const model = twoRates({ offCps: I_off, onCps: I_on, leaveOff: k_on, leaveOn: k_off }, 30_000)
    const { counts } = simulateTrace(model, T, 'mmpp').trace
    const cells = 13
    const observed = new Float64Array(cells)
    let n = 0
    // Every tenth bin: 4.5 s between them at a correlation time of 1/3 s, as good as independent.
    for (let i = 10; i < counts.length; i += 10) {
      observed[Math.min(cells - 1, counts[i])]++
      n++
    }
    let chi = 0
    let rest = 1
    for (let k = 0; k < cells; k++) {
      const share = k < cells - 1 ? pmf_0_to_20[k] : rest
      rest -= share
      chi += (observed[k] - n * share) ** 2 / (n * share)
    }
    // False alarm 1e-5.
    expect(chi).toBeLessThan(chiSquareQuantile(1 - 1e-5, cells - 1))
  })

  it('agrees with photons binned: the same switches, the same law of counts', () => {
    const model: EmitterModel = {
      ...twoRates({ offCps: 1000, onCps: 9000, leaveOff: 2, leaveOn: 2 }, 200),
      baseline: {
        cps: 1000,
        drift: [{ kind: 'sinusoid', amplitude: 500, periodSeconds: 60, zeroSeconds: 3 }],
      },
      signalDrift: [{ kind: 'linear', perSecond: -0.001 }],
      gate: {
        halfPeriodSeconds: 3.7,
        offsetSeconds: 1.1,
        duty: 0.4,
        guardSeconds: 0,
        leakCps: 400,
        clockErrorSeconds: 0,
      },
    }
    const fast = simulateTrace(model, 0.02, 'pair')
    const slow = simulateRecord(model, 'pair')
    expect(slow.truth.path).toEqual(fast.truth.path)
    expect(slow.gate).toEqual(fast.gate)
    const binned = binPhotons(slow.stream, 0.02)
    expect(binned.counts.length).toBe(fast.trace.counts.length)
    // Given the switches both counts are Poisson of one mean, so their difference d has variance a + b on average:
    // sum d^2 / sum (a + b) is 1, and the mean of d is 0. 4.5 standard errors each: false alarm 2e-5.
    let [sum, squares, total] = [0, 0, 0]
    const n = binned.counts.length
    for (let i = 0; i < n; i++) {
      const d = binned.counts[i] - fast.trace.counts[i]
      sum += d
      squares += d * d
      total += binned.counts[i] + fast.trace.counts[i]
    }
    expect(Math.abs(sum)).toBeLessThan(4.5 * Math.sqrt(total))
    // Variance of d^2 is about 2 (a + b)^2; bins of up to 2 x 200 counts.
    expect(Math.abs(squares / total - 1)).toBeLessThan((4.5 * Math.sqrt(2 * n) * 1.7) / n)
  })

  it('puts the expected counts of a still emitter where drift and leak say', () => {
    // No signal: the rate is known at every time.
    const base = twoRates({ offCps: 2000, onCps: 2000, leaveOff: 1, leaveOn: 1 }, 400)
    const drift = [
      { kind: 'sinusoid' as const, amplitude: 800, periodSeconds: 70, zeroSeconds: 5 },
      { kind: 'exponential' as const, amplitude: 900, tauSeconds: 40 },
      { kind: 'knots' as const, seconds: [50, 100, 260], values: [0, 1200, -300] },
    ]
    const model: EmitterModel = { ...base, baseline: { cps: 2000, drift } }
    const expected = driftOf(2000, drift)
    for (const counts of [
      simulateTrace(model, 1, 'still').trace.counts,
      binPhotons(simulateRecord(model, 'still').stream, 1).counts,
    ]) {
      let chi = 0
      for (let i = 0; i < 400; i++) {
        const mean = expected.integral(i, i + 1)
        chi += (counts[i] - mean) ** 2 / mean
      }
      // Both tails: false alarm 2e-5 each.
      expect(chi).toBeLessThan(chiSquareQuantile(1 - 1e-5, 400))
      expect(chi).toBeGreaterThan(chiSquareQuantile(1e-5, 400))
    }
  })

  it('has over-dispersed counts under flicker', () => {
    const base = twoRates({ offCps: 0, onCps: 10_000, leaveOff: 1, leaveOn: 1 }, 400)
    const [off, on] = base.states
    const flicker = { relativeSd: 0.2, meanSeconds: 0.05 }
    // Both states alike: one level that only flickers.
    const model: EmitterModel = {
      ...base,
      states: [
        { ...off, signalCps: 10_000, flicker },
        { ...on, flicker },
      ],
    }
    // Exponential memory of 0.05 s: F - 1 = 2 r^2 I tau [1 - (1 - e^-x) / x], x = bin / tau. Switches cut memory a
    // little: rate 20 + 1 per s.
    const tau = 1 / 21
    const x = 0.1 / tau
    const excess = 2 * 0.04 * 10_000 * tau * (1 - (1 - Math.exp(-x)) / x)
    const { average, se } = fano(model, 0.1, 1000, 20, 'flicker')
    // Student t with 19 degrees of freedom beyond 5.5: false alarm 3e-5.
    expect(Math.abs(average - 1 - excess)).toBeLessThan(5.5 * se)
    expect(se).toBeLessThan(0.05 * excess)
  })

  it('leaves out the last, partial bin and refuses a bin of 0', () => {
    const model = twoRates({ offCps: 100, onCps: 200, leaveOff: 1, leaveOn: 1 }, 1.05)
    expect(simulateTrace(model, 0.1, 'x').trace.counts.length).toBe(10)
    expect(simulateTrace({ ...model, durationSeconds: 600 }, 0.01, 'x').trace.counts.length).toBe(60_000)
    expect(() => simulateTrace(model, 0, 'x')).toThrow('The bin must be above 0 s; received 0 s.')
  })
})
