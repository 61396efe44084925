/** Log-likelihood of all usable bins, without the factorials of the counts, which no comparison needs. */
export interface LevelLikelihood {
  /** Every bin off. */
  readonly oneLevel: number
  /** The best sequence of off and on, each switch charged ln(bins): at least `oneLevel`. */
  readonly twoLevels: number
}

/**
 * How well levels b and b + A describe the counts, and b alone.
 *
 * The sequence is the best path through two states (Viterbi 1967, IEEE Trans. Inf. Theory 13, 260) with a charge for each switch. A
 * mixture that draws the state of every bin anew would not do: it charges every bin for its state, dwell or no dwell,
 * and so favours a baseline that climbs onto long on-times over one that stays below them.
 *
 * @param binsPerKnot knot j stands for bins [j n, (j + 1) n); b and ln((b + A) / b) are linear between knot centres
 * @param lnBaseline ln b, counts per bin, at the knots
 * @param signal A, counts per bin; 0 makes both equal
 */
export function levelLikelihood(
  counts: Uint16Array | Uint32Array,
  unusable: Uint8Array | null,
  binsPerKnot: number,
  lnBaseline: Float64Array,
  signal: number,
): LevelLikelihood {
  const last = lnBaseline.length - 1
  const rates = lnBaseline.map(Math.exp)
  const lnRatios = rates.map((rate) => Math.log1p(signal / rate))
  const charge = Math.log(Math.max(counts.length, 2))
  let oneLevel = 0
  // Gain over all off of the best path that ends off, and of the best that ends on.
  let off = 0
  let on = 0
  for (let i = 0; i < counts.length; i++) {
    if (unusable !== null && unusable[i] !== 0) continue
    const place = Math.min(Math.max((i + 0.5) / binsPerKnot - 0.5, 0), last)
    const knot = place | 0
    const next = knot < last ? knot + 1 : knot
    const share = place - knot
    const count = counts[i]
    oneLevel +=
      count * (lnBaseline[knot] + share * (lnBaseline[next] - lnBaseline[knot])) -
      (rates[knot] + share * (rates[next] - rates[knot]))
    const x = count * (lnRatios[knot] + share * (lnRatios[next] - lnRatios[knot])) - signal
    const fromOn = on - charge
    const fromOff = off - charge
    if (fromOn > off) off = fromOn
    if (fromOff > on) on = fromOff
    on += x
  }
  return { oneLevel, twoLevels: oneLevel + Math.max(off, on) }
}
