import * as v from 'valibot'
import type { ImportAnswer } from './import-answer.ts'

const positive = v.nullable(v.pipe(v.number(), v.finite(), v.gtValue(0)))
const unit = v.nullable(v.picklist(['s', 'ms', 'us', 'ns', 'ticks']))

const ANSWER = v.variant('kind', [
  v.strictObject({
    kind: v.literal('text'),
    delimiter: v.picklist(['\t', ',', ';', ' ']),
    decimalComma: v.boolean(),
    headerLines: v.pipe(v.number(), v.integer(), v.minValue(0), v.maxValue(1000)),
    columns: v.pipe(
      v.array(v.picklist(['time', 'arrival', 'counts', 'rate-cps', 'rate-kcps', 'gate', 'ignore'])),
      v.minLength(1),
      v.maxLength(4096),
    ),
    names: v.pipe(v.array(v.pipe(v.string(), v.maxLength(4096))), v.maxLength(4096)),
    timeUnit: unit,
    tickSeconds: positive,
    binSeconds: positive,
  }),
  v.strictObject({
    kind: v.picklist(['npy', 'npz']),
    member: v.nullable(v.pipe(v.string(), v.maxLength(4096))),
    content: v.nullable(v.picklist(['arrival', 'counts'])),
    timeUnit: unit,
    tickSeconds: positive,
    binSeconds: positive,
    emitters: v.picklist(['rows', 'columns']),
  }),
])

/** An answer from storage or from a file. */
export function parseImportAnswer(
  value: unknown,
): { readonly ok: true; readonly answer: ImportAnswer } | { readonly ok: false; readonly problem: string } {
  const parsed = v.safeParse(ANSWER, value)
  if (parsed.success) return { ok: true, answer: parsed.output }
  const [issue] = parsed.issues
  return {
    ok: false,
    problem: `The way to read the file is not valid at “${v.getDotPath(issue) ?? 'top level'}”: ${issue.message}.`,
  }
}
