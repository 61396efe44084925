/** Even times as a table prints them: rounded to its last decimal, perhaps with rows missing. */
export interface TimeGrid {
  /** In the file's unit of time. */
  readonly step: number
  /** Rounding alone moves the distance of two neighbours by less than this; 0 when the printed times are exactly even. */
  readonly slack: number
  /** Share by which the step may be off: the rounding of the first and last time over the span between them. */
  readonly uncertainty: number
}

/** With a step of one last digit, this share of double steps spread evenly over this many rows is rounding, not loss. */
const ROUNDED_SHARE = 0.05
const ROUNDED_ROWS = 100
/** The mean step may differ from the median step by this share before the median is believed instead. */
const MEAN_SHARE = 0.01

/**
 * Step of a column of times from its first rows. Steps that are all whole multiples of the median one are taken as exact
 * with rows missing; times that fit a straight line within one last digit as rounded with none missing; else the mean
 * over whole numbers of median steps, unless it contradicts the median.
 * @param times in the file's unit, in the order of the rows
 * @param resolution value of the last printed digit, > 0
 * @returns null for fewer than two times or when most steps do not advance
 */
export function timeGrid(times: readonly number[], resolution: number): TimeGrid | null {
  if (times.length < 2) return null
  const steps = times.slice(1).map((time, i) => time - times[i])
  // The lower one of two medians: missing rows make steps longer, never shorter.
  const median = steps.slice().sort((a, b) => a - b)[Math.floor((steps.length - 1) / 2)]
  if (!(median > 0)) return null
  const span = times[times.length - 1] - times[0]
  const whole = steps.reduce((sum, step) => sum + Math.round(step / median), 0)
  const even = steps.every((step) => Math.abs(step - Math.round(step / median) * median) < resolution / 2)
  const uncertainty = span > 0 ? Math.min(1, resolution / span) : 1
  const coarse = median < 1.5 * resolution
  const doubled = steps.filter((step) => step > 1.5 * median).length
  const many = steps.length >= ROUNDED_ROWS
  if (even && !(coarse && many && doubled > ROUNDED_SHARE * steps.length))
    return { step: whole > 0 ? span / whole : median, slack: 0, uncertainty: 0 }
  const line = narrowestBand(times, resolution)
  // Halves of the last digit are printed up or down: a band of just one digit, which few rows can show by chance.
  if (line.width < resolution * (many ? 1 + 1e-6 : 1 - 1e-6))
    return { step: line.slope, slack: resolution, uncertainty }
  if (even) return { step: span / whole, slack: 0, uncertainty: 0 }
  // Below three last digits a step, rounding and real unevenness look alike.
  if (median < 2.5 * resolution) return { step: median, slack: 0, uncertainty }
  const refined = span / whole
  const believed = Math.abs(refined - median) <= Math.max(MEAN_SHARE * median, resolution)
  return { step: believed ? refined : median, slack: resolution, uncertainty }
}

/** Slope of the narrowest band of parallel lines that holds all times, by ternary search: the width is convex in the slope. */
function narrowestBand(times: readonly number[], resolution: number): { slope: number; width: number } {
  const steps = times.length - 1
  const widthOf = (slope: number): number => {
    let low = 0
    let high = 0
    for (let i = 1; i <= steps; i++) {
      const rest = times[i] - times[0] - i * slope
      if (rest < low) low = rest
      else if (rest > high) high = rest
    }
    return high - low
  }
  // A slope further from that of the end points cannot keep both within one last digit.
  let from = (times[steps] - times[0] - resolution) / steps
  let to = (times[steps] - times[0] + resolution) / steps
  for (let i = 0; i < 60; i++) {
    const third = (to - from) / 3
    if (widthOf(from + third) <= widthOf(to - third)) to -= third
    else from += third
  }
  const slope = (from + to) / 2
  return { slope, width: widthOf(slope) }
}
