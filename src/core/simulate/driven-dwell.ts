import type { LawAt } from '../laws/law.ts'
import { findRoot } from '../numeric/root.ts'

/**
 * Length of a dwell whose hazard is changed while driven. The dwell drawn without the effect fixes how much
 * cumulative hazard H = -ln S it lasts for (a unit exponential variate); that amount is then used up along the wave:
 * factor x dH + extra x dt while driven, dH otherwise. Without any driven time before its end the drawn length is
 * returned unchanged, so records with and without an effect share their random numbers.
 *
 * @param law the dwell law
 * @param drawnSeconds length drawn from it
 * @param startSeconds when the dwell starts
 * @param spans driven spans as `drivenSpans` returns them
 * @returns length, s; Infinity when the dwell outlasts the record
 */
export function drivenDwell(
  law: LawAt,
  drawnSeconds: number,
  startSeconds: number,
  spans: Float64Array,
  effect: { readonly hazardFactor: number; readonly extraPerSecond: number },
  recordSeconds: number,
): number {
  let i = 0
  while (i < spans.length && spans[i + 1] <= startSeconds) i += 2
  if (i >= spans.length || spans[i] >= startSeconds + drawnSeconds) return drawnSeconds

  let left = -law.logSurvival(drawnSeconds)
  let age = 0
  let driven = spans[i] <= startSeconds
  let edge = driven ? i + 1 : i
  while (startSeconds + age < recordSeconds) {
    const until = (edge < spans.length ? spans[edge] : recordSeconds) - startSeconds
    const factor = driven ? effect.hazardFactor : 1
    const extra = driven ? effect.extraPerSecond : 0
    const from = age
    const used = (to: number): number =>
      factor * (law.logSurvival(from) - law.logSurvival(to)) + extra * (to - from)
    const cost = until > from ? used(until) : 0
    if (cost >= left) {
      const target = left
      return findRoot((to) => used(to) - target, from, until, {}).x
    }
    left -= cost
    age = until
    driven = !driven
    edge++
  }
  return Number.POSITIVE_INFINITY
}
