import { useEffect, useId, useState } from 'react'

interface NumberFieldProps {
  readonly label: string
  readonly unit: string
  readonly value: number | null
  readonly low: number
  readonly high: number
  /** Arrow keys change the value by this; Shift by ten times. */
  readonly step: number
  readonly note?: string
  readonly disabled?: boolean
  /** Digits kept when showing the value. */
  readonly digits?: number
  readonly onChange: (value: number) => void
}

function show(value: number | null, digits: number): string {
  return value === null ? '' : String(Number(value.toPrecision(digits)))
}

/** A number with its unit. Typing commits on Enter or on leaving; a value outside the range is refused in words. */
export function NumberField({
  label,
  unit,
  value,
  low,
  high,
  step,
  note,
  disabled,
  digits = 6,
  onChange,
}: NumberFieldProps) {
  const id = useId()
  const [text, setText] = useState(show(value, digits))
  const [problem, setProblem] = useState<string | null>(null)
  useEffect(() => {
    setText(show(value, digits))
    setProblem(null)
  }, [value, digits])

  const commit = (raw: string): void => {
    const number = Number(raw.replace(',', '.'))
    if (raw.trim() === '' || !Number.isFinite(number)) {
      setProblem(`Expected a number, got “${raw}”.`)
      return
    }
    if (number < low || number > high) {
      setProblem(`Allowed: ${show(low, digits)} to ${show(high, digits)} ${unit}.`)
      return
    }
    setProblem(null)
    if (number !== value) onChange(number)
  }
  const nudge = (by: number): void => {
    const from = Number(text.replace(',', '.'))
    if (!Number.isFinite(from)) return
    const next = Math.min(high, Math.max(low, Number((from + by).toPrecision(12))))
    setText(show(next, digits))
    commit(String(next))
  }

  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      <span className="entry">
        <input
          id={id}
          className="number"
          type="text"
          inputMode="decimal"
          value={text}
          disabled={disabled}
          aria-invalid={problem !== null}
          aria-describedby={problem !== null || note !== undefined ? `${id}-note` : undefined}
          onChange={(event) => setText(event.target.value)}
          onBlur={() => commit(text)}
          onKeyDown={(event) => {
            if (event.key === 'Enter') commit(text)
            if (event.key === 'Escape') {
              setText(show(value, digits))
              setProblem(null)
            }
            if (event.key === 'ArrowUp' || event.key === 'ArrowDown') {
              event.preventDefault()
              nudge((event.key === 'ArrowUp' ? 1 : -1) * step * (event.shiftKey ? 10 : 1))
            }
          }}
        />
        <span className="unit">{unit}</span>
      </span>
      {problem !== null ? (
        <span className="problem" id={`${id}-note`} role="alert">
          {problem}
        </span>
      ) : note !== undefined ? (
        <span className="note" id={`${id}-note`}>
          {note}
        </span>
      ) : null}
    </div>
  )
}
