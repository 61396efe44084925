import * as v from 'valibot'
import { parseImportAnswer } from '../../core/read/import-answer-schema.ts'
import type { RecordOrigin } from './record-origin.ts'

const text = v.pipe(v.string(), v.maxLength(4096))

const ORIGIN = v.variant('kind', [
  v.strictObject({ kind: v.literal('demonstration'), name: text }),
  v.strictObject({
    kind: v.literal('file'),
    fileName: text,
    sha256: v.pipe(v.string(), v.regex(/^[0-9a-f]{64}$/, 'expected 64 hexadecimal digits')),
    sizeBytes: v.pipe(v.number(), v.integer(), v.minValue(0)),
    answer: v.unknown(),
    index: v.pipe(v.number(), v.integer(), v.minValue(0)),
    column: v.nullable(v.pipe(v.number(), v.integer(), v.minValue(0))),
  }),
])

/** The origin of a record from storage, a session file or a figure. */
export function parseOrigin(
  value: unknown,
): { readonly ok: true; readonly origin: RecordOrigin } | { readonly ok: false; readonly problem: string } {
  const parsed = v.safeParse(ORIGIN, value)
  if (!parsed.success) {
    const [issue] = parsed.issues
    return {
      ok: false,
      problem: `The origin of a record is not valid at “${v.getDotPath(issue) ?? 'top level'}”: ${issue.message}.`,
    }
  }
  if (parsed.output.kind === 'demonstration') return { ok: true, origin: parsed.output }
  const answer = parseImportAnswer(parsed.output.answer)
  return answer.ok ? { ok: true, origin: { ...parsed.output, answer: answer.answer } } : answer
}
