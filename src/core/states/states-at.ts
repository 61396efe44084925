import { changePlaces, comparesInPairs } from './change-places.ts'
import type { LevelledTrace } from './levels.ts'
import type { StateSequence } from './state-sequence.ts'
import { usableSpans } from './usable-spans.ts'

const GAP = 255
const BINS_AT_ONCE = 1 << 15

/** The longer of the array and one with room for `needed` entries, contents kept. */
function withRoom(array: Uint32Array<ArrayBuffer>, needed: number): Uint32Array<ArrayBuffer> {
  if (needed <= array.length) return array
  const longer = new Uint32Array(Math.max(needed, 2 * array.length))
  longer.set(array)
  return longer
}

/**
 * Off and on runs of a levelled trace at one threshold; gaps are runs of their own. An empty trace has no runs.
 *
 * @param threshold integer on the levelled axis: a bin is on when its value is at least this
 */
export function statesAt(levelled: LevelledTrace, threshold: number): StateSequence {
  const { values, offset, gaps, highest } = levelled
  const bins = values.length
  const level = threshold - offset
  const pairs = comparesInPairs(values, highest - offset)
  const spans = usableSpans(bins, gaps)
  // Starts of all runs; which of them begin a gap or a span is marked by position.
  let starts: Uint32Array<ArrayBuffer> = new Uint32Array(Math.min(bins + 1, 1 << 12))
  let count = 0
  const spanAt: number[] = []
  let covered = 0
  for (let j = 0; j < spans.starts.length; j++) {
    const start = spans.starts[j]
    const end = spans.ends[j]
    starts = withRoom(starts, count + 2)
    if (start > covered) starts[count++] = covered
    spanAt.push(count)
    starts[count++] = start
    for (let from = start; from < end; from += BINS_AT_ONCE) {
      const to = Math.min(end, from + BINS_AT_ONCE + 1)
      starts = withRoom(starts, count + to - from)
      count = changePlaces(values, level, from, to, pairs, starts, count)
    }
    covered = end
  }
  if (covered < bins) {
    starts = withRoom(starts, count + 1)
    starts[count++] = covered
  }
  const states = new Uint8Array(count).fill(GAP)
  for (let j = 0; j < spanAt.length; j++) {
    let state = values[spans.starts[j]] >= level ? 1 : 0
    for (let r = spanAt[j]; r < count && starts[r] < spans.ends[j]; r++) {
      states[r] = state
      state ^= 1
    }
  }
  return { bins, starts: starts.slice(0, count), states, method: `threshold ${threshold} counts` }
}
