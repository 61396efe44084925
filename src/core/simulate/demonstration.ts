import type { DriftTerm } from './drift.ts'
import type { DetectorModel, DurationModel, EmitterModel, GateModel } from './emitter-model.ts'
import { twoLevelModel } from './two-level-model.ts'

export interface DemonstrationEmitter {
  /** Fixed name, also used in saved sessions. */
  readonly name: string
  /** What to look at, one sentence. */
  readonly title: string
  readonly model: EmitterModel
  readonly seed: string
}

const SHORTEST_SECONDS = 0.01

/** A field that goes on and off every 20 s: scatter and luminescence of the electrodes leak a little while it is on. */
const FIELD: GateModel = {
  halfPeriodSeconds: 20,
  offsetSeconds: 0,
  duty: 0.5,
  guardSeconds: 0.05,
  leakCps: 50,
  clockErrorSeconds: 0,
}

/** The field charges the coverslip: the background wanders once per field period and settles over the record. */
const FIELD_DRIFT: readonly DriftTerm[] = [
  { kind: 'exponential', amplitude: 80, tauSeconds: 120 },
  { kind: 'sinusoid', amplitude: 25, periodSeconds: 40, zeroSeconds: 20 },
]

const COUNTER: DetectorModel = {
  deadTimeSeconds: 50e-9,
  afterpulsing: {
    probability: 0.005,
    delay: { law: 'exponential', parameters: { tauSeconds: 100e-9 }, shortestSeconds: 50e-9 },
  },
}

const cutoffPower = (
  alpha: number,
  tauSeconds: number,
  shortestSeconds = SHORTEST_SECONDS,
): DurationModel => ({
  law: 'power-cutoff-density',
  parameters: { alpha, tauSeconds },
  shortestSeconds,
})
const power = (alpha: number, shortestSeconds = SHORTEST_SECONDS): DurationModel => ({
  law: 'power',
  parameters: { alpha },
  shortestSeconds,
})

/** One nanocrystal under the field, on the shared detector. */
function nanocrystal(
  durationSeconds: number,
  [offCps, onCps]: readonly [number, number],
  on: DurationModel,
  off: DurationModel,
): EmitterModel {
  return {
    ...twoLevelModel({ durationSeconds, offCps, onCps, on, off }),
    baseline: { cps: offCps, drift: FIELD_DRIFT },
    gate: FIELD,
    detector: COUNTER,
  }
}

const GREY_BASE = nanocrystal(400, [1000, 12_000], cutoffPower(1.5, 5), power(1.6))

/**
 * The demonstration session: six invented nanocrystals on a coverslip under a square-wave electric field. The field has
 * no real effect on any of them; whatever a comparison of field off and on shows is leak, drift or chance. Heavy tails
 * make most short records lopsided: the seeds were picked for records that hold plenty of both kinds of dwell.
 */
export const DEMONSTRATION: readonly DemonstrationEmitter[] = [
  {
    name: 'coverslip-A emitter 1 textbook',
    title: 'Two clear levels; power-law off-times, on-times cut off near 5 s.',
    model: nanocrystal(400, [1000, 10_000], cutoffPower(1.5, 5), power(1.6)),
    seed: 'coverslip-A 1 50',
  },
  {
    name: 'coverslip-A emitter 2 dim',
    title: 'On level only three times the off level: shot noise makes events at narrow bins.',
    model: nanocrystal(600, [1000, 3000], cutoffPower(1.5, 5), cutoffPower(1.6, 20)),
    seed: 'coverslip-A 2 2',
  },
  {
    name: 'coverslip-A emitter 3 drifting background',
    title: 'The background swings by half its value over 300 s while on-times last up to minutes.',
    model: {
      ...nanocrystal(600, [2000, 8000], cutoffPower(1.5, 100), power(1.6)),
      baseline: {
        cps: 2000,
        drift: [{ kind: 'sinusoid', amplitude: 1000, periodSeconds: 300, zeroSeconds: 0 }],
      },
    },
    seed: 'coverslip-A 3 27',
  },
  {
    name: 'coverslip-A emitter 4 bleaches',
    title: 'Goes dark for good half way: the last dark time is not an off-time.',
    model: {
      ...nanocrystal(400, [1000, 10_000], cutoffPower(1.5, 5), cutoffPower(1.6, 20)),
      bleachSeconds: 200,
    },
    seed: 'coverslip-A 4 6',
  },
  {
    name: 'coverslip-A emitter 5 grey level',
    title: 'A third, grey level at 40 % of the signal, entered from both others.',
    model: {
      ...GREY_BASE,
      states: [
        { ...GREY_BASE.states[0], next: [0, 0.3, 0.7] },
        {
          name: 'grey',
          countsAsOn: true,
          signalCps: 4400,
          dwell: cutoffPower(1.4, 1),
          next: [0.5, 0, 0.5],
          flicker: { relativeSd: 0.1, meanSeconds: 0.2 },
          driven: null,
        },
        { ...GREY_BASE.states[1], next: [0.6, 0.4, 0] },
      ],
    },
    seed: 'coverslip-A 5 9',
  },
  {
    name: 'coverslip-A emitter 6 faster than the bin',
    title: 'Shortest dwells of 0.3 ms: switches inside a bin are missed and lower the fitted exponent.',
    model: nanocrystal(300, [1000, 20_000], cutoffPower(1.5, 5, 3e-4), power(1.6, 3e-4)),
    seed: 'coverslip-A 6 1',
  },
]
