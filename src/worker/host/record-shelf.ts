import { corridorOf, type Corridor } from '../../core/pipeline/corridor.ts'
import type { RecordInHand } from '../../core/pipeline/prepare-trace.ts'
import type { ReadRecord } from '../../core/read/read-record.ts'
import { readSource } from '../../core/read/read-source.ts'
import { DEMONSTRATION } from '../../core/simulate/demonstration.ts'
import { simulateRecord } from '../../core/simulate/simulate-record.ts'
import type { RecordOrigin } from '../../session/schema/record-origin.ts'
import type { Outcome } from '../protocol/service.ts'
import { blobSource } from './blob-source.ts'

/** Corridors kept at once; a record of 10^8 photons holds 400 MB, so few. */
const KEPT = 3

/** Decoded records and their corridors, least recently used first to go. */
export interface RecordShelf {
  keepFile(sha256: string, answerKey: string, records: readonly ReadRecord[]): void
  corridor(
    origin: RecordOrigin,
    file: Blob | null,
    hooks: { onProgress(fraction: number): void; shouldStop(): boolean },
  ): Promise<Outcome<Corridor>>
}

/** Key of the answer under which a file was decoded. */
export function answerKey(origin: Extract<RecordOrigin, { kind: 'file' }>): string {
  return JSON.stringify(origin.answer)
}

export function recordShelf(): RecordShelf {
  const files = new Map<string, readonly ReadRecord[]>()
  const corridors = new Map<string, Corridor>()

  const remember = <T>(map: Map<string, T>, key: string, value: T): T => {
    map.delete(key)
    map.set(key, value)
    for (const old of map.keys()) {
      if (map.size <= KEPT) break
      map.delete(old)
    }
    return value
  }

  const inHand = async (
    origin: RecordOrigin,
    file: Blob | null,
    hooks: { onProgress(fraction: number): void; shouldStop(): boolean },
  ): Promise<Outcome<RecordInHand>> => {
    if (origin.kind === 'demonstration') {
      const emitter = DEMONSTRATION.find((one) => one.name === origin.name)
      if (emitter === undefined) {
        return { ok: false, sentence: `This version has no demonstration emitter named “${origin.name}”.` }
      }
      const { stream, gate } = simulateRecord(emitter.model, emitter.seed)
      return { ok: true, value: { record: stream, gate } }
    }
    const key = origin.sha256 + answerKey(origin)
    let records = files.get(key)
    if (records === undefined) {
      if (file === null) {
        return {
          ok: false,
          sentence: `The file “${origin.fileName}” is not stored in this browser any more. Open it again to go on.`,
        }
      }
      const read = await readSource(blobSource(file, origin.fileName), origin.answer, hooks)
      if (!read.ok) return { ok: false, sentence: read.problem.sentence, stopped: hooks.shouldStop() }
      records = read.records
    }
    remember(files, key, records)
    const record = records[origin.index]
    if (record === undefined) {
      return {
        ok: false,
        sentence: `“${origin.fileName}” holds ${records.length} records; number ${origin.index + 1} was asked for.`,
      }
    }
    return { ok: true, value: { record: record.record, gate: record.gate } }
  }

  return {
    keepFile: (sha256, key, records) => {
      remember(files, sha256 + key, records)
    },
    async corridor(origin, file, hooks) {
      const key = JSON.stringify(origin)
      const kept = corridors.get(key)
      if (kept !== undefined) return { ok: true, value: remember(corridors, key, kept) }
      const found = await inHand(origin, file, hooks)
      if (!found.ok) return found
      return { ok: true, value: remember(corridors, key, corridorOf(found.value)) }
    },
  }
}
