import { useState } from 'react'
import { siDuration } from '../../core/numeric/units.ts'
import {
  type ColumnRole,
  type ImportAnswer,
  missingAnswers,
  type TextAnswer,
  type TimeUnit,
} from '../../core/read/import-answer.ts'
import type { Preview } from '../../core/read/import-preview.ts'
import { Button } from '../controls/button.tsx'
import { ChoiceField } from '../controls/choice-field.tsx'
import { NumberField } from '../controls/number-field.tsx'
import { Sheet } from '../controls/sheet.tsx'

interface ImportSheetProps {
  readonly preview: Preview
  /** Files still to come. */
  readonly waiting: number
  /** 0..1 while the file is read; null before. */
  readonly progress: number | null
  readonly problem: string | null
  readonly onOpen: (answer: ImportAnswer) => void
  readonly onStop: () => void
  readonly onClose: () => void
}

const ROLES: readonly { value: ColumnRole; label: string }[] = [
  { value: 'time', label: 'time' },
  { value: 'arrival', label: 'arrival times' },
  { value: 'counts', label: 'counts' },
  { value: 'rate-cps', label: 'counts per s' },
  { value: 'rate-kcps', label: 'kilocounts per s' },
  { value: 'gate', label: 'gate, 0 or 1' },
  { value: 'ignore', label: 'leave out' },
]

const UNITS: readonly { value: TimeUnit | 'ask'; label: string }[] = [
  { value: 'ask', label: 'choose …' },
  { value: 's', label: 's' },
  { value: 'ms', label: 'ms' },
  { value: 'us', label: 'µs' },
  { value: 'ns', label: 'ns' },
  { value: 'ticks', label: 'ticks of …' },
]

/** What was understood of a file, what it does not say, and the way to correct both before it is read. */
export function ImportSheet({
  preview,
  waiting,
  progress,
  problem,
  onOpen,
  onStop,
  onClose,
}: ImportSheetProps) {
  const [answer, setAnswer] = useState<ImportAnswer | null>(preview.answer)
  const missing = answer === null ? [] : missingAnswers(answer)
  const asked = new Set(preview.questions.map(({ key }) => key))
  const change = (more: Partial<TextAnswer> | Partial<ImportAnswer>): void => {
    if (answer !== null) setAnswer({ ...answer, ...more } as ImportAnswer)
  }
  const reading = progress !== null
  return (
    <Sheet
      title={`Open ${preview.file}`}
      onClose={onClose}
      foot={
        <>
          {waiting > 0 ? (
            <span className="aside">{waiting} more after this one; same shape is read the same way.</span>
          ) : null}
          <span className="spring" />
          {reading ? (
            <>
              <progress value={progress} aria-label={`Reading ${preview.file}`} />
              <Button onClick={onStop}>Stop</Button>
            </>
          ) : (
            <>
              <Button onClick={onClose}>Cancel</Button>
              <Button
                look="primary"
                disabled={answer === null || missing.length > 0}
                onClick={() => {
                  if (answer !== null) onOpen(answer)
                }}
              >
                Open
              </Button>
            </>
          )}
        </>
      }
    >
      {preview.problem === null ? null : (
        <p className="notice bad" role="alert">
          {preview.problem.sentence} Nothing was changed.
        </p>
      )}
      {problem === null ? null : (
        <p className="notice bad" role="alert">
          {problem} Nothing was changed.
        </p>
      )}
      {answer === null ? null : (
        <>
          <ul>
            {preview.understood.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
          <div className="import-fields">
            {answer.kind === 'text' ? (
              <TextFields answer={answer} preview={preview} change={change} />
            ) : (
              <ArrayFields answer={answer} preview={preview} change={change} />
            )}
            {needsUnit(answer) ? (
              <>
                <ChoiceField
                  label="Unit of the times"
                  value={answer.timeUnit ?? 'ask'}
                  choices={UNITS}
                  {...(asked.has('timeUnit') && preview.guessedUnit !== null
                    ? {
                        note: `The file does not say. By the spacing it could be ${preview.guessedUnit === 'us' ? 'µs' : preview.guessedUnit}.`,
                      }
                    : {})}
                  onChange={(unit) => change({ timeUnit: unit === 'ask' ? null : unit })}
                />
                {answer.timeUnit === 'ticks' ? (
                  <NumberField
                    label="Length of a tick"
                    unit="ns"
                    value={answer.tickSeconds === null ? null : answer.tickSeconds * 1e9}
                    low={1e-6}
                    high={1e12}
                    step={1}
                    digits={12}
                    onChange={(value) => change({ tickSeconds: value * 1e-9 })}
                  />
                ) : null}
              </>
            ) : null}
            {needsBin(answer) ? (
              <NumberField
                label="Bin width of the file"
                unit="ms"
                value={answer.binSeconds === null ? null : answer.binSeconds * 1000}
                low={1e-4}
                high={1e6}
                step={1}
                {...(answer.binSeconds === null
                  ? { note: 'The file does not say; look in your recording notes.' }
                  : { note: siDuration(answer.binSeconds) })}
                onChange={(value) => change({ binSeconds: value / 1000 })}
              />
            ) : null}
          </div>
          {missing.length > 0 ? (
            <p className="notice">Still to answer: {missing.map((key) => MISSING[key]).join(', ')}.</p>
          ) : null}
        </>
      )}
    </Sheet>
  )
}

const MISSING = {
  timeUnit: 'the unit of the times',
  binSeconds: 'the bin width',
  content: 'arrival times or counts',
  columns: 'which columns hold counts or arrival times',
} as const

function needsUnit(answer: ImportAnswer): boolean {
  return answer.kind === 'text'
    ? answer.columns.includes('time') || answer.columns.includes('arrival')
    : answer.content === 'arrival'
}

function needsBin(answer: ImportAnswer): boolean {
  return answer.kind === 'text'
    ? !answer.columns.includes('time') && !answer.columns.includes('arrival')
    : answer.content === 'counts'
}

interface FieldsProps<T> {
  readonly answer: T
  readonly preview: Preview
  readonly change: (more: Partial<T>) => void
}

function TextFields({ answer, preview, change }: FieldsProps<TextAnswer>) {
  return (
    <>
      <ChoiceField
        label="Columns separated by"
        value={answer.delimiter}
        choices={[
          { value: ',', label: 'commas' },
          { value: ';', label: 'semicolons' },
          { value: '\t', label: 'tabs' },
          { value: ' ', label: 'spaces' },
        ]}
        onChange={(delimiter) => change({ delimiter })}
      />
      <ChoiceField
        label="Decimal sign"
        value={answer.decimalComma ? 'comma' : 'point'}
        choices={[
          { value: 'point', label: 'point' },
          { value: 'comma', label: 'comma' },
        ]}
        onChange={(sign) => change({ decimalComma: sign === 'comma' })}
      />
      <NumberField
        label="Lines of names"
        unit=""
        value={answer.headerLines}
        low={0}
        high={1000}
        step={1}
        onChange={(headerLines) => change({ headerLines: Math.round(headerLines) })}
      />
      <div className="preview-scroll" tabIndex={0} role="region" aria-label="First rows of the file">
        <table className="preview-table">
          <thead>
            <tr>
              {answer.columns.map((role, column) => (
                // Columns have no identity but their place.
                // oxlint-disable-next-line react/no-array-index-key
                <th key={column}>
                  <select
                    aria-label={`Column ${column + 1}, ${answer.names[column] ?? ''}`}
                    value={role}
                    onChange={(event) => {
                      const columns = [...answer.columns]
                      columns[column] = event.target.value as ColumnRole
                      change({ columns })
                    }}
                  >
                    {ROLES.map(({ value, label }) => (
                      <option key={value} value={value}>
                        {label}
                      </option>
                    ))}
                  </select>
                  <div>{answer.names[column]}</div>
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {preview.rows.map((row, index) => (
              // oxlint-disable-next-line react/no-array-index-key
              <tr key={index}>
                {row.map((field, column) => (
                  // oxlint-disable-next-line react/no-array-index-key
                  <td key={column}>{field}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </>
  )
}

type Arrays = Exclude<ImportAnswer, TextAnswer>

function ArrayFields({ answer, preview, change }: FieldsProps<Arrays>) {
  const dimensions =
    preview.arrays[preview.members.indexOf(answer.member ?? '')]?.dimensions ?? preview.dimensions
  return (
    <>
      {preview.members.length > 1 ? (
        <ChoiceField
          label="Array"
          value={answer.member ?? ''}
          choices={preview.members.map((member) => ({ value: member, label: member }))}
          onChange={(member) => {
            // Each array of an archive has its own proposal.
            const own = preview.arrays[preview.members.indexOf(member)]
            change(own?.answer ?? { member })
          }}
        />
      ) : null}
      <ChoiceField
        label="The numbers are"
        value={answer.content ?? 'ask'}
        choices={[
          { value: 'ask', label: 'choose …' },
          { value: 'arrival', label: 'arrival times' },
          { value: 'counts', label: 'counts per bin' },
        ]}
        onChange={(content) => change({ content: content === 'ask' ? null : content })}
      />
      {dimensions === 2 ? (
        <ChoiceField
          label="One emitter per"
          value={answer.emitters}
          choices={[
            { value: 'rows', label: 'row' },
            { value: 'columns', label: 'column' },
          ]}
          onChange={(emitters) => change({ emitters })}
        />
      ) : null}
    </>
  )
}
