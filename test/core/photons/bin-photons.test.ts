import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { AFTER_END, BEFORE_START, binPhotons, PARTIAL_BIN } from '../../../src/core/photons/bin-photons.ts'
import type { PhotonStream } from '../../../src/core/photons/photon-stream.ts'
import { photonStreamBuilder } from '../../../src/core/photons/stream-builder.ts'

function streamOf(
  ticks: readonly number[],
  tickSeconds: number,
  startTick: number,
  endTick: number,
): PhotonStream {
  const builder = photonStreamBuilder(tickSeconds)
  builder.push([...ticks].sort((a, b) => a - b))
  return builder.finish({ startTick, endTick })
}

const sum = (values: ArrayLike<number>): number => Array.from(values).reduce((a, b) => a + b, 0)
const droppedIn = (dropped: Readonly<Record<string, number>>): number => sum(Object.values(dropped))

/** The obvious way, in whole numbers: bin of tick t is (t - start) * numerator / denominator, rounded down. */
function slowBins(
  ticks: readonly number[],
  start: number,
  end: number,
  numerator: bigint,
  denominator: bigint,
): number[] {
  const bins = Number((BigInt(end - start) * denominator) / numerator)
  const counts = Array.from({ length: bins }, () => 0)
  for (const t of ticks) {
    if (t < start || t >= end) continue
    const k = Number((BigInt(t - start) * denominator) / numerator)
    if (k < bins) counts[k]++
  }
  return counts
}

const ticksAnywhere = fc.array(
  fc.oneof(fc.integer({ min: 0, max: 5000 }), fc.integer({ min: 0, max: 2 ** 34 })),
  {
    maxLength: 400,
  },
)

describe('binPhotons', () => {
  it('equals whole-number arithmetic for bins of whole ticks, sparse and dense, over chunk breaks', () => {
    fc.assert(
      fc.property(
        ticksAnywhere,
        fc.integer({ min: 0, max: 3000 }),
        fc.integer({ min: 0, max: 2 ** 34 }),
        fc.oneof(fc.integer({ min: 100000, max: 2 ** 33 }), fc.constant(2 ** 31), fc.constant(2 ** 32 - 1)),
        (ticks, start, span, bin) => {
          const stream = streamOf(ticks, 1, start, start + span)
          const trace = binPhotons(stream, bin)
          expect(Array.from(trace.counts)).toEqual(slowBins(ticks, start, start + span, BigInt(bin), 1n))
          expect(sum(trace.counts) + droppedIn(trace.dropped)).toBe(stream.photons)
        },
      ),
      { seed: 11, numRuns: 300 },
    )
  })

  it('equals whole-number arithmetic for small bins of whole ticks', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 3000 }), { maxLength: 2000 }),
        fc.integer({ min: 1, max: 700 }),
        fc.integer({ min: 0, max: 100 }),
        (ticks, bin, start) => {
          const trace = binPhotons(streamOf(ticks, 1e-6, start, 3001), bin * 1e-6)
          expect(Array.from(trace.counts)).toEqual(slowBins(ticks, start, 3001, BigInt(bin), 1n))
          expect(trace.startSeconds).toBe(start * 1e-6)
        },
      ),
      { seed: 12, numRuns: 300 },
    )
  })

  it('equals whole-number arithmetic for bins of broken ticks', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 4000 }), { maxLength: 1500 }),
        fc.integer({ min: 3, max: 5000 }),
        fc.constantFrom(4n, 8n, 16n),
        (ticks, numerator, denominator) => {
          // Quarters, eighths and sixteenths are exact in binary, so rounding plays no part.
          const trace = binPhotons(streamOf(ticks, 1, 0, 4001), numerator / Number(denominator))
          expect(Array.from(trace.counts)).toEqual(slowBins(ticks, 0, 4001, BigInt(numerator), denominator))
        },
      ),
      { seed: 13, numRuns: 300 },
    )
  })

  it('places photons on bin edges in the later bin, at ticks far from zero', () => {
    const far = 2 ** 52 - 2 ** 33
    const edges = [0, 999999, 1000000, 1999999, 2000000, 2 ** 32, 4295000000].map((t) => far + t)
    const trace = binPhotons(streamOf(edges, 1, far, far + 4296000000), 1000000)
    expect(trace.counts.length).toBe(4296)
    expect(Array.from(trace.counts.subarray(0, 3))).toEqual([2, 2, 1])
    expect(trace.counts[4294]).toBe(1)
    expect(trace.counts[4295]).toBe(1)
  })

  it('takes 10 ms of 12.5 ns and 100 ns ticks as whole although the quotients are not representable', () => {
    for (const tick of [1.25e-8, 1e-7, 1 / 3e7]) {
      const perBin = Math.round(0.01 / tick)
      const ticks = Array.from({ length: 2000 }, (_, k) => k * perBin)
      const trace = binPhotons(streamOf(ticks, tick, 0, 2000 * perBin), 0.01)
      expect(trace.counts.length).toBe(2000)
      expect(trace.counts.every((c) => c === 1)).toBe(true)
    }
  })

  it('counts what it does not keep, by cause, on top of what the stream had dropped', () => {
    const stream = { ...streamOf([0, 5, 10, 29, 30, 34, 40], 1, 5, 36), dropped: { 'overflow marker': 3 } }
    const trace = binPhotons(stream, 10)
    expect(Array.from(trace.counts)).toEqual([2, 0, 3])
    expect(trace.dropped).toEqual({ 'overflow marker': 3, [BEFORE_START]: 1, [AFTER_END]: 1 })
    expect(binPhotons(stream, 20).dropped[PARTIAL_BIN]).toBe(3)
  })

  it('keeps 16 bits until a count needs more', () => {
    const many = (n: number) =>
      binPhotons(
        streamOf(
          Array.from({ length: n }, () => 3),
          1,
          0,
          10,
        ),
        10,
      ).counts
    expect(many(65535)).toBeInstanceOf(Uint16Array)
    expect(many(65536)).toBeInstanceOf(Uint32Array)
    expect(many(65536)[0]).toBe(65536)
  })

  it('makes an empty trace of an empty or too short record, and refuses a bin that is none', () => {
    expect(binPhotons(streamOf([], 1, 0, 100), 10).counts.length).toBe(10)
    expect(binPhotons(streamOf([], 1, 0, 0), 10).counts.length).toBe(0)
    expect(binPhotons(streamOf([3], 1, 0, 9), 10).dropped).toEqual({ [PARTIAL_BIN]: 1 })
    for (const bin of [0, -1, Number.NaN, Number.POSITIVE_INFINITY])
      expect(() => binPhotons(streamOf([3], 1, 0, 9), bin)).toThrow(
        /Expected a bin width above 0 s, received/,
      )
    expect(() => binPhotons(streamOf([3], 1, 0, 2 ** 40), 1)).toThrow(/Choose a wider bin/)
  })
})
