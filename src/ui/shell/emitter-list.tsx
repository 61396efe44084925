import { withoutEmitter } from '../../state/choices/session-changes.ts'
import { useApp, useChoices } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'

/** The emitters of the session; one of them is on the bench. */
export function EmitterList() {
  const app = useApp()
  const emitters = useChoices((choices) => choices.session.emitters)
  const current = useChoices((choices) => choices.session.currentEmitterId)
  const show = (id: string): void => app.choices.look((session) => ({ ...session, currentEmitterId: id }))
  return (
    <section aria-label="Emitters">
      <h2>Emitters</h2>
      <ul className="emitters">
        {emitters.map(({ id, name }) => (
          <li key={id}>
            <button type="button" aria-current={id === current} title={name} onClick={() => show(id)}>
              {name}
            </button>
            {id === current ? (
              <Button
                look="quiet"
                aria-label={`Take ${name} out of the session`}
                title="Take out of the session (can be undone)"
                onClick={() =>
                  app.choices.change({ label: `take out ${name}` }, (session) => withoutEmitter(session, id))
                }
              >
                ✕
              </Button>
            ) : null}
          </li>
        ))}
      </ul>
      {emitters.length === 0 ? <p className="aside">No emitters. Open files, or drop them here.</p> : null}
    </section>
  )
}
