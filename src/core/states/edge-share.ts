import type { LevelledTrace } from './levels.ts'

/**
 * Fractional threshold of one state, 0..1: the share of an edge bin that must be spent in the state for the bin to
 * count as that state. For on it is (c - off) / (on - off) without noise; for off the complement. 1/2, the
 * unbiased middle, when the levels do not differ.
 *
 * @param threshold counts per bin on the levelled axis
 * @param state 0 off, 1 on
 */
export function edgeShare(
  threshold: number,
  levelled: Pick<LevelledTrace, 'offCounts' | 'onCounts'>,
  state: 0 | 1,
): number {
  const span = levelled.onCounts - levelled.offCounts
  if (!(span > 0)) return 0.5
  const share = Math.min(1, Math.max(0, (threshold - levelled.offCounts) / span))
  return state === 1 ? share : 1 - share
}
