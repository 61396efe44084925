import type { Gate } from '../photons/gate.ts'
import type { PhotonStream } from '../photons/photon-stream.ts'
import type { Trace } from '../photons/trace.ts'
import type { ReadProblem } from './read-problem.ts'

/** One record of a file. */
export interface ReadRecord {
  readonly name: string
  /** Column (text) or row or column (array) it came from; null when the file holds one record. */
  readonly column: number | null
  readonly record: PhotonStream | Trace
  readonly gate: Gate | null
}

export type ReadOutcome =
  | { readonly ok: true; readonly records: readonly ReadRecord[]; readonly notes: readonly string[] }
  | { readonly ok: false; readonly problem: ReadProblem; readonly stopped?: boolean }
