import { flushSync } from 'react-dom'
import { currentEmitter, withDifference } from '../../state/choices/session-changes.ts'
import type { AppModel } from '../bridge/app-model.ts'

/** Painters that follow the threshold. */
export const LIVE_PAINTERS = ['upper-live', 'dwells', 'strip'] as const

/** Shows a threshold without choosing it; null goes back to the chosen one. Numbers and canvases change together. */
export function previewThreshold(app: AppModel, value: number | null): void {
  flushSync(() => app.view.setState({ liveThreshold: value }))
  app.loop.request(...LIVE_PAINTERS)
  app.loop.flush()
}

/** Chooses a threshold by hand for the emitter on the bench. */
export function commitThreshold(app: AppModel, value: number, by: 'drag' | 'key' | 'field'): void {
  const emitter = currentEmitter(app.choices.store.getState().session)
  if (emitter === null) return
  flushSync(() => {
    app.view.setState({ liveThreshold: null })
    app.choices.change(
      {
        label: `threshold ${value} counts`,
        ...(by === 'key' ? { joinWith: `threshold ${emitter.id}` } : {}),
      },
      (session) => withDifference(session, emitter.id, { threshold: { rule: 'hand', handCounts: value } }),
    )
  })
  app.loop.request(...LIVE_PAINTERS)
  app.loop.flush()
}
