import { seededRandom, splitSeed } from '../numeric/seeded-random.ts'
import type { Gate } from '../photons/gate.ts'
import type { PhotonStream } from '../photons/photon-stream.ts'
import { photonStreamBuilder } from '../photons/stream-builder.ts'
import { detector } from './detector.ts'
import { driftOf } from './drift.ts'
import type { EmitterModel } from './emitter-model.ts'
import { gateOfModel } from './gate-of-model.ts'
import { ratePieces } from './rate-pieces.ts'
import { telegraphPath } from './telegraph-path.ts'
import { type Truth, truthOf } from './truth.ts'

const BATCH = 65_536
/** Drifting rates are bounded over slices of at most this share of the record. */
const SLICE_SHARE = 1 / 2000

export interface SimulatedRecord {
  readonly stream: PhotonStream
  readonly gate: Gate | null
  readonly truth: Truth
}

/**
 * One record of an emitter, photon by photon, with its truth. Arrival times are exact: exponential gaps within pieces of
 * constant rate; where baseline or signal drift, gaps at an upper bound of the rate, thinned by the true rate (Lewis &
 * Shedler, Nav. Res. Logist. Q. 26, 403, 1979). The detector then loses and adds, and times are cut to whole ticks.
 *
 * Equal models and seeds give equal records; switches, flicker, photons and detector draw from separate streams of the
 * seed, and `simulateTrace` with the same seed follows the same switches. How a record starts: see `telegraphPath`.
 *
 * @throws RangeError with the sentence of `modelProblem` when the model cannot be simulated
 */
export function simulateRecord(model: EmitterModel, seed: string): SimulatedRecord {
  const path = telegraphPath(model, seed)
  const pieces = ratePieces(model, path, seed)
  const baseline = driftOf(model.baseline.cps, model.baseline.drift)
  const factor = driftOf(1, model.signalDrift)
  const still = baseline.constant && factor.constant
  const slice = still ? Number.POSITIVE_INFINITY : model.durationSeconds * SLICE_SHARE
  const builder = photonStreamBuilder(model.tickSeconds)
  const endTick = Math.round(model.durationSeconds / model.tickSeconds)
  const perSecond = 1 / model.tickSeconds
  const batch = new Float64Array(BATCH)
  let held = 0
  const counting = detector(model.detector, seededRandom(splitSeed(seed, 'detector')), (t) => {
    const tick = Math.floor(t * perSecond)
    if (tick >= endTick) return
    batch[held++] = tick
    if (held < BATCH) return
    builder.push(batch)
    held = 0
  })
  const random = seededRandom(splitSeed(seed, 'photons'))

  for (let i = 0; i < pieces.signalCps.length; i++) {
    const signal = pieces.signalCps[i]
    const leak = pieces.leakCps[i]
    const end = pieces.edges[i + 1]
    for (let from = pieces.edges[i]; from < end; ) {
      const to = Math.min(end, from + slice)
      const middle = 0.5 * (from + to)
      const level = baseline.at(middle) + leak + signal * factor.at(middle)
      const spread = still ? 0 : baseline.excursion(from, to) + signal * factor.excursion(from, to)
      const bound = level + spread
      const surely = (level - spread) / bound
      // A Poisson process forgets: restarting at each slice changes nothing.
      const gap = 1 / bound
      let t = from - Math.log(random.uniform()) * gap
      while (t < to) {
        // Only the sliver between the bounds needs the rate itself.
        if (spread === 0) counting.arrive(t)
        else {
          const u = random.uniform()
          if (u < surely || u * bound < baseline.at(t) + leak + signal * factor.at(t)) counting.arrive(t)
        }
        t -= Math.log(random.uniform()) * gap
      }
      from = to
    }
  }
  counting.finish(model.durationSeconds)
  builder.push(batch, null, held)
  return {
    stream: builder.finish({ startTick: 0, endTick }),
    gate: model.gate === null ? null : gateOfModel(model.gate, model.durationSeconds),
    truth: truthOf(model, path, {
      arrived: counting.arrived,
      lostToDeadTime: counting.lostToDeadTime,
      afterpulses: counting.afterpulses,
    }),
  }
}
