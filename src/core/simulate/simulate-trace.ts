import { seededRandom, splitSeed } from '../numeric/seeded-random.ts'
import { poissonVariate } from '../numeric/variates.ts'
import type { Gate } from '../photons/gate.ts'
import { fittingCounts, type Trace } from '../photons/trace.ts'
import { driftOf } from './drift.ts'
import type { EmitterModel } from './emitter-model.ts'
import { gateOfModel } from './gate-of-model.ts'
import { type RatePieces, ratePieces } from './rate-pieces.ts'
import { telegraphPath } from './telegraph-path.ts'
import { type Truth, truthOf } from './truth.ts'

export interface SimulatedTrace {
  readonly trace: Trace
  readonly gate: Gate | null
  readonly truth: Truth
}

/**
 * The binned counterpart of `simulateRecord` for studies of many records: the same switches for the same seed, counts
 * drawn from Poisson laws whose means are the exact integrals of the rate over each bin. The detector is ideal here (no
 * dead time, no afterpulsing), and truth.detector is null. A last, partial bin is left out.
 *
 * @param binSeconds bin width, s, > 0
 */
export function simulateTrace(model: EmitterModel, binSeconds: number, seed: string): SimulatedTrace {
  if (!(binSeconds > 0)) throw new RangeError(`The bin must be above 0 s; received ${binSeconds} s.`)
  const path = telegraphPath(model, seed)
  const means = binMeans(model, ratePieces(model, path, seed), binSeconds)
  const random = seededRandom(splitSeed(seed, 'counts'))
  const counts = new Uint32Array(means.length)
  for (let i = 0; i < means.length; i++) counts[i] = poissonVariate(random, means[i])
  return {
    trace: {
      kind: 'trace',
      counts: fittingCounts(counts),
      binSeconds,
      startSeconds: 0,
      coverage: null,
      dropped: {},
    },
    gate: model.gate === null ? null : gateOfModel(model.gate, model.durationSeconds),
    truth: truthOf(model, path, null),
  }
}

/** Expected counts per bin: integral of baseline + leak + signal x drift. */
function binMeans(model: EmitterModel, pieces: RatePieces, binSeconds: number): Float64Array {
  // Decimal widths and lengths: 600 / 0.01 must be 60 000 bins.
  const bins = Math.floor(model.durationSeconds / binSeconds + 1e-9)
  const means = new Float64Array(bins)
  const baseline = driftOf(model.baseline.cps, model.baseline.drift)
  const factor = driftOf(1, model.signalDrift)
  const { edges, signalCps, leakCps } = pieces
  for (let i = 0; i < bins; i++)
    means[i] = baseline.constant
      ? model.baseline.cps * binSeconds
      : baseline.integral(i * binSeconds, (i + 1) * binSeconds)
  let bin = 0
  for (let p = 0; p < signalCps.length; p++) {
    let from = edges[p]
    const end = Math.min(edges[p + 1], bins * binSeconds)
    while (from < end) {
      while (bin + 1 < bins && (bin + 1) * binSeconds <= from) bin++
      const to = bin + 1 < bins ? Math.min(end, (bin + 1) * binSeconds) : end
      const seconds = factor.constant ? to - from : factor.integral(from, to)
      means[bin] += leakCps[p] * (to - from) + signalCps[p] * seconds
      from = to
    }
  }
  return means
}
