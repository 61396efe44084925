import { useState } from 'react'

interface QuantityProps {
  readonly label: string
  /** What is shown, units included; the same text is copied. */
  readonly text: string
  /** Second line: interval, reason, or status. */
  readonly detail?: string | undefined
  readonly helpKey?: string | undefined
  readonly tone?: 'on' | 'off' | 'warn' | undefined
  readonly onHelp?: ((key: string) => void) | undefined
}

/** One number of the reading column at a fixed place: press it to copy, press its name for help. */
export function Quantity({ label, text, detail, helpKey, tone, onHelp }: QuantityProps) {
  const [copied, setCopied] = useState(false)
  const copy = (): void => {
    const line = detail === undefined ? `${label}: ${text}` : `${label}: ${text} ${detail}`
    void navigator.clipboard
      ?.writeText(line)
      .then(() => {
        setCopied(true)
        setTimeout(() => setCopied(false), 900)
      })
      .catch(() => setCopied(false))
  }
  return (
    <div className={`quantity ${tone ?? ''}`}>
      {helpKey !== undefined && onHelp !== undefined ? (
        <button type="button" className="term" onClick={() => onHelp(helpKey)} title="What is this?">
          {label}
        </button>
      ) : (
        <span className="term">{label}</span>
      )}
      <button
        type="button"
        className="figure"
        onClick={copy}
        title="Copy"
        aria-label={`${label}: ${text}. Copy`}
      >
        {copied ? 'copied' : text}
      </button>
      <span className="detail">{detail ?? '\u00a0'}</span>
    </div>
  )
}
