import type { DwellSample } from '../../../src/core/dwells/dwell-sample.ts'

/** A sample from plain lists of durations; bins of half a second. */
export function sampleOf(
  complete: readonly number[],
  censored: readonly number[] = [],
  entered: readonly number[] = [],
): DwellSample {
  const nodes = (list: readonly number[]): [Float64Array, Float64Array] => {
    const values = [...new Set(list)].sort((a, b) => a - b)
    return [
      Float64Array.from(values),
      Float64Array.from(values, (v) => list.filter((other) => other === v).length),
    ]
  }
  const [completeBins, completeWeights] = nodes(complete)
  const [censoredBins, censoredWeights] = nodes(censored)
  const [enteredBins, enteredWeights] = nodes(entered)
  return {
    binSeconds: 0.5,
    edgeShare: 0.5,
    completeBins,
    completeWeights,
    censoredBins,
    censoredWeights,
    enteredBins,
    enteredWeights,
  }
}
