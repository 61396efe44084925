/** Off, on, or none (gap: not exposed or excluded). */
export type BinState = 0 | 1 | 255

/** Runs that cover the record exactly: run r is bins [starts[r], starts[r+1]), the last ends at `bins`. */
export interface StateSequence {
  readonly bins: number
  readonly starts: Uint32Array
  /** 0 off, 1 on, 255 gap, per run; neighbours differ. */
  readonly states: Uint8Array
  /** How the states were assigned, e.g. `threshold 28 counts`. */
  readonly method: string
}
