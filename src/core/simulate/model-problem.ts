import { lawNamed } from '../laws/all-laws.ts'
import { driftOf } from './drift.ts'
import type { DurationModel, EmitterModel } from './emitter-model.ts'

const LOOKS = 4096

/**
 * What is wrong with a model, in one sentence that says what was expected and received; null when nothing is.
 * Rates that fall below zero are looked for at 4096 times spread over the record.
 */
export function modelProblem(model: EmitterModel): string | null {
  const { durationSeconds, tickSeconds, states, detector, gate } = model
  if (!(durationSeconds > 0 && Number.isFinite(durationSeconds)))
    return `The record length must be above 0 s; received ${durationSeconds} s.`
  if (!(tickSeconds > 0 && tickSeconds <= durationSeconds))
    return `The tick must be above 0 s and no longer than the record; received ${tickSeconds} s.`
  if (states.length < 2) return `An emitter needs two or more states; received ${states.length}.`
  if (states[0].countsAsOn) return 'State 0 is the dark one and must not count as on.'
  for (const [index, state] of states.entries()) {
    const where = `State ${index} (${state.name})`
    if (!(state.signalCps >= 0))
      return `${where} needs a signal of at least 0 cps; received ${state.signalCps}.`
    const problem = durationProblem(state.dwell)
    if (problem !== null) return `${where}: ${problem}`
    const { next, flicker, driven } = state
    if (flicker !== null && !(flicker.relativeSd >= 0 && flicker.meanSeconds > 0))
      return `${where} needs flicker of at least 0 over a mean time above 0 s; received ${flicker.relativeSd} over ${flicker.meanSeconds} s.`
    if (driven !== null && !(driven.hazardFactor >= 0 && driven.extraPerSecond >= 0))
      return `${where} needs a hazard factor and an extra hazard of at least 0; received ${driven.hazardFactor} and ${driven.extraPerSecond}.`
    const usable = next.length === states.length && next.every((w) => w >= 0) && next.some((w) => w > 0)
    if (!usable || next[index] !== 0)
      return `${where} needs one weight per next state, 0 for itself and one above 0; received [${next.join(', ')}].`
  }
  if (gate !== null) {
    const { halfPeriodSeconds, duty, leakCps, guardSeconds } = gate
    if (!(halfPeriodSeconds > 0 && duty >= 0 && duty <= 1 && leakCps >= 0 && guardSeconds >= 0))
      return `A gate needs a half-period above 0 s, a duty of 0 to 1, leak and guard of at least 0; received ${halfPeriodSeconds} s, ${duty}, ${leakCps} cps, ${guardSeconds} s.`
  }
  if (!(detector.deadTimeSeconds >= 0))
    return `The dead time must be at least 0 s; received ${detector.deadTimeSeconds} s.`
  if (detector.afterpulsing !== null) {
    const { probability, delay } = detector.afterpulsing
    if (!(probability >= 0 && probability < 1))
      return `The afterpulsing probability must be at least 0 and below 1; received ${probability}.`
    const problem = durationProblem(delay)
    if (problem !== null) return `Afterpulsing delay: ${problem}`
  }
  return driftProblem(model)
}

function durationProblem({ law, parameters, shortestSeconds }: DurationModel): string | null {
  if (!(shortestSeconds > 0)) return `the shortest duration must be above 0 s; received ${shortestSeconds} s.`
  for (const { name, low, high } of lawNamed(law).parameters) {
    const value = parameters[name]
    if (!(value >= low && value <= high))
      return `${law} needs ${name} between ${low} and ${high}; received ${value ?? 'nothing'}.`
  }
  return null
}

function driftProblem(model: EmitterModel): string | null {
  const baseline = driftOf(model.baseline.cps, model.baseline.drift)
  const factor = driftOf(1, model.signalDrift)
  for (let i = 0; i <= LOOKS; i++) {
    const t = (i / LOOKS) * model.durationSeconds
    if (!(baseline.at(t) >= 0))
      return `The baseline falls to ${baseline.at(t)} cps at ${t} s; it must stay at 0 or above.`
    if (!(factor.at(t) >= 0))
      return `The signal drift falls to ${factor.at(t)} at ${t} s; it must stay at 0 or above.`
  }
  return null
}
