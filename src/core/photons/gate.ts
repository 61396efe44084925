/** 0 reference, 1 driven, 2 sham, 3 guard: the order is fixed, it is the code stored per bin. */
export const GATE_CLASSES = ['reference', 'driven', 'sham', 'guard'] as const
export type GateClass = (typeof GATE_CLASSES)[number]

/** One window [startSeconds, endSeconds) of a gate. */
export interface GateWindow {
  readonly startSeconds: number
  readonly endSeconds: number
  readonly gateClass: GateClass
}

/** Windows in time order that do not overlap. Time outside every window counts as reference. */
export interface Gate {
  readonly windows: readonly GateWindow[]
}
