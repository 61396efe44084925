import { type PointerEvent as ReactPointerEvent, useCallback, useRef } from 'react'
import { type DragEvent, type DragState, IDLE, stepDrag } from './drag-machine.ts'

export interface DragOptions {
  /** Position along the drag's axis, CSS px. */
  readonly positionOf: (event: { clientX: number; clientY: number }) => number
  readonly valueNow: () => number
  readonly valueAt: (startValue: number, displacement: number) => number
  /** `at` is the time stamp of the pointer event, ms. */
  readonly onPreview: (value: number, at: number) => void
  readonly onCommit: (value: number) => void
  readonly onRestore: (value: number) => void
}

/**
 * Pointer handlers for one drag. Listeners for move, release, cancel and Escape are added at the press and
 * removed together. Works for mouse, pen and touch (the element needs `touch-action: none`).
 */
export function useDrag(options: DragOptions): (event: ReactPointerEvent<HTMLElement>) => void {
  const latest = useRef(options)
  latest.current = options
  const state = useRef<DragState>(IDLE)

  return useCallback((press: ReactPointerEvent<HTMLElement>) => {
    if (press.button !== 0) return
    press.preventDefault()
    const target: HTMLElement = press.currentTarget
    target.focus({ preventScroll: true })
    target.setPointerCapture(press.pointerId)
    const listeners = new AbortController()
    const { signal } = listeners

    const send = (event: DragEvent, at: number): void => {
      const { state: next, effect } = stepDrag(state.current, event, latest.current.valueAt)
      state.current = next
      if (effect.kind === 'preview') latest.current.onPreview(effect.value, at)
      if (effect.kind === 'commit') latest.current.onCommit(effect.value)
      if (effect.kind === 'restore') latest.current.onRestore(effect.value)
      if (next.phase === 'idle') listeners.abort()
    }
    // Raw updates come at once; plain moves only at the beginning of a frame, up to 16 ms later.
    const moves = 'onpointerrawupdate' in target ? 'pointerrawupdate' : 'pointermove'
    target.addEventListener(
      moves as 'pointermove',
      (event) => send({ kind: 'move', position: latest.current.positionOf(event) }, event.timeStamp),
      { signal },
    )
    target.addEventListener('pointerup', (event) => send({ kind: 'release' }, event.timeStamp), { signal })
    target.addEventListener('pointercancel', (event) => send({ kind: 'cancel' }, event.timeStamp), { signal })
    target.addEventListener('lostpointercapture', (event) => send({ kind: 'release' }, event.timeStamp), {
      signal,
    })
    target.ownerDocument.addEventListener(
      'keydown',
      (event) => {
        if (event.key !== 'Escape') return
        event.preventDefault()
        send({ kind: 'cancel' }, event.timeStamp)
      },
      { signal, capture: true },
    )
    send(
      { kind: 'press', position: latest.current.positionOf(press), value: latest.current.valueNow() },
      press.timeStamp,
    )
  }, [])
}
