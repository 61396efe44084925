import { seededRandom, splitSeed } from '../numeric/seeded-random.ts'
import { exponentialVariate, gammaVariate } from '../numeric/variates.ts'
import type { EmitterModel } from './emitter-model.ts'
import { drivenSpans } from './gate-of-model.ts'
import type { TelegraphPath } from './telegraph-path.ts'

/** Pieces of constant signal and leak that cover the record: piece i is [edges[i], edges[i + 1]). */
export interface RatePieces {
  readonly edges: Float64Array
  /** Signal above the baseline before signal drift, counts per second. */
  readonly signalCps: Float64Array
  readonly leakCps: Float64Array
}

/** Cuts a path at switches, flicker steps and gate edges. */
export function ratePieces(model: EmitterModel, path: TelegraphPath, seed: string): RatePieces {
  const random = seededRandom(splitSeed(seed, 'flicker'))
  const spans = drivenSpans(model.gate, model.durationSeconds)
  const leak = model.gate?.leakCps ?? 0
  const edges: number[] = []
  const signalCps: number[] = []
  const leakCps: number[] = []
  let span = 0
  // Adds [from, to) of one signal, cut where the leak goes on or off.
  const add = (from: number, to: number, signal: number): void => {
    let t = from
    while (t < to) {
      while (span < spans.length && spans[span + 1] <= t) span += 2
      const driven = leak > 0 && span < spans.length && spans[span] <= t
      let stop = to
      if (leak > 0 && span < spans.length) stop = Math.min(to, driven ? spans[span + 1] : spans[span])
      edges.push(t)
      signalCps.push(signal)
      leakCps.push(driven ? leak : 0)
      t = stop
    }
  }
  for (let i = 0; i < path.states.length; i++) {
    const state = model.states[path.states[i]]
    const { signalCps: signal, flicker } = state
    const end = i + 1 < path.states.length ? path.startSeconds[i + 1] : path.durationSeconds
    let t = path.startSeconds[i]
    if (flicker === null || !(flicker.relativeSd > 0) || signal === 0) {
      add(t, end, signal)
      continue
    }
    const shape = 1 / flicker.relativeSd ** 2
    while (t < end) {
      const until = Math.min(end, t + exponentialVariate(random, flicker.meanSeconds))
      add(t, until, (signal * gammaVariate(random, shape)) / shape)
      t = until
    }
  }
  edges.push(path.durationSeconds)
  return {
    edges: Float64Array.from(edges),
    signalCps: Float64Array.from(signalCps),
    leakCps: Float64Array.from(leakCps),
  }
}
