import type { RecordInHand } from '../../../src/core/pipeline/prepare-trace.ts'
import type { EmitterModel } from '../../../src/core/simulate/emitter-model.ts'
import { simulateRecord } from '../../../src/core/simulate/simulate-record.ts'
import { simulateTrace } from '../../../src/core/simulate/simulate-trace.ts'
import { twoLevelModel } from '../../../src/core/simulate/two-level-model.ts'

const exponential = (tauSeconds: number) => ({
  law: 'exponential' as const,
  parameters: { tauSeconds },
  shortestSeconds: 1e-6,
})

/** A bright two-level emitter under a field with 5 s half-periods; dwells of about a third of a second. */
export function fieldModel(durationSeconds: number): EmitterModel {
  return {
    ...twoLevelModel({
      durationSeconds,
      offCps: 200,
      onCps: 4000,
      off: exponential(0.35),
      on: exponential(0.25),
    }),
    gate: {
      halfPeriodSeconds: 5,
      offsetSeconds: 0,
      duty: 0.5,
      guardSeconds: 0.05,
      leakCps: 20,
      clockErrorSeconds: 0,
    },
  }
}

export function fieldTrace(
  durationSeconds: number,
  seed: string,
  model = fieldModel(durationSeconds),
): RecordInHand {
  const { trace, gate } = simulateTrace(model, 0.01, seed)
  return { record: trace, gate }
}

export function fieldPhotons(durationSeconds: number, seed: string): RecordInHand {
  const { stream, gate } = simulateRecord(fieldModel(durationSeconds), seed)
  return { record: stream, gate }
}
