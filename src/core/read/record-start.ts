/** A first photon later than this share of the record does not belong to a clock that started with it. */
const LATE_SHARE = 0.01

/**
 * First tick of the exposure of a list of arrival times that does not say: the clock's zero when the first photon comes
 * in the first hundredth of the record, else the first photon (times of day, or a cut out piece).
 */
export function recordStart(firstTick: number, lastTick: number): { startTick: number; note: string } {
  return firstTick <= LATE_SHARE * lastTick
    ? { startTick: 0, note: 'The record is taken to run from time 0 to its last photon' }
    : { startTick: firstTick, note: 'The record is taken to run from its first photon to its last' }
}
