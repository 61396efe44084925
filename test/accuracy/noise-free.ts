import type { DwellTable } from '../../src/core/dwells/dwell-table.ts'
import type { EmitterModel } from '../../src/core/simulate/emitter-model.ts'
import type { Truth } from '../../src/core/simulate/truth.ts'
import type { LevelledTrace } from '../../src/core/states/levels.ts'

/** Counts of a bin that is wholly on, without noise: fine enough that rounding to whole counts does not matter. */
const FULL = 60_000

/** Share of each bin spent on, as a levelled trace with off level 0 and on level 60 000. */
export function occupancyTrace(
  model: EmitterModel,
  truth: Truth,
  binSeconds: number,
  bins: number,
): LevelledTrace {
  const share = new Float64Array(bins)
  const { startSeconds, durationSeconds, state } = truth.dwells
  for (let d = 0; d < state.length; d++) {
    if (state[d] === 0) continue
    const from = startSeconds[d] / binSeconds
    const to = Math.min(
      bins,
      Math.min(model.durationSeconds, startSeconds[d] + durationSeconds[d]) / binSeconds,
    )
    for (let i = Math.floor(from); i < to; i++) share[i] += Math.min(to, i + 1) - Math.max(from, i)
  }
  return {
    values: Uint16Array.from(share, (s) => Math.round(s * FULL)),
    offset: 0,
    highest: FULL,
    gaps: null,
    binSeconds,
    startSeconds: 0,
    offCounts: 0,
    onCounts: FULL,
  }
}

/**
 * Every true dwell rounded to bins by itself: edge bins count when more than the state's share of them is spent in the
 * state, and a dwell that leaves no bin vanishes without joining its neighbours. The first dwell is marked as the
 * analysis would: start unseen.
 *
 * @param shareOn fractional threshold of the on state, 0..1
 */
export function dwellsOneByOne(truth: Truth, binSeconds: number, bins: number, shareOn: number): DwellTable {
  const rows: { start: number; length: number; state: number; censoring: number }[] = []
  const { startSeconds, durationSeconds, state } = truth.dwells
  for (let d = 0; d < state.length; d++) {
    const from = startSeconds[d] / binSeconds
    const to = from + durationSeconds[d] / binSeconds
    const share = state[d] === 1 ? shareOn : 1 - shareOn
    const first = Math.floor(from)
    const last = Math.floor(to)
    let start = first
    let length = 0
    if (first === last) length = to - from > share ? 1 : 0
    else {
      const early = first + 1 - from > share
      start = early ? first : first + 1
      length = last - start + (to - last > share ? 1 : 0)
    }
    length = Math.min(length, bins - start)
    if (length <= 0) continue
    const cut = start + length >= bins
    rows.push({ start, length, state: state[d], censoring: d === 0 ? (cut ? 3 : 1) : cut ? 2 : 0 })
  }
  return {
    rows: rows.length,
    gate: 'all',
    binSeconds,
    startSeconds: Float64Array.from(rows, ({ start }) => start * binSeconds),
    durationBins: Uint32Array.from(rows, ({ length }) => length),
    state: Uint8Array.from(rows, ({ state }) => state),
    gateAtStart: new Uint8Array(rows.length),
    gateAtEnd: new Uint8Array(rows.length),
    entryAgeBins: new Uint32Array(rows.length),
    censoring: Uint8Array.from(rows, ({ censoring }) => censoring),
    spuriousProbability: new Float32Array(rows.length),
  }
}
