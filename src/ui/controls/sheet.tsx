import { type ReactNode, useEffect, useId, useRef } from 'react'
import { Button } from './button.tsx'

interface SheetProps {
  readonly title: string
  readonly onClose: () => void
  readonly children: ReactNode
  readonly foot?: ReactNode
}

/** A modal dialog (native, so that focus is kept inside and Escape closes). */
export function Sheet({ title, onClose, children, foot }: SheetProps) {
  const ref = useRef<HTMLDialogElement>(null)
  const id = useId()
  useEffect(() => {
    const dialog = ref.current
    if (dialog !== null && !dialog.open) dialog.showModal()
  }, [])
  return (
    <dialog
      ref={ref}
      aria-labelledby={id}
      onClose={onClose}
      onClick={(event) => {
        if (event.target === ref.current) ref.current?.close()
      }}
    >
      <div className="dialog-head">
        <h2 id={id}>{title}</h2>
        <Button look="quiet" aria-label={`Close ${title}`} onClick={() => ref.current?.close()}>
          ✕
        </Button>
      </div>
      <div className="dialog-body">{children}</div>
      {foot === undefined ? null : <div className="dialog-foot">{foot}</div>}
    </dialog>
  )
}
