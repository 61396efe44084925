import { Quantity } from '../controls/quantity.tsx'
import type { LiveReading, ReadingLine, StateReading } from './live-reading.ts'

interface ReadingColumnProps {
  readonly reading: LiveReading | null
  /** Flags of the settled numbers, plain sentences. */
  readonly warnings: readonly string[]
  readonly comparisons: readonly [readonly string[], readonly string[]]
  readonly onHelp: (key: string) => void
}

function Lines({
  lines,
  tone,
  onHelp,
}: {
  lines: readonly ReadingLine[]
  tone?: 'on' | 'off'
  onHelp: (key: string) => void
}) {
  return lines.map((one) => (
    <Quantity
      key={one.key}
      label={one.label}
      text={one.text}
      detail={one.detail}
      helpKey={one.help}
      tone={one.warning === null ? tone : 'warn'}
      onHelp={onHelp}
    />
  ))
}

function StateSection({
  state,
  reading,
  comparisons,
  onHelp,
}: {
  state: 'on' | 'off'
  reading: StateReading
  comparisons: readonly string[]
  onHelp: (key: string) => void
}) {
  const warnings = reading.lines.flatMap((one) => (one.warning === null ? [] : [one.warning]))
  return (
    <section aria-label={reading.title}>
      <h2 className={`state-title ${state}`}>{reading.title}</h2>
      <Lines lines={reading.lines} tone={state} onHelp={onHelp} />
      <ul className="warnings">
        {warnings.map((text) => (
          <li key={text}>{text}</li>
        ))}
      </ul>
      <table className="weights">
        <caption className="visually-hidden">Law weights, {reading.title.toLowerCase()}</caption>
        <tbody>
          {reading.weights.map(({ label, weight, shown }) => (
            <tr key={label} data-shown={shown}>
              <td>{label}</td>
              <td>{weight === null ? '—' : weight < 0.005 ? '< 0.01' : weight.toFixed(2)}</td>
            </tr>
          ))}
        </tbody>
      </table>
      {comparisons.length === 0 ? null : (
        <details>
          <summary>Comparisons</summary>
          <ul>
            {comparisons.map((text) => (
              <li key={text}>{text}</li>
            ))}
          </ul>
        </details>
      )}
    </section>
  )
}

/** Numbers at the present threshold, each at its place, with interval, unit and plain warning. */
export function ReadingColumn({ reading, warnings, comparisons, onHelp }: ReadingColumnProps) {
  return (
    <aside className="reading" aria-label="Numbers at this threshold" tabIndex={-1}>
      {reading === null ? (
        <section>
          <h2>Reading the record …</h2>
        </section>
      ) : (
        <>
          <section aria-label="Levels and threshold">
            <h2>At this threshold</h2>
            <Lines lines={reading.general} onHelp={onHelp} />
          </section>
          <StateSection state="on" reading={reading.states[1]} comparisons={comparisons[1]} onHelp={onHelp} />
          <StateSection
            state="off"
            reading={reading.states[0]}
            comparisons={comparisons[0]}
            onHelp={onHelp}
          />
          <section aria-label="Warnings" aria-live="polite">
            <h2>{warnings.length === 0 ? 'No warnings' : 'Before you use these numbers'}</h2>
            <ul className="warnings">
              {warnings.map((text) => (
                <li key={text}>{text}</li>
              ))}
            </ul>
          </section>
        </>
      )}
    </aside>
  )
}
