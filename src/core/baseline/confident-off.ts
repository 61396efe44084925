/** Sums of one expectation step over all usable bins. Rates in counts per bin. */
export interface OffSums {
  /** Per knot: off probability of its confidently-off bins times (baseline of the bin / baseline of the knot), summed. */
  readonly exposure: Float64Array
  /** Per knot: off probability of its confidently-off bins times their counts, summed. */
  readonly counts: Float64Array
  /** Per knot: off probability of its confidently-off bins, summed: the support. */
  readonly support: Float64Array
  /** Sum of on probabilities, and of on probability x (counts - baseline), over all usable bins. */
  readonly onBins: number
  readonly onExcess: number
  /** The same over bins whose neighbours are both more likely on: a bin in which the emitter switched is not among them. */
  readonly innerOnBins: number
  readonly innerOnExcess: number
  readonly usableBins: number
}

/** Beyond this the probability is 0 or 1 to 2e-9. Within, it is read from a table of the logistic function, linear between
 * entries, right to 3e-6: an exponential per bin would be most of the cost of the fit for a dim emitter. */
const CERTAIN = 20
const PER_UNIT = 64
const LOGISTIC = Float64Array.from(
  { length: 2 * CERTAIN * PER_UNIT + 2 },
  (_, i) => 1 / (1 + Math.exp(i / PER_UNIT - CERTAIN)),
)
const MOST_DOUBT = 0.35

/**
 * One expectation step: the probability that each bin is off under Poisson levels b and b + A, then erosion.
 *
 * Bin i is used for the baseline only when it and both its neighbours are more likely off than on; a bin in which the
 * emitter switched would otherwise drag the baseline up. A neighbour that cannot be used, or that lies outside the record, is no hindrance.
 * Between knot centres the baseline and ln((b + A) / b) are taken as linear.
 *
 * @param counts counts per bin
 * @param unusable 1 at bins to leave out, or null
 * @param binsPerKnot knot j stands for bins [j n, (j + 1) n), the last one for what is left
 * @param lnBaseline ln of the baseline in counts per bin at the knots
 * @param doubt standard deviation of lnBaseline, or null when it is taken as known. Off is then what is off even with the baseline
 *   one standard deviation (at most 0.35) lower: inside a long on-time, where nothing holds the baseline down, it
 *   could otherwise wander up until dim on bins look off and hold it there. Where there is support this changes nothing.
 * @param signal A, counts per bin; 0 makes every bin off
 * @param onShare prior share of on bins, inside (0, 1)
 */
export function confidentOff(
  counts: Uint16Array | Uint32Array,
  unusable: Uint8Array | null,
  binsPerKnot: number,
  lnBaseline: Float64Array,
  doubt: Float64Array | null,
  signal: number,
  onShare: number,
): OffSums {
  const knots = lnBaseline.length
  const exposure = new Float64Array(knots)
  const offCounts = new Float64Array(knots)
  const support = new Float64Array(knots)
  const rates = lnBaseline.map(Math.exp)
  const lnRatios = rates.map((rate, j) =>
    Math.log1p(signal / (doubt === null ? rate : rate * Math.exp(-Math.min(doubt[j], MOST_DOUBT)))),
  )
  const constant = signal > 0 ? Math.log(onShare / (1 - onShare)) - signal : Number.NEGATIVE_INFINITY
  let onBins = 0
  let onExcess = 0
  let innerOnBins = 0
  let innerOnExcess = 0
  let usableBins = 0
  // A bin is settled one step late, when the bin after it is known.
  let beforeOff = true
  let beforeOn = false
  let heldOn = false
  let heldOnWeight = 0
  let heldExcess = 0
  let heldOff = true
  let heldWeight = 0
  let heldCount = 0
  let heldRatio = 0
  let heldKnot = 0
  for (let knot = 0; knot < knots; knot++) {
    const begin = knot * binsPerKnot
    const end = Math.min(begin + binsPerKnot, counts.length)
    const centre = begin + (binsPerKnot - 1) / 2
    const middle = Math.min(Math.ceil(centre), end)
    for (let half = 0; half < 2; half++) {
      const from = half === 0 ? begin : middle
      const to = half === 0 ? middle : end
      const other = half === 0 ? Math.max(knot - 1, 0) : Math.min(knot + 1, knots - 1)
      const side = half === 0 ? -1 : 1
      const rateStep = (side * (rates[other] - rates[knot])) / binsPerKnot
      const lnStep = (side * (lnRatios[other] - lnRatios[knot])) / binsPerKnot
      let rate = rates[knot] + (from - centre) * rateStep
      let lnRatio = lnRatios[knot] + (from - centre) * lnStep
      const perRate = 1 / rates[knot]
      for (let i = from; i < to; i++) {
        const count = counts[i]
        let weight = 0
        let off = true
        let on = false
        let onWeight = 0
        const excess = count - rate
        if (unusable === null || unusable[i] === 0) {
          const x = count * lnRatio + constant
          off = x < 0
          on = !off
          if (x <= -CERTAIN) weight = 1
          else if (x < CERTAIN) {
            const place = (x + CERTAIN) * PER_UNIT
            const entry = place | 0
            weight = LOGISTIC[entry] + (place - entry) * (LOGISTIC[entry + 1] - LOGISTIC[entry])
          }
          usableBins++
          onWeight = 1 - weight
          onBins += onWeight
          onExcess += onWeight * excess
        }
        if (heldWeight > 0.5 && beforeOff && off) {
          exposure[heldKnot] += heldWeight * heldRatio
          offCounts[heldKnot] += heldWeight * heldCount
          support[heldKnot] += heldWeight
        }
        if (beforeOn && on) {
          innerOnBins += heldOnWeight
          innerOnExcess += heldOnWeight * heldExcess
        }
        // An unusable bin holds weight 0 and counts as off for its neighbours.
        beforeOff = heldOff
        heldOff = off
        beforeOn = heldOn
        heldOn = on
        heldOnWeight = onWeight
        heldExcess = excess
        heldWeight = weight
        heldCount = count
        heldRatio = rate * perRate
        heldKnot = knot
        rate += rateStep
        lnRatio += lnStep
      }
    }
  }
  if (heldWeight > 0.5 && beforeOff) {
    exposure[heldKnot] += heldWeight * heldRatio
    offCounts[heldKnot] += heldWeight * heldCount
    support[heldKnot] += heldWeight
  }
  return {
    exposure,
    counts: offCounts,
    support,
    onBins,
    onExcess,
    innerOnBins,
    innerOnExcess,
    usableBins,
  }
}
