/** Units of time a file may use; `ticks` needs the length of one. */
export type TimeUnit = 's' | 'ms' | 'us' | 'ns' | 'ticks'

export const UNIT_SECONDS: Readonly<Record<Exclude<TimeUnit, 'ticks'>, number>> = {
  s: 1,
  ms: 1e-3,
  us: 1e-6,
  ns: 1e-9,
}

export type ColumnRole = 'time' | 'arrival' | 'counts' | 'rate-cps' | 'rate-kcps' | 'gate' | 'ignore'

/** How delimited text is to be read. */
export interface TextAnswer {
  readonly kind: 'text'
  /** One of tab, comma, semicolon; a space stands for runs of spaces or tabs. */
  readonly delimiter: '\t' | ',' | ';' | ' '
  readonly decimalComma: boolean
  /** Lines of column names after comments and blank lines. */
  readonly headerLines: number
  readonly columns: readonly ColumnRole[]
  readonly names: readonly string[]
  readonly timeUnit: TimeUnit | null
  /** Length of a tick when the unit is `ticks`, s. */
  readonly tickSeconds: number | null
  /** Bin width of counts without a time column, s. */
  readonly binSeconds: number | null
}

/** How a NumPy array is to be read. */
export interface ArrayAnswer {
  readonly kind: 'npy' | 'npz'
  /** Name of the array inside a .npz; null for a .npy. */
  readonly member: string | null
  readonly content: 'arrival' | 'counts' | null
  readonly timeUnit: TimeUnit | null
  readonly tickSeconds: number | null
  readonly binSeconds: number | null
  /** Which axis of a 2-D array counts emitters. */
  readonly emitters: 'rows' | 'columns'
}

/** What the user confirms before a file is read; plain JSON, remembered for files of the same shape. */
export type ImportAnswer = TextAnswer | ArrayAnswer

/** Seconds of one unit of time in the file; null while it is not known. */
export function unitSeconds(answer: Pick<ImportAnswer, 'timeUnit' | 'tickSeconds'>): number | null {
  if (answer.timeUnit === null) return null
  return answer.timeUnit === 'ticks' ? answer.tickSeconds : UNIT_SECONDS[answer.timeUnit]
}

/** What is still missing before the file can be read; empty when it is complete. */
export function missingAnswers(answer: ImportAnswer): ('timeUnit' | 'binSeconds' | 'content' | 'columns')[] {
  const missing: ('timeUnit' | 'binSeconds' | 'content' | 'columns')[] = []
  const unit = unitSeconds(answer)
  const unitKnown = unit !== null && unit > 0 && Number.isFinite(unit)
  const binKnown = answer.binSeconds !== null && answer.binSeconds > 0 && Number.isFinite(answer.binSeconds)
  if (answer.kind === 'text') {
    const has = (role: ColumnRole): boolean => answer.columns.includes(role)
    const counted = has('counts') || has('rate-cps') || has('rate-kcps')
    if (!counted && !has('arrival')) missing.push('columns')
    if ((has('time') || has('arrival')) && !unitKnown) missing.push('timeUnit')
    if (counted && !has('time') && !has('arrival') && !binKnown) missing.push('binSeconds')
    return missing
  }
  if (answer.content === null) missing.push('content')
  if (answer.content === 'arrival' && !unitKnown) missing.push('timeUnit')
  if (answer.content === 'counts' && !binKnown) missing.push('binSeconds')
  return missing
}
