import { useEffect, useState } from 'react'
import { BenchReading, BenchScreen } from '../bench/bench-screen.tsx'
import { ChoicesRail } from '../bench/choices-rail.tsx'
import { useApp, useView } from '../bridge/app-context.tsx'
import { usePalette } from '../bridge/use-theme.ts'
import { EmitterList } from './emitter-list.tsx'
import { HelpSheet } from './help-sheet.tsx'
import { Notices } from './notices.tsx'
import { TopBar } from './top-bar.tsx'
import { useIncoming } from './use-incoming.tsx'

/** The whole app: bar, rail of choices, bench, numbers. */
export function App() {
  const app = useApp()
  const palette = usePalette()
  const [railOpen, setRailOpen] = useState(false)
  const helpOpen = useView((view) => view.helpOpen)
  const helpEntry = useView((view) => view.helpEntry)
  const incoming = useIncoming()

  useEffect(() => {
    const keys = (event: KeyboardEvent): void => {
      if (!(event.ctrlKey || event.metaKey)) return
      const key = event.key.toLowerCase()
      const field = event.target instanceof HTMLInputElement && event.target.type === 'text'
      if (field) return
      if (key === 'z' && !event.shiftKey) {
        event.preventDefault()
        app.choices.undo()
      } else if (key === 'y' || (key === 'z' && event.shiftKey)) {
        event.preventDefault()
        app.choices.redo()
      }
    }
    addEventListener('keydown', keys)
    return () => removeEventListener('keydown', keys)
  }, [app])

  return (
    <div
      className="app"
      onDragOver={incoming.dragOver}
      onDragLeave={incoming.dragLeave}
      onDrop={incoming.drop}
    >
      <TopBar onFiles={incoming.take} railOpen={railOpen} onRail={() => setRailOpen(!railOpen)} />
      <Notices />
      <nav className="rail" id="rail" data-open={railOpen} aria-label="Emitters and choices">
        <EmitterList />
        <ChoicesRail />
      </nav>
      <BenchScreen palette={palette} />
      <BenchReading />
      {incoming.element}
      {helpOpen ? (
        <HelpSheet entry={helpEntry} onClose={() => app.view.setState({ helpOpen: false })} />
      ) : null}
    </div>
  )
}
