import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { baselineCounts, baselineCps } from '../../../src/core/baseline/baseline-at.ts'
import { fitBaseline } from '../../../src/core/baseline/fit-baseline.ts'
import { DEFAULT_STIFFNESS_SECONDS } from '../../../src/core/baseline/stiffness.ts'
import type { Trace } from '../../../src/core/photons/trace.ts'
import { poissonCount, runsOf, telegraph, traceOf, uniformSource } from './telegraph.ts'

const choices = (
  method: 'automatic' | 'constant' | 'drifting',
  stiffnessSeconds = DEFAULT_STIFFNESS_SECONDS,
) => ({
  method,
  stiffnessSeconds,
  excludedSeconds: [],
})

/** Background of 1 kcps that swings by half over 300 s. */
const swinging = (t: number): number => 1000 * (1 + 0.5 * Math.sin((2 * Math.PI * t) / 300))

/** The slow rival: 10th percentile of a centred window, a bin at a time by counting. */
function rollingPercentile(counts: ArrayLike<number>, windowBins: number): Float64Array {
  const half = windowBins >> 1
  const tally = new Uint32Array(4096)
  const out = new Float64Array(counts.length)
  for (let i = 0; i < Math.min(half, counts.length); i++) tally[counts[i]]++
  let size = Math.min(half, counts.length)
  for (let i = 0; i < counts.length; i++) {
    if (i + half < counts.length) {
      tally[counts[i + half]]++
      size++
    }
    if (i - half - 1 >= 0) {
      tally[counts[i - half - 1]]--
      size--
    }
    let below = 0
    let value = 0
    while (below + tally[value] < 0.1 * size) below += tally[value++]
    out[i] = value
  }
  return out
}

describe('fitBaseline on the drifting scenario', () => {
  // Background +-50 % over 300 s, T = 600 s, cutoff 100 s, 10 ms bins, thresholds half way: 20 and 8 kcps signal.
  // Seeded; one set of records was looked at. The longest on-time seen at the true baseline and threshold is the truth for what a
  // threshold can see; at 8 kcps a shot-noise split of it (probability below 1e-3 a record) would show in both.
  const cases = [20000, 8000].flatMap((signal) => [1, 2, 3, 4, 5].map((seed) => ({ signal, seed })))
  for (const method of ['drifting', 'automatic'] as const)
    it.each(cases)(`${method}: finds the truth at $signal cps, record $seed`, ({ signal, seed }) => {
      const made = telegraph({
        seconds: 600,
        binSeconds: 0.01,
        offCps: swinging,
        signalCps: signal,
        tauSeconds: 100,
        seed,
      })
      const { counts } = made.trace
      const baseline = fitBaseline(made.trace, choices(method), null)
      const fitted = baselineCounts(baseline, made.trace)
      const half = (baseline.onAboveCps * 0.01) / 2
      const truth = runsOf(counts.length, (i) => made.onShare[i] > 0.5)
      const found = runsOf(counts.length, (i) => counts[i] - fitted[i] >= half)
      expect(baseline.status).toBe('ok')
      expect(Math.abs(found.share - truth.share)).toBeLessThan(0.01)
      expect(Math.abs(found.longest / truth.longest - 1)).toBeLessThan(0.05)
      // A constant baseline was taken because the drift is below a tenth of the signal; the signal is known no better then.
      expect(Math.abs(baseline.onAboveCps / signal - 1)).toBeLessThan(method === 'drifting' ? 0.02 : 0.1)
    })

  it('keeps on-times that a rolling 10th percentile eats', () => {
    let eatenShare = 0
    for (const seed of [1, 2, 3, 4, 5]) {
      const made = telegraph({
        seconds: 600,
        binSeconds: 0.01,
        offCps: swinging,
        signalCps: 8000,
        tauSeconds: 100,
        seed,
      })
      const { counts } = made.trace
      const rolling = rollingPercentile(counts, 2000)
      const truth = runsOf(counts.length, (i) => made.onShare[i] > 0.5)
      const eaten = runsOf(counts.length, (i) => counts[i] - rolling[i] >= 40)
      // A window of W = 20 s leaves no on-time much longer than 0.9 W.
      if (truth.longest > 2500) expect(eaten.longest).toBeLessThan(0.75 * truth.longest)
      eatenShare += (truth.share - eaten.share) / 5
    }
    expect(eatenShare).toBeGreaterThan(0.05)
  })

  it('follows the drift within its band where there is support', () => {
    let inside = 0
    let seen = 0
    for (const seed of [1, 3, 4, 5, 6]) {
      const made = telegraph({
        seconds: 600,
        binSeconds: 0.01,
        offCps: swinging,
        signalCps: 8000,
        tauSeconds: 100,
        seed,
      })
      const baseline = fitBaseline(made.trace, choices('drifting'), null)
      baseline.rateCps.forEach((_, j) => {
        const truth = swinging(baseline.firstKnotSeconds + j * baseline.knotSeconds)
        if (baseline.supportBins[j] < 5) return
        seen++
        if (truth >= baseline.lowCps[j] && truth <= baseline.highCps[j]) inside++
      })
      const widest = Math.max(...baseline.highCps.map((high, j) => high / baseline.lowCps[j]))
      if (baseline.longestUnsupportedSeconds > 20) expect(widest).toBeGreaterThan(2)
    }
    // 95 % is meant; neighbouring knots share their errors, so the share scatters by about 1 % over 2000 knots. The 8 sd below
    // leave a false alarm well under 1e-6.
    expect(inside / seen).toBeGreaterThan(0.88)
  })
})

describe('the automatic rule', () => {
  it('takes the constant baseline when the drift is under a tenth of the signal, and says the numbers', () => {
    const steady = telegraph({
      seconds: 300,
      binSeconds: 0.01,
      offCps: () => 1000,
      signalCps: 9000,
      tauSeconds: 10,
      seed: 2,
    })
    const baseline = fitBaseline(steady.trace, choices('automatic'), null)
    expect(baseline.method).toBe('constant')
    expect(baseline.automatic).toBe(true)
    expect(baseline.reason).toMatch(
      /^Constant: the fitted baseline strays up to .* cps from its mean, less than a tenth/,
    )
    expect(new Set(baseline.rateCps).size).toBe(1)
    // Off counts of 300 s at 1 kcps: 0.6 % is more than 2 sd even if only a tenth of the record were off.
    expect(Math.abs(baselineCps(baseline, 17) / 1000 - 1)).toBeLessThan(0.02)
  })

  it('takes the moving one when it is more', () => {
    const made = telegraph({
      seconds: 600,
      binSeconds: 0.01,
      offCps: swinging,
      signalCps: 4000,
      tauSeconds: 10,
      seed: 2,
    })
    const baseline = fitBaseline(made.trace, choices('automatic'), null)
    expect(baseline.method).toBe('drifting')
    expect(baseline.reason).toMatch(/^Drifting: .* at least a tenth of the signal/)
    expect(fitBaseline(made.trace, choices('constant'), null)).toMatchObject({
      method: 'constant',
      automatic: false,
    })
  })

  it('does not take a drift for a second level when the emitter is never or hardly ever on', () => {
    const uniform = uniformSource(5)
    const dark = traceOf(
      Array.from({ length: 60000 }, (_, i) => poissonCount(uniform, swinging(i / 100) / 100)),
    )
    const baseline = fitBaseline(dark, choices('automatic'), null)
    expect(baseline).toMatchObject({ method: 'drifting', status: 'no-on-bins', onAboveCps: 0, onShare: 0 })
    const rare = traceOf(
      Array.from({ length: 60000 }, (_, i) =>
        poissonCount(uniform, swinging(i / 100) / 100 + (i % 6000 < 60 ? 40 : 0)),
      ),
    )
    const found = fitBaseline(rare, choices('automatic'), null)
    expect(found.status).toBe('ok')
    expect(Math.abs(found.onAboveCps / 4000 - 1)).toBeLessThan(0.05)
    expect(Math.abs(found.onShare - 0.01)).toBeLessThan(0.001)
  })
})

describe('records that cannot be fitted', () => {
  const uniform = uniformSource(9)
  const steady = (mean: (i: number) => number, bins: number): Trace =>
    traceOf(Array.from({ length: bins }, (_, i) => poissonCount(uniform, mean(i))))
  const methods = ['automatic', 'constant', 'drifting'] as const

  it.each(methods)('one level: %s', (method) => {
    const baseline = fitBaseline(
      steady(() => 10, 20000),
      choices(method),
      null,
    )
    expect(baseline.status).toBe('no-on-bins')
    expect(baseline.message).toMatch(/One level only, .* taken as off, but counts alone cannot tell/)
    // 2e5 counts: 1 % is 4.5 sd for the constant, and the moving one scatters by 2 % a knot.
    expect(Math.abs(baselineCps(baseline, 100) / 1000 - 1)).toBeLessThan(method === 'drifting' ? 0.12 : 0.01)
    expect(baseline.onShare).toBe(0)
  })

  it.each(methods)('never off for three bins: %s', (method) => {
    const baseline = fitBaseline(
      steady((i) => (i % 2 === 0 ? 10 : 100), 20000),
      choices(method),
      null,
    )
    expect(baseline.status).toBe('no-off-bins')
    expect(baseline.supportedShare).toBe(0)
    expect(baseline.longestUnsupportedSeconds).toBe(200)
    expect(baseline.message).toMatch(/no stretch of three off bins/)
  })

  it.each(methods)('levels too close for the bin: %s', (method) => {
    const baseline = fitBaseline(
      steady((i) => (i % 100 < 50 ? 1 : 3), 60000),
      choices(method),
      null,
    )
    expect(baseline.status).toBe('not-separable')
    expect(baseline.message).toMatch(
      /standard deviations of one bin apart; at this bin width .* Use a wider bin/,
    )
  })

  it.each(methods)('no bins, zeros, one bin, few counts: %s', (method) => {
    for (const trace of [
      traceOf([]),
      traceOf(new Uint16Array(5000)),
      traceOf([7]),
      steady(() => 0.01, 20000),
      steady((i) => (i % 100 < 50 ? 0 : 20), 2000),
      traceOf(Array.from({ length: 200 }, (_, i) => (i === 99 ? 65535 : 0))),
    ]) {
      const baseline = fitBaseline(trace, choices(method), null)
      for (const values of [baseline.rateCps, baseline.lowCps, baseline.highCps, baseline.supportBins])
        expect(values.every((v) => Number.isFinite(v) && v >= 0)).toBe(true)
      expect(baseline.rateCps.length).toBeGreaterThan(0)
      expect(baseline.message).toMatch(/\.$/)
      for (const value of [baseline.onAboveCps, baseline.onShare, baseline.supportedShare])
        expect(Number.isFinite(value) && value >= 0).toBe(true)
    }
    expect(fitBaseline(traceOf([]), choices(method), null).status).toBe('no-off-bins')
    expect(fitBaseline(traceOf(new Uint16Array(5000)), choices(method), null).status).toBe('no-on-bins')
    expect(fitBaseline(traceOf([1, 2]), choices(method), Uint8Array.from([1, 1])).message).toMatch(
      /No bin can be used/,
    )
  })

  it('does not look into unusable bins', () => {
    const clean = telegraph({
      seconds: 100,
      binSeconds: 0.01,
      offCps: () => 1000,
      signalCps: 9000,
      tauSeconds: 5,
      seed: 3,
    }).trace
    const unusable = new Uint8Array(clean.counts.length)
    unusable.fill(1, 2000, 3000)
    const spoilt = { ...clean, counts: clean.counts.slice().fill(60000, 2000, 3000) }
    for (const method of methods)
      expect(fitBaseline(spoilt, choices(method), unusable)).toEqual(
        fitBaseline(clean, choices(method), unusable),
      )
  })

  it('is right for a dim emitter, 3 on 1 kcps at 10 ms, without drift', () => {
    const made = telegraph({
      seconds: 600,
      binSeconds: 0.01,
      offCps: () => 1000,
      signalCps: 2000,
      tauSeconds: 20,
      seed: 4,
    })
    const baseline = fitBaseline(made.trace, choices('automatic'), null)
    expect(baseline).toMatchObject({ method: 'constant', status: 'ok' })
    // Taking only bins more likely off than on cuts the upper tail of the off counts, 1 to 2 % of the mean here.
    expect(Math.abs(baselineCps(baseline, 0) / 1000 - 1)).toBeLessThan(0.03)
    expect(Math.abs(baseline.onAboveCps / 2000 - 1)).toBeLessThan(0.03)
  })

  it('returns finite numbers for any counts, gaps and stiffness', () => {
    fc.assert(
      fc.property(
        fc.array(fc.oneof(fc.nat(3), fc.nat(200), fc.nat(65535)), { maxLength: 400 }),
        fc.constantFrom(...methods),
        fc.constantFrom(0.01, 1, 4.65, 1e4, Number.POSITIVE_INFINITY),
        fc.integer({ min: 1, max: 7 }),
        (counts, method, stiffnessSeconds, every) => {
          const unusable = every === 1 ? null : Uint8Array.from(counts, (_, i) => (i % every === 0 ? 1 : 0))
          const baseline = fitBaseline(traceOf(counts), choices(method, stiffnessSeconds), unusable)
          for (const values of [baseline.rateCps, baseline.lowCps, baseline.highCps, baseline.supportBins])
            expect(values.every((v) => Number.isFinite(v) && v >= 0)).toBe(true)
          expect(baseline.rateCps.every((v, j) => v >= baseline.lowCps[j] && v <= baseline.highCps[j])).toBe(
            true,
          )
          expect(baseline.onAboveCps).toBeGreaterThanOrEqual(0)
          expect(baseline.onShare).toBeGreaterThanOrEqual(0)
          expect(baseline.onShare).toBeLessThanOrEqual(1)
        },
      ),
      { seed: 71, numRuns: 300 },
    )
  })
})

describe('limits', () => {
  it('is the constant baseline at infinite stiffness, within the error of its slope', () => {
    const made = telegraph({
      seconds: 300,
      binSeconds: 0.01,
      offCps: () => 1000,
      signalCps: 9000,
      tauSeconds: 5,
      seed: 8,
    })
    const constant = fitBaseline(made.trace, choices('constant'), null)
    const line = fitBaseline(made.trace, choices('drifting', Number.POSITIVE_INFINITY), null)
    // Over 1e5 off counts: level known to 0.3 %, ends of a fitted line to twice that; 2 % is 3 sd and more. Seeded.
    for (const rate of line.rateCps) expect(Math.abs(rate / constant.rateCps[0] - 1)).toBeLessThan(0.02)
    expect(Math.abs(line.onAboveCps / constant.onAboveCps - 1)).toBeLessThan(1e-3)
  })

  it('scales with the unit of time', () => {
    const made = telegraph({
      seconds: 120,
      binSeconds: 0.01,
      offCps: swinging,
      signalCps: 4000,
      tauSeconds: 5,
      seed: 9,
    })
    const slower = { ...made.trace, binSeconds: 0.08 }
    const one = fitBaseline(made.trace, choices('automatic', 4), null)
    const eight = fitBaseline(slower, choices('automatic', 32), null)
    expect(eight.knotSeconds).toBeCloseTo(8 * one.knotSeconds, 12)
    one.rateCps.forEach((rate, j) => expect((8 * eight.rateCps[j]) / rate).toBeCloseTo(1, 6))
    expect(eight.supportBins).toEqual(one.supportBins)
  })
})
