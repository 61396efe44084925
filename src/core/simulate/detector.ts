import type { RandomSource } from '../numeric/random-source.ts'
import { durationSource } from './duration-source.ts'
import type { DetectorModel } from './emitter-model.ts'

/** A detector at work: photons go in as arrival times, detections come out in time order through `detected`. */
export interface Detector {
  /** One photon at this time, s; times must not decrease. */
  arrive(seconds: number): void
  /** Lets the afterpulses still to come before this time happen, s. */
  finish(seconds: number): void
  readonly arrived: number
  readonly lostToDeadTime: number
  readonly afterpulses: number
}

/**
 * Non-paralysable dead time: after each detection nothing is detected for deadTimeSeconds, and what arrives then does
 * not prolong it. Afterpulsing: each detection, itself possibly an afterpulse, sends one more pulse after a delay with
 * the given probability; the pulse is lost when it falls into a dead time. Without dead time the clusters are geometric
 * and F = var / mean of counts in long bins is (1 + p) / (1 - p), about 1 + 2 p.
 */
export function detector(
  model: DetectorModel,
  random: RandomSource,
  detected: (seconds: number) => void,
): Detector {
  const { deadTimeSeconds, afterpulsing } = model
  const probability = afterpulsing?.probability ?? 0
  const delay = afterpulsing === null ? () => 0 : durationSource(afterpulsing.delay, random)
  // Detections until the next one that sends an afterpulse: geometric, so that ordinary ones cost a decrement.
  const perLog = 1 / Math.log1p(-probability)
  const wait = (): number =>
    probability > 0 ? 1 + Math.floor(Math.log(random.uniform()) * perLog) : Number.POSITIVE_INFINITY
  /** Times of afterpulses to come, rising; nearly always none or one. */
  const coming: number[] = []
  let nextComing = Number.POSITIVE_INFINITY
  let deadUntil = Number.NEGATIVE_INFINITY
  let untilAfterpulse = wait()
  let arrived = 0
  let lostToDeadTime = 0
  let afterpulses = 0

  const detect = (t: number): void => {
    deadUntil = t + deadTimeSeconds
    detected(t)
    if (--untilAfterpulse > 0) return
    untilAfterpulse = wait()
    const at = t + delay()
    let place = coming.length
    while (place > 0 && coming[place - 1] > at) place--
    coming.splice(place, 0, at)
    nextComing = coming[0]
  }
  const afterpulsesUntil = (seconds: number): void => {
    while (nextComing <= seconds) {
      const t = coming.shift() as number
      nextComing = coming[0] ?? Number.POSITIVE_INFINITY
      if (t < deadUntil) continue
      afterpulses++
      detect(t)
    }
  }

  return {
    arrive(seconds) {
      if (nextComing <= seconds) afterpulsesUntil(seconds)
      arrived++
      if (seconds < deadUntil) lostToDeadTime++
      else detect(seconds)
    },
    finish: afterpulsesUntil,
    get arrived() {
      return arrived
    },
    get lostToDeadTime() {
      return lostToDeadTime
    },
    get afterpulses() {
      return afterpulses
    },
  }
}
