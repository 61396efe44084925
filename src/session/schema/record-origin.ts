import type { ImportAnswer } from '../../core/read/import-answer.ts'

/** Where a record comes from, as the session keeps it. */
export type RecordOrigin =
  | { readonly kind: 'demonstration'; readonly name: string }
  | {
      readonly kind: 'file'
      readonly fileName: string
      /** SHA-256 of the file's bytes, hex. */
      readonly sha256: string
      readonly sizeBytes: number
      readonly answer: ImportAnswer
      /** Index of the record inside the file as the answer reads it. */
      readonly index: number
      readonly column: number | null
    }
