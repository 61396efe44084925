import { type DragEvent, type ReactNode, useState } from 'react'

interface Incoming {
  take(files: readonly File[]): void
  dragOver(event: DragEvent): void
  dragLeave(event: DragEvent): void
  drop(event: DragEvent): void
  readonly element: ReactNode
}

export function useIncoming(): Incoming {
  const [over, setOver] = useState(false)
  return {
    take: () => {},
    dragOver: (event) => {
      event.preventDefault()
      setOver(true)
    },
    dragLeave: () => setOver(false),
    drop: (event) => {
      event.preventDefault()
      setOver(false)
    },
    element: over ? (
      <div className="drop-veil">Drop records, a session file or an exported figure</div>
    ) : null,
  }
}
