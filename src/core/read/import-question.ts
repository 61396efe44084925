import { type ImportAnswer, missingAnswers, type TimeUnit } from './import-answer.ts'

/** A question the file does not answer; the answer goes into the field of the same name (`content` of text: into `columns`). */
export interface ImportQuestion {
  readonly key: 'timeUnit' | 'binSeconds' | 'content' | 'columns'
  readonly text: string
  /** What can be answered; null for a number (s) or one role per column. */
  readonly choices: readonly string[] | null
  /** The choice that fits best, or null; never taken without asking. */
  readonly guess: string | null
  /** Whether the file cannot be read before it is answered; else the answer proposed is only to be confirmed. */
  readonly required: boolean
}

const QUESTIONS: Readonly<Record<ImportQuestion['key'], Pick<ImportQuestion, 'text' | 'choices'>>> = {
  timeUnit: { text: 'In which unit are the times?', choices: ['s', 'ms', 'us', 'ns', 'ticks'] },
  binSeconds: { text: 'How long is one bin?', choices: null },
  content: { text: 'Are the numbers arrival times or counts per bin?', choices: ['arrival', 'counts'] },
  columns: { text: 'Which columns hold counts or arrival times?', choices: null },
}

/** Questions an answer leaves open; `confirm` puts first whether single numbers are arrival times or counts. */
export function questionsOf(
  answer: ImportAnswer,
  guesses: { readonly unit: TimeUnit | null; readonly content: string | null },
  confirm: boolean,
): ImportQuestion[] {
  const missing = missingAnswers(answer)
  const keys = confirm && !missing.includes('content') ? (['content', ...missing] as const) : missing
  return keys.map((key) => ({
    key,
    ...QUESTIONS[key],
    guess: key === 'timeUnit' ? guesses.unit : key === 'content' ? guesses.content : null,
    required: missing.includes(key),
  }))
}
