const DEFAULT_SECONDS = 0.01
const STEPS = [1, 2, 5, 10]
/** A step this share below the width still counts as reaching it: the bound is several times above the true error. */
const ROUNDING_SLACK = 0.01

/**
 * Narrowest bin at which fewer than one bin of the record is expected on the wrong side of the best threshold,
 * rounded up to the next 1, 2 or 5 x 10^n s.
 *
 * From the Chernoff bound on both error rates, p <= exp(-D (sqrt(l1) - sqrt(l0))^2 / 2) (Chernoff 1952, Ann. Math. Stat. 23,
 * 493), D solves D = 2 ln(T / D) / (sqrt(l1) - sqrt(l0))^2.
 *
 * @param offCps, onCps count rates of the two levels, background included, counts per second
 * @param recordSeconds length of the record, s
 * @returns the width in s and one sentence with its numbers; 10 ms with the reason when the levels or the record do not allow it
 */
export function suggestedBin(
  offCps: number,
  onCps: number,
  recordSeconds: number,
): { seconds: number; reason: string } {
  const contrast = (Math.sqrt(onCps) - Math.sqrt(Math.max(0, offCps))) ** 2
  if (!(onCps > offCps && contrast > 0 && Number.isFinite(contrast) && recordSeconds > 0))
    return {
      seconds: DEFAULT_SECONDS,
      reason: `No two levels to separate (off ${rate(offCps)}, on ${rate(onCps)}); 10 ms is the usual starting width.`,
    }
  const narrowest = narrowestBin(contrast, recordSeconds)
  const seconds = roundedUp(narrowest)
  const levels = `off ${rate(offCps)} and on ${rate(onCps)} need at least ${milli(narrowest)} ms for less than one wrong bin in ${Number(recordSeconds.toPrecision(4))} s`
  if (seconds > recordSeconds / 100)
    return {
      seconds,
      reason: `${levels}: too few bins are left in this record; the levels are hardly separable.`,
    }
  return { seconds, reason: `${levels}; rounded up to ${milli(seconds)} ms.` }
}

/** The one root of 2 ln(T / D) = D contrast in (0, T), by halving: the left side falls, the right side rises. */
function narrowestBin(contrast: number, recordSeconds: number): number {
  let low = 0
  let high = recordSeconds
  for (let i = 0; i < 200 && high - low > 1e-12 * high; i++) {
    const middle = (low + high) / 2
    if (2 * Math.log(recordSeconds / middle) > middle * contrast) low = middle
    else high = middle
  }
  return high
}

function roundedUp(seconds: number): number {
  const decade = 10 ** Math.floor(Math.log10(seconds))
  const step = STEPS.find((s) => s * decade >= seconds * (1 - ROUNDING_SLACK)) ?? 10
  return Number((step * decade).toPrecision(1))
}

function milli(seconds: number): string {
  return String(Number((seconds * 1000).toPrecision(2)))
}

function rate(cps: number): string {
  return Number.isFinite(cps) ? `${Number((cps / 1000).toPrecision(3))} kcps` : 'not known'
}
