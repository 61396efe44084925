/**
 * A drag is a small state machine: the value is remembered at the press, the total displacement is applied to it,
 * Escape and a lost pointer restore it.
 *
 *   idle --press--> dragging --move--> dragging --release--> idle (commit)
 *                      |--Escape, cancel--> idle (restore)
 */
export type DragState =
  | { readonly phase: 'idle' }
  | {
      readonly phase: 'dragging'
      readonly startValue: number
      readonly startPosition: number
      readonly value: number
    }

export type DragEvent =
  | { readonly kind: 'press'; readonly position: number; readonly value: number }
  | { readonly kind: 'move'; readonly position: number }
  | { readonly kind: 'release' }
  | { readonly kind: 'cancel' }

export type DragEffect =
  | { readonly kind: 'none' }
  | { readonly kind: 'preview'; readonly value: number }
  | { readonly kind: 'commit'; readonly value: number }
  | { readonly kind: 'restore'; readonly value: number }

const NONE: DragEffect = { kind: 'none' }
export const IDLE: DragState = { phase: 'idle' }

/** `valueAt(startValue, displacement)` turns a displacement in pixels into a value, already rounded and clipped. */
export function stepDrag(
  state: DragState,
  event: DragEvent,
  valueAt: (startValue: number, displacement: number) => number,
): { readonly state: DragState; readonly effect: DragEffect } {
  if (state.phase === 'idle') {
    if (event.kind !== 'press') return { state, effect: NONE }
    return {
      state: {
        phase: 'dragging',
        startValue: event.value,
        startPosition: event.position,
        value: event.value,
      },
      effect: NONE,
    }
  }
  switch (event.kind) {
    case 'move': {
      const value = valueAt(state.startValue, event.position - state.startPosition)
      if (value === state.value) return { state, effect: NONE }
      return { state: { ...state, value }, effect: { kind: 'preview', value } }
    }
    case 'release':
      return {
        state: IDLE,
        effect: state.value === state.startValue ? NONE : { kind: 'commit', value: state.value },
      }
    case 'cancel':
      return { state: IDLE, effect: { kind: 'restore', value: state.startValue } }
    case 'press':
      return { state, effect: NONE }
  }
}
