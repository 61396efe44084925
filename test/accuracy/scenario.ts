import type { LawName } from '../../src/core/laws/law.ts'
import type { DurationModel, EmitterModel } from '../../src/core/simulate/emitter-model.ts'
import { twoLevelModel } from '../../src/core/simulate/two-level-model.ts'

/** One kind of record to study, with what is fitted to it. */
export interface Scenario {
  readonly name: string
  readonly title: string
  readonly model: EmitterModel
  readonly binSeconds: number
}

const SHORTEST_SECONDS = 0.01

function emitter(
  offCps: number,
  onCps: number,
  { tauSeconds = 5, shortestSeconds = SHORTEST_SECONDS } = {},
): EmitterModel {
  const duration = (law: LawName, parameters: DurationModel['parameters']): DurationModel => ({
    law,
    parameters,
    shortestSeconds,
  })
  return twoLevelModel({
    durationSeconds: 600,
    offCps,
    onCps,
    on: duration('power-cutoff-density', { alpha: 1.5, tauSeconds }),
    off: duration('power', { alpha: 1.6 }),
  })
}

/** Levels include the background: off 1 kcps and on 10 kcps means a signal of 9 kcps. */
export const SCENARIOS: readonly Scenario[] = [
  {
    name: 'standard',
    title: 'off 1, on 10 kcps; alpha_on 1.5, tau 5 s (density form); alpha_off 1.6; shortest dwell 1 bin',
    model: emitter(1000, 10_000),
    binSeconds: 0.01,
  },
  {
    name: 'drifting',
    title: 'background 2 kcps swinging by half over 300 s, signal 8 kcps, tau 100 s',
    model: {
      ...emitter(2000, 10_000, { tauSeconds: 100 }),
      baseline: {
        cps: 2000,
        drift: [{ kind: 'sinusoid', amplitude: 1000, periodSeconds: 300, zeroSeconds: 0 }],
      },
    },
    binSeconds: 0.01,
  },
  {
    name: 'bright',
    title: 'off 1, on 20 kcps, otherwise standard',
    model: emitter(1000, 20_000),
    binSeconds: 0.01,
  },
  {
    name: 'dim',
    title: 'off 1, on 3 kcps at the default bin of 10 ms, which is below the suggested bin',
    model: emitter(1000, 3000),
    binSeconds: 0.01,
  },
  {
    name: 'dim-wide-bin',
    title: 'off 1, on 3 kcps at the suggested bin of 50 ms: the shortest dwell is a fifth of it',
    model: emitter(1000, 3000),
    binSeconds: 0.05,
  },
  {
    name: 'sub-bin',
    title: 'standard levels, shortest dwell 1 ms, a tenth of the bin',
    model: emitter(1000, 10_000, { shortestSeconds: 0.001 }),
    binSeconds: 0.01,
  },
]
