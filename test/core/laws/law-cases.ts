import { lawNamed } from '../../../src/core/laws/all-laws.ts'
import type { Law, LawName } from '../../../src/core/laws/law.ts'

/** Coordinates and shortest durations over which every law is tried: usual, limiting, and run off to an end. */
export const LAW_CASES: readonly {
  law: Law
  coordinates: readonly number[]
  shortest: number
  name: string
}[] = (
  [
    ['power', [1.05], 0.02],
    ['power', [1.5], 0.03],
    ['power', [4], 7],
    ['power-cutoff-survival', [1.5, 0.2], 0.03],
    ['power-cutoff-survival', [1, 3], 0.03],
    ['power-cutoff-survival', [1.8, 0], 0.03],
    ['power-cutoff-survival', [1.02, 40], 0.02],
    ['power-cutoff-density', [1.5, 0.2], 0.03],
    ['power-cutoff-density', [1.5, 0], 0.03],
    ['power-cutoff-density', [1, 0.01], 0.02],
    ['power-cutoff-density', [1.04, 1e-6], 0.02],
    ['power-cutoff-density', [3, 200], 0.03],
    ['power-cutoff-density', [0.4, 1], 0.03],
    ['power-cutoff-density', [-1.5, 2], 0.03],
    ['power-cutoff-density', [-1.5, 300], 0.03],
    ['power-cutoff-density', [-1.9, 100], 0.03],
    ['exponential', [0.5], 0.02],
    ['exponential', [300], 0.02],
    ['log-normal', [-1, 0.7], 0.03],
    ['log-normal', [2, 0.3], 0.03],
    ['log-normal', [-40, 5], 0.03],
    ['log-normal', [-500, 30], 0.03],
    ['stretched', [-1, 0.5], 0.03],
    ['stretched', [-1, 1], 0.03],
    ['stretched', [0, 3], 0.03],
    ['stretched', [-500, 0.02], 0.03],
  ] as const satisfies readonly (readonly [LawName, readonly number[], number])[]
).map(([name, coordinates, shortest]) => ({
  law: lawNamed(name),
  coordinates,
  shortest,
  name: `${name} (${coordinates.join(', ')}) from ${shortest} s`,
}))
