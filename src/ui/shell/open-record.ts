import type { ImportAnswer } from '../../core/read/import-answer.ts'
import type { EmitterEntry } from '../../session/schema/session.ts'
import { withEmitters } from '../../state/choices/session-changes.ts'
import type { Outcome } from '../../worker/protocol/service.ts'
import type { AppModel } from '../bridge/app-model.ts'

/** Reads a file in the worker and adds its records as emitters; returns what to tell the user. */
export async function openRecord(
  app: AppModel,
  file: File,
  shapeSignature: string,
  answer: ImportAnswer,
  onProgress: (fraction: number) => void,
  signal: AbortSignal,
): Promise<Outcome<readonly string[]>> {
  const outcome = await app.client.run(
    'open',
    (service, job) => service.openFile(job, file, file.name, answer, app.client.callback(onProgress)),
    signal,
  )
  if (!outcome.ok) return outcome
  const { sha256, sizeBytes, records, notes } = outcome.value
  app.filesInHand.set(sha256, file)
  const kept = await app.store.putRaw(sha256, file)
  const emitters = records.map(
    ({ name, index, column }): EmitterEntry => ({
      id: crypto.randomUUID(),
      name,
      origin: { kind: 'file', fileName: file.name, sha256, sizeBytes, answer, index, column },
      difference: {},
    }),
  )
  app.choices.change({ label: `open ${file.name}` }, (session) => ({
    ...withEmitters(session, emitters),
    importAnswers: { ...session.importAnswers, [shapeSignature]: answer },
  }))
  const sentences = notes.map((note) => `${file.name}: ${note}`)
  if (!kept.ok) sentences.push(`${file.name} is open, but its data are not stored: ${kept.sentence}`)
  return { ok: true, value: sentences }
}
