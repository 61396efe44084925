interface SegmentsProps<T extends string> {
  readonly label: string
  readonly value: T
  readonly choices: readonly { readonly value: T; readonly label: string; readonly hint?: string }[]
  readonly onChange: (value: T) => void
}

/** A row of exclusive buttons, for choices that change a view. Arrow keys move as in any radio group. */
export function Segments<T extends string>({ label, value, choices, onChange }: SegmentsProps<T>) {
  const at = choices.findIndex((choice) => choice.value === value)
  return (
    <div className="segments" role="radiogroup" aria-label={label}>
      {choices.map((choice) => (
        <button
          key={choice.value}
          type="button"
          className="button"
          role="radio"
          aria-checked={choice.value === value}
          tabIndex={choice.value === value ? 0 : -1}
          title={choice.hint}
          onClick={() => onChange(choice.value)}
          onKeyDown={(event) => {
            const by =
              event.key === 'ArrowRight' || event.key === 'ArrowDown'
                ? 1
                : event.key === 'ArrowLeft' || event.key === 'ArrowUp'
                  ? -1
                  : 0
            if (by === 0) return
            event.preventDefault()
            const next = choices[(at + by + choices.length) % choices.length]
            if (next === undefined) return
            onChange(next.value)
            const group = event.currentTarget.parentElement
            ;(group?.children[choices.indexOf(next)] as HTMLElement | undefined)?.focus()
          }}
        >
          {choice.label}
        </button>
      ))}
    </div>
  )
}
