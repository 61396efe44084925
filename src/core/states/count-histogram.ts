import type { LevelledTrace } from './levels.ts'

/** Usable bins of each levelled value: entry i is value `first + i`. */
export interface CountHistogram {
  readonly first: number
  readonly counts: Float64Array
}

/** Histogram of the usable bins, from the lowest value that occurs to the highest; no entries when no bin is usable. */
export function countHistogram({
  values,
  offset,
  gaps,
}: Pick<LevelledTrace, 'values' | 'offset' | 'gaps'>): CountHistogram {
  let lowest = Number.POSITIVE_INFINITY
  let highest = -1
  for (let i = 0; i < values.length; i++) {
    if (gaps !== null && gaps[i] !== 0) continue
    if (values[i] < lowest) lowest = values[i]
    if (values[i] > highest) highest = values[i]
  }
  if (highest < 0) return { first: offset, counts: new Float64Array(0) }
  const counts = new Float64Array(highest - lowest + 1)
  for (let i = 0; i < values.length; i++) if (gaps === null || gaps[i] === 0) counts[values[i] - lowest]++
  return { first: lowest + offset, counts }
}
