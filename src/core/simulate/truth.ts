import { driftOf } from './drift.ts'
import type { EmitterModel } from './emitter-model.ts'
import type { TelegraphPath } from './telegraph-path.ts'

/** What really happened in a simulated record. */
export interface Truth {
  readonly path: TelegraphPath
  /**
   * Dwells of the two-level description (states that count as on, and the rest; neighbours of one kind joined), in time
   * order. All starts are true switches; `endSeen` is 0 for the last one, cut by the end of the record or ended by
   * bleaching, and for the terminal dark time.
   */
  readonly dwells: {
    readonly startSeconds: Float64Array
    readonly durationSeconds: Float64Array
    /** 0 off, 1 on. */
    readonly state: Uint8Array
    readonly endSeen: Uint8Array
  }
  /** Share of the whole record, and of the time before bleaching, spent on. */
  readonly onFraction: number
  readonly onFractionBeforeBleaching: number
  /** Time means over the record, counts per second: baseline without leak, and each state with the baseline. */
  readonly baselineCps: number
  readonly stateCps: Float64Array
  /** Photons that reached the detector, were lost to its dead time, and detections that were afterpulses. null: not simulated. */
  readonly detector: {
    readonly arrived: number
    readonly lostToDeadTime: number
    readonly afterpulses: number
  } | null
}

/** Gathers the truth of a path. */
export function truthOf(model: EmitterModel, path: TelegraphPath, detector: Truth['detector']): Truth {
  const starts: number[] = []
  const state: number[] = []
  for (let i = 0; i < path.states.length; i++) {
    const on = model.states[path.states[i]].countsAsOn ? 1 : 0
    if (state.at(-1) === on) continue
    starts.push(path.startSeconds[i])
    state.push(on)
  }
  const startSeconds = Float64Array.from(starts)
  const durationSeconds = startSeconds.map((start, i) => (starts[i + 1] ?? path.durationSeconds) - start)
  const bleach = path.bleachedAtSeconds ?? Number.POSITIVE_INFINITY
  const endSeen = Uint8Array.from(starts, (_, i) => (i + 1 < starts.length && starts[i + 1] < bleach ? 1 : 0))
  let onSeconds = 0
  for (let i = 0; i < state.length; i++) if (state[i] === 1) onSeconds += durationSeconds[i]
  const duration = path.durationSeconds
  const baselineCps = driftOf(model.baseline.cps, model.baseline.drift).integral(0, duration) / duration
  const factor = driftOf(1, model.signalDrift).integral(0, duration) / duration
  return {
    path,
    dwells: { startSeconds, durationSeconds, state: Uint8Array.from(state), endSeen },
    onFraction: onSeconds / duration,
    onFractionBeforeBleaching: onSeconds / Math.min(duration, bleach),
    baselineCps,
    stateCps: Float64Array.from(model.states, ({ signalCps }) => baselineCps + factor * signalCps),
    detector,
  }
}
