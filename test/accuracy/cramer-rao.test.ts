import { describe, expect, it } from 'vitest'
import { cramerRao, informationTable } from './cramer-rao.ts'

/** n dwells of 30 bins, complete, all starting at the beginning of the record. */
function manyDwells(n: number) {
  return {
    rows: n,
    gate: 'all' as const,
    binSeconds: 0.01,
    startSeconds: new Float64Array(n),
    durationBins: new Uint32Array(n).fill(30),
    state: new Uint8Array(n).fill(1),
    gateAtStart: new Uint8Array(n),
    gateAtEnd: new Uint8Array(n),
    entryAgeBins: new Uint32Array(n),
    censoring: new Uint8Array(n),
    spuriousProbability: new Float32Array(n),
  }
}

describe('cramerRao', () => {
  it('is a / sqrt(n (1 - S)) for a power law cut at the end of the record', () => {
    const bins = 4000
    const truth = { law: 'power' as const, parameters: { alpha: 1.5 }, shortestSeconds: 0.001 }
    const table = informationTable(truth, 0.01, 0.5, 20, bins)
    // 20 bins are reached from 19.5 on the average; the information of a cut exponential in ln t.
    const expected = 0.5 / Math.sqrt(100 * (1 - (bins / 19.5) ** -0.5))
    const [bound] = cramerRao(table, manyDwells(100), 1, bins) ?? expect.fail('there is information')
    // Rounding to bins costs a little: less than 2 % at 20 bins.
    expect(bound / expected).toBeGreaterThan(0.995)
    expect(bound / expected).toBeLessThan(1.02)
  })

  it('is the covariance of (ln t, t) for a density-form cutoff: 1.57 and 6.3 at tau = 50 shortest dwells', () => {
    const tau = 50 * 0.195
    const truth = {
      law: 'power-cutoff-density' as const,
      parameters: { alpha: 1.5, tauSeconds: tau },
      shortestSeconds: 0.001,
    }
    const table = informationTable(truth, 0.01, 0.5, 20, 40_000)
    const [alpha, kappa] = cramerRao(table, manyDwells(400), 1, 40_000) ?? expect.fail('there is information')
    // Two digits from a quadrature of the covariance in ln t: 1 % from rounding, 1 % from bins.
    expect(Math.abs((alpha * 20) / 1.57 - 1)).toBeLessThan(0.02)
    expect(Math.abs((kappa * tau * 20) / 6.3 - 1)).toBeLessThan(0.02)
  })

  it('is null without a dwell that a fit can use', () => {
    const truth = { law: 'power' as const, parameters: { alpha: 1.5 }, shortestSeconds: 0.001 }
    expect(cramerRao(informationTable(truth, 0.01, 0.5, 40, 100), manyDwells(5), 1, 100)).toBeNull()
  })
})
