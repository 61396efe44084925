import { leaveMeasure } from './leave-measure.ts'

/**
 * Paints a drag as soon as the pointer moves, but at most once a frame, and leaves a User Timing measure for every
 * painted step: from the pointer event to the frame that shows the repaint.
 *
 * A first move paints at once, and its frame is the next one to begin. Moves that follow before that frame wait for it
 * and paint at its beginning; they are in that same frame, whose end is the first task after it.
 */
export interface DragPace<T> {
  step(value: T, at: number): void
  /** The step that waits for its frame, if any. */
  waiting(): T | null
  /** Forgets a step that waits; called when the drag ends. */
  end(): void
}

export function dragPace<T>(name: string, paint: (value: T) => void): DragPace<T> {
  let waiting: { value: T; at: number } | null = null
  let inFrame = false

  const measure = (at: number): void => leaveMeasure(name, at)
  const afterFrame = (callback: () => void): void => {
    const channel = new MessageChannel()
    channel.port1.onmessage = () => {
      channel.port1.close()
      callback()
    }
    channel.port2.postMessage(null)
  }
  const frame = (at: number): void => {
    requestAnimationFrame(() => {
      measure(at)
      inFrame = false
      if (waiting === null) return
      const { value, at: since } = waiting
      waiting = null
      paint(value)
      inFrame = true
      afterFrame(() => {
        measure(since)
        inFrame = false
      })
    })
  }
  return {
    step(value, at) {
      if (inFrame) {
        waiting = { value, at }
        return
      }
      inFrame = true
      paint(value)
      frame(at)
    },
    waiting: () => waiting?.value ?? null,
    end() {
      waiting = null
    },
  }
}
