/** Bins merged per level. 8 keeps the levels at 2/7 of the values; 4 would take 2/3 and save few look-ups. */
export const PYRAMID_FACTOR = 8

/** Lowest and highest value of every block of 8, 64, 512, ... bins; the last block of a level may be short. */
export interface PyramidLevel {
  readonly low: Uint16Array | Uint32Array
  readonly high: Uint16Array | Uint32Array
}

/** Finest level first. Empty when there are at most 8 bins. */
export interface Pyramid {
  readonly bins: number
  readonly levels: readonly PyramidLevel[]
}

/** The levels above `values`; one pass over them, 2/7 of their memory. */
export function buildPyramid(values: Uint16Array | Uint32Array): Pyramid {
  const levels: PyramidLevel[] = []
  let low = values
  let high = values
  while (low.length > PYRAMID_FACTOR) {
    const size = Math.ceil(low.length / PYRAMID_FACTOR)
    const nextLow = values instanceof Uint16Array ? new Uint16Array(size) : new Uint32Array(size)
    const nextHigh = values instanceof Uint16Array ? new Uint16Array(size) : new Uint32Array(size)
    for (let block = 0; block < size; block++) {
      const from = block * PYRAMID_FACTOR
      const to = Math.min(from + PYRAMID_FACTOR, low.length)
      let lowest = low[from]
      let highest = high[from]
      for (let i = from + 1; i < to; i++) {
        if (low[i] < lowest) lowest = low[i]
        if (high[i] > highest) highest = high[i]
      }
      nextLow[block] = lowest
      nextHigh[block] = highest
    }
    levels.push({ low: nextLow, high: nextHigh })
    low = nextLow
    high = nextHigh
  }
  return { bins: values.length, levels }
}

/**
 * Lowest and highest value under each of `columns` equal columns of [fromBin, toBin), written to `outLow` and `outHigh`.
 *
 * Column j covers its equal share of the range and takes every bin it touches, wholly or in part; a column narrower
 * than a bin takes the bin it lies in. Columns outside the record, and all columns of an empty or reversed range,
 * become NaN. Exact for values below 2^24 (Float32). No allocation; cost O(columns x log bins).
 *
 * @param values the array the pyramid was built from
 * @param fromBin, toBin bounds in bins, fractions and values outside the record allowed
 */
export function envelope(
  pyramid: Pyramid,
  values: Uint16Array | Uint32Array,
  fromBin: number,
  toBin: number,
  columns: number,
  outLow: Float32Array,
  outHigh: Float32Array,
): void {
  const width = (toBin - fromBin) / columns
  const bins = pyramid.bins
  for (let column = 0; column < columns; column++) {
    const left = fromBin + column * width
    const right = column + 1 === columns ? toBin : fromBin + (column + 1) * width
    if (!(right > left && right > 0 && left < bins)) {
      outLow[column] = Number.NaN
      outHigh[column] = Number.NaN
      continue
    }
    let first = left > 0 ? Math.floor(left) : 0
    let stop = right < bins ? Math.ceil(right) : bins
    let lowest = Number.POSITIVE_INFINITY
    let highest = -1
    let low = values
    let high = values
    let level = 0
    while (first < stop) {
      const top = level === pyramid.levels.length || stop - first <= 2 * PYRAMID_FACTOR
      // Ends that fill no whole block are read here; the whole blocks between them one level up.
      const headStop = top ? stop : Math.ceil(first / PYRAMID_FACTOR) * PYRAMID_FACTOR
      const tailFirst = top ? stop : Math.floor(stop / PYRAMID_FACTOR) * PYRAMID_FACTOR
      for (let i = first; i < headStop; i++) {
        if (low[i] < lowest) lowest = low[i]
        if (high[i] > highest) highest = high[i]
      }
      for (let i = tailFirst; i < stop; i++) {
        if (low[i] < lowest) lowest = low[i]
        if (high[i] > highest) highest = high[i]
      }
      if (top) break
      first = headStop / PYRAMID_FACTOR
      stop = tailFirst / PYRAMID_FACTOR
      low = pyramid.levels[level].low
      high = pyramid.levels[level].high
      level++
    }
    outLow[column] = lowest
    outHigh[column] = highest
  }
}
