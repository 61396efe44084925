import { useId } from 'react'

interface ChoiceFieldProps<T extends string> {
  readonly label: string
  readonly value: T
  readonly choices: readonly { readonly value: T; readonly label: string; readonly disabled?: boolean }[]
  readonly note?: string
  readonly onChange: (value: T) => void
}

/** One of a few named choices. */
export function ChoiceField<T extends string>({
  label,
  value,
  choices,
  note,
  onChange,
}: ChoiceFieldProps<T>) {
  const id = useId()
  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      <select
        id={id}
        value={value}
        aria-describedby={note === undefined ? undefined : `${id}-note`}
        onChange={(event) => {
          const chosen = choices.find((choice) => choice.value === event.target.value)
          if (chosen !== undefined) onChange(chosen.value)
        }}
      >
        {choices.map((choice) => (
          <option key={choice.value} value={choice.value} disabled={choice.disabled}>
            {choice.label}
          </option>
        ))}
      </select>
      {note === undefined ? null : (
        <span className="note" id={`${id}-note`}>
          {note}
        </span>
      )}
    </div>
  )
}
