import { PARTIAL_BIN, withDropped } from './bin-photons.ts'
import { fittingCounts, type Trace } from './trace.ts'

/**
 * The trace with every `factor` neighbouring bins added into one. Bins after the last whole group are dropped and
 * counted. The coverage of a group is the mean of its parts, to 1/255; it is full only when every part is full and
 * a gap only when every part is a gap.
 *
 * @param factor whole number >= 1; 1 returns the trace itself
 * @throws RangeError when the factor is not a whole number >= 1
 */
export function groupBins(trace: Trace, factor: number): Trace {
  if (!(Number.isInteger(factor) && factor >= 1))
    throw new RangeError(`Expected a whole number of bins to group, at least 1, received ${factor}.`)
  if (factor === 1) return trace
  const { counts } = trace
  const groups = Math.floor(counts.length / factor)
  const sums = new Uint32Array(groups)
  let bin = 0
  for (let g = 0; g < groups; g++) {
    let sum = 0
    for (let j = 0; j < factor; j++) sum += counts[bin++]
    sums[g] = sum
  }
  let rest = 0
  while (bin < counts.length) rest += counts[bin++]
  return {
    kind: 'trace',
    counts: fittingCounts(sums),
    binSeconds: trace.binSeconds * factor,
    startSeconds: trace.startSeconds,
    coverage: trace.coverage === null ? null : groupCoverage(trace.coverage, groups, factor),
    dropped: withDropped(trace.dropped, { [PARTIAL_BIN]: rest }),
  }
}

function groupCoverage(coverage: Uint8Array, groups: number, factor: number): Uint8Array | null {
  const out = new Uint8Array(groups)
  let whole = true
  for (let g = 0; g < groups; g++) {
    let sum = 0
    for (let j = 0; j < factor; j++) sum += coverage[g * factor + j]
    const full = sum === 255 * factor
    whole &&= full
    // Rounding must turn neither a nearly full group into a full one nor a nearly empty one into a gap.
    out[g] = full ? 255 : sum === 0 ? 0 : Math.min(254, Math.max(1, Math.round(sum / factor)))
  }
  return whole ? null : out
}
