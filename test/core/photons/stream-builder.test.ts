import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { PhotonStream } from '../../../src/core/photons/photon-stream.ts'
import { photonStreamBuilder } from '../../../src/core/photons/stream-builder.ts'

function ticksOf(stream: PhotonStream): number[] {
  return stream.chunks.flatMap(({ baseTick, offsets, count }) =>
    Array.from(offsets.subarray(0, count), (o) => baseTick + o),
  )
}

describe('photonStreamBuilder', () => {
  it('gives back the ticks and channels it was given, however they were split', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.array(fc.oneof(fc.nat(1000), fc.nat(2 ** 31 - 1), fc.constant(2 ** 32)), { maxLength: 20 }),
          {
            maxLength: 8,
          },
        ),
        fc.boolean(),
        (gaps, withChannels) => {
          const builder = photonStreamBuilder(1e-9)
          const all: number[] = []
          let tick = 0
          for (const block of gaps) {
            const ticks = block.map((gap) => (tick += gap))
            all.push(...ticks)
            expect(builder.push(ticks, withChannels ? ticks.map((t) => t % 4) : null)).toBeNull()
          }
          const stream = builder.finish()
          expect(ticksOf(stream)).toEqual(all)
          expect(stream.photons).toBe(all.length)
          expect(stream.startTick).toBe(all[0] ?? 0)
          expect(stream.endTick).toBe(all.length === 0 ? 0 : (all.at(-1) as number) + 1)
          for (const { baseTick, offsets, count, channels } of stream.chunks) {
            expect(offsets[0]).toBe(0)
            expect(offsets.length).toBe(count)
            if (withChannels)
              expect(Array.from(channels ?? [])).toEqual(Array.from(offsets, (o) => (baseTick + o) % 4))
            else expect(channels).toBeNull()
          }
        },
      ),
      { seed: 21, numRuns: 200 },
    )
  })

  it('fills slab after slab, and carries no empty storage at the end', () => {
    const builder = photonStreamBuilder(1e-7)
    const n = 2 ** 20 + 1234
    builder.push(Float64Array.from({ length: n }, (_, i) => i * 5000))
    const stream = builder.finish({ startTick: 0, endTick: n * 5000, dropped: { marker: 2 } })
    const buffers = new Set(stream.chunks.map((c) => c.offsets.buffer))
    expect([...buffers].reduce((bytes, b) => bytes + b.byteLength, 0)).toBe(4 * n)
    expect(ticksOf(stream).every((t, i) => t === i * 5000)).toBe(true)
    expect(stream.dropped).toEqual({ marker: 2 })
  })

  it('stops at the first tick that goes back or is no whole number, and says which', () => {
    for (const bad of [4, Number.NaN, 7.5, -1, 2 ** 53]) {
      const builder = photonStreamBuilder(1)
      expect(builder.push([1, 2, 2])).toBeNull()
      expect(builder.push([5, 6, bad, 9])).toBe(5)
      expect(builder.photons).toBe(5)
      expect(ticksOf(builder.finish())).toEqual([1, 2, 2, 5, 6])
    }
  })

  it('takes a part of a buffer, and channels for all or for none', () => {
    const builder = photonStreamBuilder(1)
    builder.push([3, 4, 99], [0, 1, 0], 2)
    expect(builder.photons).toBe(2)
    expect(() => builder.push([5])).toThrow(/for every photon of a record or for none/)
  })
})
