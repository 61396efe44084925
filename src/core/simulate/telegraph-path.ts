import type { LawAt } from '../laws/law.ts'
import { lawNamed } from '../laws/all-laws.ts'
import type { RandomSource } from '../numeric/random-source.ts'
import { seededRandom, splitSeed } from '../numeric/seeded-random.ts'
import { drivenDwell } from './driven-dwell.ts'
import { durationSource } from './duration-source.ts'
import type { EmitterModel, StateModel } from './emitter-model.ts'
import { drivenSpans } from './gate-of-model.ts'
import { modelProblem } from './model-problem.ts'

/** The hidden story of one record: which level when. */
export interface TelegraphPath {
  readonly durationSeconds: number
  /** Start of each stay in a state, s; the first is 0. */
  readonly startSeconds: Float64Array
  /** Index into model.states per stay; neighbours differ. */
  readonly states: Uint8Array
  /** Time of bleaching inside the record, s; null when the emitter survived it. The last stay is then the dark state. */
  readonly bleachedAtSeconds: number | null
}

/**
 * Draws the stays of a record: a semi-Markov chain in continuous time. The record starts at a switch into a state
 * drawn with equal chances, not in equilibrium (heavy-tailed laws have none); the first stay is therefore complete in
 * truth although an analysis cannot know that. The last stay is cut by the end of the record.
 *
 * Depends only on the parts of the model that steer switching and on the seed; levels, leak, drift and detector do not
 * change it.
 */
export function telegraphPath(model: EmitterModel, seed: string): TelegraphPath {
  const problem = modelProblem(model)
  if (problem !== null) throw new RangeError(problem)
  const random = seededRandom(splitSeed(seed, 'switches'))
  const draw = model.states.map((state) => dwellSource(state, model, random))
  const bleach = model.bleachSeconds ?? Number.POSITIVE_INFINITY
  const end = Math.min(model.durationSeconds, bleach)
  let startSeconds = new Float64Array(1024)
  let states = new Uint8Array(1024)
  let stays = 0
  const add = (t: number, state: number): void => {
    if (stays === states.length) {
      startSeconds = grown(startSeconds, new Float64Array(2 * stays))
      states = grown(states, new Uint8Array(2 * stays))
    }
    startSeconds[stays] = t
    states[stays++] = state
  }
  let t = 0
  let state = Math.floor(random.uniform() * model.states.length)
  while (t < end) {
    add(t, state)
    t += draw[state](t)
    state = followerOf(model.states[state], random)
  }
  const bleached = bleach < model.durationSeconds
  if (bleached && states[stays - 1] !== 0) add(Math.max(0, bleach), 0)
  return {
    durationSeconds: model.durationSeconds,
    startSeconds: startSeconds.slice(0, stays),
    states: states.slice(0, stays),
    bleachedAtSeconds: bleached ? bleach : null,
  }
}

/** Dwells of one state, given when they start: the time matters only under a real effect of the gate. */
function dwellSource(
  state: StateModel,
  model: EmitterModel,
  random: RandomSource,
): (startSeconds: number) => number {
  const draw = durationSource(state.dwell, random)
  const effect = state.driven
  if (effect === null || model.gate === null) return draw
  const spans = drivenSpans(model.gate, model.durationSeconds)
  const law = lawNamed(state.dwell.law)
  const at: LawAt = law.at(
    law.coordinatesOf(law.parameters.map(({ name }) => state.dwell.parameters[name])),
    state.dwell.shortestSeconds,
  )
  return (startSeconds) => drivenDwell(at, draw(), startSeconds, spans, effect, model.durationSeconds)
}

function followerOf(state: StateModel, random: RandomSource): number {
  const { next } = state
  let total = 0
  for (const weight of next) total += weight
  let left = random.uniform() * total
  for (let i = 0; i < next.length; i++) {
    left -= next[i]
    if (left < 0) return i
  }
  return next.findLastIndex((weight) => weight > 0)
}

function grown<T extends Float64Array | Uint8Array>(from: T, to: T): T {
  to.set(from)
  return to
}
