import type { DurationModel, EmitterModel } from './emitter-model.ts'

/** What most emitters need: everything else quiet, no gate, an ideal detector. */
export interface TwoLevels {
  readonly durationSeconds: number
  /** Both levels include the background, counts per second. */
  readonly offCps: number
  readonly onCps: number
  readonly off: DurationModel
  readonly on: DurationModel
}

/** An emitter that alternates between off and on; spread other parts over the result to add them. */
export function twoLevelModel({ durationSeconds, offCps, onCps, off, on }: TwoLevels): EmitterModel {
  return {
    durationSeconds,
    tickSeconds: 1e-8,
    baseline: { cps: offCps, drift: [] },
    signalDrift: [],
    states: [
      { name: 'off', countsAsOn: false, signalCps: 0, dwell: off, next: [0, 1], flicker: null, driven: null },
      {
        name: 'on',
        countsAsOn: true,
        signalCps: onCps - offCps,
        dwell: on,
        next: [1, 0],
        flicker: null,
        driven: null,
      },
    ],
    bleachSeconds: null,
    gate: null,
    detector: { deadTimeSeconds: 0, afterpulsing: null },
  }
}
