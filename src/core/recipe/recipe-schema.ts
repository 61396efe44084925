import * as v from 'valibot'
import type { LawName } from '../laws/law.ts'
import type { Recipe } from './recipe.ts'

const LAW_NAMES = [
  'power',
  'power-cutoff-survival',
  'power-cutoff-density',
  'exponential',
  'log-normal',
  'stretched',
] as const satisfies readonly LawName[]

const finite = v.pipe(v.number(), v.finite())
const within = (low: number, high: number) => v.pipe(finite, v.minValue(low), v.maxValue(high))
const whole = (low: number, high: number) => v.pipe(finite, v.integer(), v.minValue(low), v.maxValue(high))

const span = v.pipe(
  v.strictTuple([finite, finite]),
  v.check(([from, to]) => to > from, 'expected a span [start, end] that ends after it starts'),
)

/** Ranges as they stand beside the controls; see `choices.ts`. */
const RECIPE = v.strictObject({
  version: v.literal(1),
  bin: v.strictObject({ seconds: within(1e-6, 10) }),
  baseline: v.strictObject({
    method: v.picklist(['automatic', 'constant', 'drifting']),
    stiffnessSeconds: within(0.1, 1000),
    excludedSeconds: v.pipe(v.array(span), v.maxLength(1000)),
  }),
  threshold: v.strictObject({
    rule: v.picklist(['half', 'crossing', 'sigma', 'least-variance', 'hand']),
    sigmas: within(0.5, 20),
    handCounts: v.nullable(whole(-100_000_000, 100_000_000)),
  }),
  dwells: v.strictObject({ gate: v.picklist(['all', 'reference', 'driven', 'sham']) }),
  fit: v.strictObject({
    laws: v.pipe(v.array(v.picklist(LAW_NAMES)), v.minLength(1), v.maxLength(LAW_NAMES.length)),
    shown: v.strictObject({
      on: v.picklist([...LAW_NAMES, 'best']),
      off: v.picklist([...LAW_NAMES, 'best']),
    }),
    shortest: v.strictObject({
      rule: v.picklist(['largest', 'hand']),
      subBinSafeBins: whole(1, 1000),
      handBins: v.strictObject({ on: v.nullable(whole(1, 100_000)), off: v.nullable(whole(1, 100_000)) }),
    }),
    confidence: within(0.5, 0.999),
  }),
  goodness: v.strictObject({ samples: whole(10, 100_000), seed: whole(0, 4_294_967_295) }),
})

export type RecipeParsed =
  | { readonly ok: true; readonly recipe: Recipe }
  | { readonly ok: false; readonly problem: string }

/** A recipe from outside. Unknown keys, wrong types and values out of range are refused with the place and the reason. */
export function parseRecipe(value: unknown): RecipeParsed {
  const parsed = v.safeParse(RECIPE, value)
  if (parsed.success) return { ok: true, recipe: parsed.output }
  const [issue] = parsed.issues
  return {
    ok: false,
    problem: `The recipe is not valid at “${v.getDotPath(issue) ?? 'top level'}”: ${issue.message}.`,
  }
}
