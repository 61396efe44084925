import { lawNamed } from '../laws/all-laws.ts'
import type { RandomSource } from '../numeric/random-source.ts'
import type { DurationModel } from './emitter-model.ts'

/** A function that draws durations from a model of them. */
export function durationSource(model: DurationModel, random: RandomSource): () => number {
  const law = lawNamed(model.law)
  const coordinates = law.coordinatesOf(law.parameters.map(({ name }) => model.parameters[name]))
  return () => law.sample(random, coordinates, model.shortestSeconds)
}
