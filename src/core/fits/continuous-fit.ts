import type { Law } from '../laws/law.ts'
import { meanLog } from '../laws/weighted-mean.ts'
import { type LawMaximum, maximiseLaw, type MaximiseOptions } from './maximise-law.ts'

/** Durations known exactly: left truncation at `shortestSeconds`, right censoring where `ended` is 0. */
export interface ContinuousDwells {
  readonly seconds: ArrayLike<number>
  /** 1 where the end was seen, 0 where the dwell was cut. */
  readonly ended: ArrayLike<number>
  readonly shortestSeconds: number
}

/** ln L of a law for exact durations, conditional on the shortest. */
export function continuousLikelihood(
  law: Law,
  { seconds, ended, shortestSeconds }: ContinuousDwells,
): (coordinates: readonly number[]) => number {
  return (coordinates) => {
    const at = law.at(coordinates, shortestSeconds)
    let sum = 0
    for (let i = 0; i < seconds.length; i++) {
      sum += ended[i] === 0 ? at.logSurvival(seconds[i]) : at.logDensity(seconds[i])
    }
    return sum
  }
}

/** Maximum likelihood for exact durations, e.g. photon-resolved dwells or published data. */
export function fitContinuous(law: Law, dwells: ContinuousDwells, options: MaximiseOptions): LawMaximum {
  const weights = Float64Array.from(dwells.seconds, () => 1)
  const start = law.start(dwells.seconds, weights, dwells.shortestSeconds)
  return maximiseLaw(
    law,
    continuousLikelihood(law, dwells),
    [start],
    {
      dwells: dwells.seconds.length,
      shortestSeconds: dwells.shortestSeconds,
      typicalSeconds: Math.exp(meanLog(dwells.seconds, weights)),
    },
    options,
  )
}
