import { useRef } from 'react'
import type { Theme } from '../../state/view/view-store.ts'
import { useApp, useChoices, useSaveStatus, useView } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { TakeAway } from './take-away.tsx'

const NEXT_THEME: Readonly<Record<Theme, Theme>> = { system: 'dark', dark: 'light', light: 'system' }

interface TopBarProps {
  readonly onFiles: (files: readonly File[]) => void
  readonly railOpen: boolean
  readonly onRail: () => void
}

/** Files, undo, what is saved, what can be taken away, help. */
export function TopBar({ onFiles, railOpen, onRail }: TopBarProps) {
  const app = useApp()
  const input = useRef<HTMLInputElement>(null)
  const undo = useChoices((choices) => choices.past.at(-1)?.label ?? null)
  const redo = useChoices((choices) => choices.future.at(-1)?.label ?? null)
  const name = useChoices(
    ({ session }) => session.emitters.find(({ id }) => id === session.currentEmitterId)?.name ?? '',
  )
  const theme = useView((view) => view.theme)
  const status = useSaveStatus()
  const saved =
    status.kind === 'saved'
      ? 'Saved here'
      : status.kind === 'saving'
        ? 'Saving …'
        : status.kind === 'read-only'
          ? 'Not saved: other tab'
          : 'Not saved'
  return (
    <header className="bar">
      <h1 className="wordmark">Heliograph</h1>
      <Button className="rail-toggle" aria-expanded={railOpen} aria-controls="rail" onClick={onRail}>
        Choices
      </Button>
      <label className="button" htmlFor="open-files">
        Open files
      </label>
      <input
        ref={input}
        id="open-files"
        className="visually-hidden"
        type="file"
        multiple
        aria-label="Open files"
        onChange={(event) => {
          const files = [...(event.target.files ?? [])]
          event.target.value = ''
          if (files.length > 0) onFiles(files)
        }}
      />
      <Button
        disabled={undo === null}
        title={undo === null ? 'Nothing to undo' : `Undo: ${undo}`}
        onClick={() => app.choices.undo()}
      >
        Undo
      </Button>
      <Button
        disabled={redo === null}
        title={redo === null ? 'Nothing to redo' : `Redo: ${redo}`}
        onClick={() => app.choices.redo()}
      >
        Redo
      </Button>
      <strong className="emitter-name" title={name}>
        {name}
      </strong>
      <span className="spring" />
      <span className="saved" role="status">
        {saved}
      </span>
      <TakeAway />
      <Button
        look="quiet"
        title="Appearance: automatic, dark or light"
        onClick={() => app.setTheme(NEXT_THEME[theme])}
      >
        {theme === 'system' ? 'Auto' : theme === 'dark' ? 'Dark' : 'Light'}
      </Button>
      <Button look="quiet" onClick={() => app.view.setState({ helpOpen: true, helpEntry: null })}>
        Help
      </Button>
    </header>
  )
}
