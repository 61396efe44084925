import { useEffect, useRef, useState } from 'react'
import { useApp } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { type TakeAwayKind, takeAway } from './take-away-files.ts'

const ITEMS: readonly { kind: TakeAwayKind; label: string; detail: string }[] = [
  { kind: 'figure-85', label: 'Figure, 85 mm', detail: 'SVG, one column; re-opens here' },
  { kind: 'figure-178', label: 'Figure, 178 mm', detail: 'SVG, full width; re-opens here' },
  { kind: 'dwells', label: 'Dwell table', detail: 'CSV with censoring and spurious chance' },
  { kind: 'results', label: 'Result document', detail: 'JSON with every number and its interval' },
  { kind: 'recipe', label: 'Recipe', detail: 'JSON for the batch command' },
  { kind: 'session', label: 'Session file', detail: 'ZIP with choices and raw data' },
]

/** What can be taken away, as a menu. */
export function TakeAway() {
  const app = useApp()
  const [open, setOpen] = useState(false)
  const [problem, setProblem] = useState<string | null>(null)
  const root = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (!open) return
    const close = (event: Event): void => {
      if (!(event.target instanceof Node) || root.current?.contains(event.target) !== true) setOpen(false)
    }
    document.addEventListener('pointerdown', close)
    root.current?.querySelector<HTMLElement>('li button')?.focus()
    return () => document.removeEventListener('pointerdown', close)
  }, [open])
  return (
    <div
      className="menu"
      ref={root}
      onKeyDown={(event) => {
        if (event.key === 'Escape') setOpen(false)
        if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return
        event.preventDefault()
        const buttons = [...(root.current?.querySelectorAll<HTMLElement>('li button') ?? [])]
        const at = buttons.findIndex((button) => button === document.activeElement)
        buttons[(at + (event.key === 'ArrowDown' ? 1 : -1) + buttons.length) % buttons.length]?.focus()
      }}
    >
      <Button aria-haspopup="true" aria-expanded={open} onClick={() => setOpen(!open)}>
        Take away
      </Button>
      {open ? (
        <ul aria-label="Take away">
          {ITEMS.map(({ kind, label, detail }) => (
            <li key={kind}>
              <button
                type="button"
                onClick={() => {
                  setOpen(false)
                  void takeAway(app, kind).then((sentence) => setProblem(sentence))
                }}
              >
                {label}
                <small>{detail}</small>
              </button>
            </li>
          ))}
        </ul>
      ) : null}
      {problem === null ? null : (
        <div className="menu-problem notice bad" role="alert">
          {problem} <Button onClick={() => setProblem(null)}>Close</Button>
        </div>
      )}
    </div>
  )
}
