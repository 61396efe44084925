/**
 * Share of bins truly on from the share seen on: f = (f_seen - p0) / (1 - p0 - p1), clipped to 0..1 (the
 * estimate of a prevalence from an imperfect test, Rogan & Gladen 1978). Null when the errors leave nothing to
 * correct (p0 + p1 >= 1) or when an argument is not finite.
 *
 * @param observed share of usable bins seen on, 0..1
 * @param falseOnPerBin p0, chance that an off bin is called on
 * @param falseOffPerBin p1, chance that an on bin is called off
 */
export function correctedOnFraction(
  observed: number,
  falseOnPerBin: number,
  falseOffPerBin: number,
): number | null {
  const kept = 1 - falseOnPerBin - falseOffPerBin
  const share = (observed - falseOnPerBin) / kept
  if (!(kept > 0) || !Number.isFinite(share)) return null
  return Math.min(1, Math.max(0, share))
}
