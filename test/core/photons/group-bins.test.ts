import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { binPhotons, PARTIAL_BIN } from '../../../src/core/photons/bin-photons.ts'
import { groupBins } from '../../../src/core/photons/group-bins.ts'
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

describe('groupBins', () => {
  it('equals binning at the wider bin, dropped photons included', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 3000 }), { maxLength: 1000 }),
        fc.integer({ min: 1, max: 60 }),
        fc.integer({ min: 1, max: 20 }),
        (ticks, bin, factor) => {
          const stream = streamOf(ticks, 1, 0, 3001)
          const grouped = groupBins(binPhotons(stream, bin), factor)
          expect(grouped).toEqual(binPhotons(stream, bin * factor))
        },
      ),
      { seed: 14, numRuns: 200 },
    )
  })

  it('averages coverage and never rounds to full or to a gap', () => {
    const trace = {
      kind: 'trace' as const,
      counts: Uint16Array.from([1, 2, 3, 4, 5, 6, 7, 8, 9, 10]),
      binSeconds: 0.01,
      startSeconds: 1,
      coverage: Uint8Array.from([255, 255, 255, 254, 0, 0, 1, 0, 100, 255]),
      dropped: {},
    }
    const grouped = groupBins(trace, 2)
    expect(Array.from(grouped.counts)).toEqual([3, 7, 11, 15, 19])
    expect(Array.from(grouped.coverage ?? [])).toEqual([255, 254, 0, 1, 178])
    expect(grouped.binSeconds).toBe(0.02)
    expect(groupBins({ ...trace, coverage: new Uint8Array(10).fill(255) }, 3).coverage).toBeNull()
    expect(groupBins(trace, 3).dropped).toEqual({ [PARTIAL_BIN]: 10 })
    expect(groupBins(trace, 1)).toBe(trace)
    expect(() => groupBins(trace, 1.5)).toThrow(/whole number of bins/)
  })

  it('widens to 32 bits when a sum needs it', () => {
    const counts = new Uint16Array(4).fill(40000)
    const trace = {
      kind: 'trace' as const,
      counts,
      binSeconds: 1,
      startSeconds: 0,
      coverage: null,
      dropped: {},
    }
    expect(Array.from(groupBins(trace, 2).counts)).toEqual([80000, 80000])
  })
})
