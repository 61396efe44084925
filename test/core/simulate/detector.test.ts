import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { detector } from '../../../src/core/simulate/detector.ts'
import type { DetectorModel } from '../../../src/core/simulate/emitter-model.ts'

function run(model: DetectorModel, cps: number, seconds: number, seed: string) {
  const photons = seededRandom(`${seed} photons`)
  const times: number[] = []
  const counting = detector(model, seededRandom(seed), (t) => times.push(t))
  for (let t = -Math.log(photons.uniform()) / cps; t < seconds; t -= Math.log(photons.uniform()) / cps)
    counting.arrive(t)
  counting.finish(seconds)
  return { times, counting }
}

function shortestGap(times: readonly number[]): number {
  let gap = Number.POSITIVE_INFINITY
  for (let i = 1; i < times.length; i++) gap = Math.min(gap, times[i] - times[i - 1])
  return gap
}

function fano(times: readonly number[], seconds: number, bins: number): number {
  const counts = new Float64Array(bins)
  for (const t of times) counts[Math.floor((t / seconds) * bins)]++
  const mean = times.length / bins
  let squares = 0
  for (const k of counts) squares += (k - mean) ** 2
  return squares / (bins - 1) / mean
}

describe('detector', () => {
  it('passes everything when it is ideal', () => {
    const { times, counting } = run({ deadTimeSeconds: 0, afterpulsing: null }, 1e5, 1, 'ideal')
    expect(times.length).toBe(counting.arrived)
    expect([counting.lostToDeadTime, counting.afterpulses]).toEqual([0, 0])
  })

  it('loses to dead time at the non-paralysable rate r / (1 + r tau)', () => {
    const [r, tau, seconds] = [2e5, 2e-6, 2]
    const { times, counting } = run({ deadTimeSeconds: tau, afterpulsing: null }, r, seconds, 'dead')
    expect(times.length + counting.lostToDeadTime).toBe(counting.arrived)
    expect(shortestGap(times)).toBeGreaterThanOrEqual(tau * (1 - 1e-9))
    // Renewal counts: variance mean x (1 + r tau)^-2. 4.5 standard errors: false alarm 7e-6.
    const mean = (r * seconds) / (1 + r * tau)
    expect(Math.abs(times.length - mean)).toBeLessThan((4.5 * Math.sqrt(mean)) / (1 + r * tau))
    const bins = 20_000
    const f = fano(times, seconds, bins)
    // SD of F over N bins is F sqrt(2 / N); bins of 14 detections: edge effects of order tau / bin are below it.
    const expected = (1 + r * tau) ** -2
    expect(Math.abs(f - expected)).toBeLessThan(4.5 * expected * Math.sqrt(2 / bins) + 0.02)
  })

  it('bunches by afterpulses to F = (1 + p) / (1 - p), about 1 + 2 p', () => {
    const p = 0.03
    const model: DetectorModel = {
      deadTimeSeconds: 0,
      afterpulsing: {
        probability: p,
        delay: { law: 'exponential', parameters: { tauSeconds: 1e-7 }, shortestSeconds: 1e-9 },
      },
    }
    const seconds = 4
    const { times, counting } = run(model, 2e5, seconds, 'afterpulsing')
    expect(shortestGap(times)).toBeGreaterThanOrEqual(0)
    expect(times.length).toBe(counting.arrived + counting.afterpulses)
    // Afterpulses per photon p / (1 - p); counts of clusters: 4.5 standard errors, false alarm 7e-6.
    const mean = (counting.arrived * p) / (1 - p)
    expect(Math.abs(counting.afterpulses - mean)).toBeLessThan(4.5 * Math.sqrt(mean * 1.1))
    const bins = 40_000
    const f = fano(times, seconds, bins)
    const expected = (1 + p) / (1 - p)
    expect(expected).toBeCloseTo(1 + 2 * p, 2)
    expect(Math.abs(f - expected)).toBeLessThan(4.5 * expected * Math.sqrt((2 + 1 / 20) / bins))
  })

  it('keeps time order when delays outlast the next photons', () => {
    const model: DetectorModel = {
      deadTimeSeconds: 1e-6,
      afterpulsing: {
        probability: 0.4,
        delay: { law: 'power', parameters: { alpha: 1.5 }, shortestSeconds: 1e-6 },
      },
    }
    const { times, counting } = run(model, 1e5, 1, 'long delays')
    expect(shortestGap(times)).toBeGreaterThanOrEqual(0)
    expect(times.length).toBe(counting.arrived - counting.lostToDeadTime + counting.afterpulses)
  })
})
