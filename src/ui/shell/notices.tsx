import { useState } from 'react'
import { useApp, useSaveStatus } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { takeAway } from './take-away-files.ts'

/** What the user must know about saving: not writable, full, damaged; each with a way out. */
export function Notices() {
  const app = useApp()
  const status = useSaveStatus()
  const [hidden, setHidden] = useState(false)
  const damaged = app.opened.kind === 'damaged' && !hidden ? app.opened : null
  const newer = damaged?.keptAs === 'session'
  const sentence = status.kind === 'read-only' || status.kind === 'failed' ? status.sentence : null
  if (sentence === null && damaged === null) return null
  return (
    <div className="notices" role="alert">
      {sentence === null ? null : (
        <div className="banner">
          <span>{sentence}</span>
          <Button onClick={() => void takeAway(app, 'session')}>Save to a file</Button>
        </div>
      )}
      {damaged === null ? null : (
        <div className="banner">
          <span>
            {newer
              ? `The saved session was left as it is: ${damaged.sentence} Changes made here are not saved.`
              : `The saved session could not be read and was set aside, not deleted: ${damaged.sentence} A new session was begun.`}
          </span>
          {newer ? null : <Button onClick={() => void downloadDamaged()}>Download what was set aside</Button>}
          <Button look="quiet" onClick={() => setHidden(true)}>
            Close
          </Button>
        </div>
      )}
    </div>
  )

  async function downloadDamaged(): Promise<void> {
    const entries = await app.store.damaged()
    const url = URL.createObjectURL(
      new Blob([JSON.stringify(entries, null, 2)], { type: 'application/json' }),
    )
    const link = document.createElement('a')
    link.href = url
    link.download = 'damaged session.json'
    link.click()
    setTimeout(() => URL.revokeObjectURL(url), 60_000)
  }
}
