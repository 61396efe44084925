import { useEffect } from 'react'
import { Sheet } from '../controls/sheet.tsx'
import { CAUTION, HELP } from './help-entries.ts'

/** Help: how to work, what each number is, the caution. Opens at an entry when one is named. */
export function HelpSheet({ entry, onClose }: { entry: string | null; onClose: () => void }) {
  useEffect(() => {
    if (entry !== null) document.getElementById(`help-${entry}`)?.scrollIntoView({ block: 'center' })
  }, [entry])
  return (
    <Sheet title="Help" onClose={onClose}>
      <h3>Working</h3>
      <p>
        Drag the threshold across the trace, or focus it and use the arrow keys (Shift: ten counts). Wheel
        over the trace to zoom, drag to move, arrow keys and + − with the trace focused. Ctrl+Z undoes every
        choice, Ctrl+Shift+Z brings it back. Drop files anywhere; drop an exported figure to restore its
        choices. Everything stays in this browser.
      </p>
      <dl>
        {HELP.map(({ key, term, text, source }) => (
          <div key={key} id={`help-${key}`} className="help-entry" data-wanted={key === entry}>
            <dt>{term}</dt>
            <dd>
              {text} <cite>{source}</cite>
            </dd>
          </div>
        ))}
      </dl>
      <h3>Caution</h3>
      <p className="notice">{CAUTION}</p>
    </Sheet>
  )
}
