import { decimalsOf } from './decimal.ts'
import type { ColumnRole, TextAnswer, TimeUnit } from './import-answer.ts'

/** What the first lines of a text file look like. */
export interface TextShape {
  readonly answer: TextAnswer
  readonly header: readonly string[]
  readonly rows: readonly (readonly string[])[]
  /** Step of the time column in its first rows, in the file's unit. */
  readonly step: number | null
  /** Most decimals seen in the arrival column. */
  readonly decimals: number
  /** Roles and units were said by the file (header) rather than guessed. */
  readonly timeUnitSaid: boolean
  readonly rolesSaid: boolean
}

const DIALECTS: readonly { delimiter: TextAnswer['delimiter']; decimalComma: boolean }[] = [
  { delimiter: '\t', decimalComma: false },
  { delimiter: ';', decimalComma: false },
  { delimiter: ',', decimalComma: false },
  { delimiter: ' ', decimalComma: false },
  { delimiter: '\t', decimalComma: true },
  { delimiter: ';', decimalComma: true },
  { delimiter: ' ', decimalComma: true },
]
const LONGEST_NAME = 200
const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/
const COMMA_NUMBER = /^[+-]?(?:\d+,?\d*|,\d+)(?:[eE][+-]?\d+)?$/

export function splitRow(line: string, delimiter: string): string[] {
  const text = line.trim()
  if (delimiter === ' ') return text.split(/[ \t]+/)
  const fields = (delimiter === '\t' ? line.replace(/^ +| +$/g, '') : text)
    .split(delimiter)
    .map((field) => field.trim())
  // Some programs end every row with a separator.
  if (fields.length > 1 && fields[fields.length - 1] === '') fields.pop()
  return fields
}

function isNumber(field: string, decimalComma: boolean): boolean {
  return (decimalComma ? COMMA_NUMBER : NUMBER).test(field)
}

/** Whether a line is a comment: `#`, `%`, `//`, and `;` where it does not separate columns. */
export function commentMark(line: string, delimiter: string): boolean {
  return /^\s*(#|%|\/\/)/.test(line) || (delimiter !== ';' && /^\s*;/.test(line))
}

/** Unit of time named in a column's name: `time (ms)`, `t/s`, `arrival_ns`; null when none is. */
export function unitIn(name: string): TimeUnit | null {
  const match =
    /[([{/_\s,]\s*(ms|µs|μs|us|ns|s|sec|seconds|milliseconds|microseconds|nanoseconds|ticks?)\s*[)\]}]?\s*$/i.exec(
      name.trim(),
    )
  if (match === null) return null
  const word = match[1].toLowerCase()
  if (word.startsWith('tick')) return 'ticks'
  if (word === 'ms' || word.startsWith('milli')) return 'ms'
  if (word === 'ns' || word.startsWith('nano')) return 'ns'
  if (word === 'us' || word === 'µs' || word === 'μs' || word.startsWith('micro')) return 'us'
  return 's'
}

/** Bin width named in a column's name: `counts per 10 ms`, `counts/bin (5 ms)`; null when none is. */
export function binIn(name: string): number | null {
  const match = /(\d+(?:[.,]\d+)?)\s*(ms|µs|μs|us|ns|s)\b/i.exec(name)
  if (match === null) return null
  const scale = { ms: 1e-3, µs: 1e-6, μs: 1e-6, us: 1e-6, ns: 1e-9, s: 1 }[match[2].toLowerCase()] ?? 1
  return Number(match[1].replace(',', '.')) * scale
}

function roleIn(name: string): ColumnRole | null {
  if (/arriv|macro\s*time|photon\s*time|time\s*tag|timestamp/i.test(name)) return 'arrival'
  if (/gate|field|beam|shutter/i.test(name)) return 'gate'
  if (/kcps|kHz|kilocounts/i.test(name)) return 'rate-kcps'
  if (/\bcps\b|counts?\s*(per|\/)\s*s(ec(ond)?)?\b|\bHz\b|rate/i.test(name)) return 'rate-cps'
  if (/^\s*(t|time|zeit|temps)(?![a-z])/i.test(name)) return 'time'
  if (/count|intens|photons|signal|emitter|dot|trace/i.test(name)) return 'counts'
  return null
}

/** Reads the first lines; null when no line is a row of numbers. */
export function textShape(text: string): TextShape | null {
  const lines = text.split(/\r\n|\n|\r/)
  let best: { score: number; shape: TextShape } | null = null
  for (const dialect of DIALECTS) {
    const shape = shapeIn(lines, dialect)
    if (shape !== null && (best === null || shape.score > best.score + 1e-9)) best = shape
  }
  return best?.shape ?? null
}

function shapeIn(
  lines: readonly string[],
  { delimiter, decimalComma }: (typeof DIALECTS)[number],
): { score: number; shape: TextShape } | null {
  const body = lines.filter((line) => line.trim() !== '' && !commentMark(line, delimiter))
  if (body.length === 0) return null
  const split = body.map((line) => splitRow(line, delimiter))
  const numeric = split.map((row) => row.every((field) => isNumber(field, decimalComma)))
  let headerLines = 0
  while (headerLines < Math.min(split.length, 30) && !numeric[headerLines]) headerLines++
  if (headerLines === split.length) return null
  const rows = split.slice(headerLines)
  const width = rows[0].length
  const good = rows.filter((row, i) => row.length === width && numeric[headerLines + i]).length
  if (good === 0) return null
  const score = good / rows.length + (width > 1 ? 0.5 : 0) - 0.01 * headerLines
  const comment = lines
    .filter((line) => commentMark(line, delimiter))
    .at(-1)
    ?.replace(/^\s*(#|%|\/\/|;)+\s*/, '')
  const named =
    headerLines > 0 ? split[headerLines - 1] : comment === undefined ? [] : splitRow(comment, delimiter)
  const header = named.length === width ? named.map((name) => name.replace(/^(["'])(.*)\1$/, '$2')) : []
  return {
    score,
    shape: describe(
      rows.filter((row) => row.length === width),
      header,
      { delimiter, decimalComma, headerLines },
      comment ?? '',
    ),
  }
}

function describe(
  rows: readonly (readonly string[])[],
  header: readonly string[],
  dialect: Pick<TextAnswer, 'delimiter' | 'decimalComma' | 'headerLines'>,
  comment: string,
): TextShape {
  const width = rows[0].length
  const valuesOf = (column: number): number[] =>
    rows.map((row) => Number(row[column].replace(',', '.'))).filter((value) => !Number.isNaN(value))
  const said = header.map(roleIn)
  const first = valuesOf(0)
  const rising = first.length > 1 && first.every((value, i) => i === 0 || value > first[i - 1])
  const notFalling = first.every((value, i) => i === 0 || value >= first[i - 1])
  const steps = first.slice(1).map((value, i) => value - first[i])
  const step =
    steps.length === 0 ? null : [...steps].sort((a, b) => a - b)[Math.floor((steps.length - 1) / 2)]
  const even =
    rising &&
    step !== null &&
    steps.filter((one) => Math.abs(one - step) < 0.3 * step).length >= 0.8 * steps.length
  const whole = (column: number): boolean => valuesOf(column).every(Number.isInteger)
  const columns = Array.from({ length: width }, (_, column): ColumnRole => {
    const role = said[column] ?? null
    if (role !== null && !(role === 'time' && column > 0 && said.indexOf('time') < column)) {
      return role === 'time' && width === 1 ? 'arrival' : role
    }
    if (column === 0 && width > 1 && even) return 'time'
    if (column === 0 && width === 1)
      return notFalling && first.length > 2 && (first.at(-1) as number) > first[0] ? 'arrival' : 'counts'
    return whole(column) ? 'counts' : 'rate-cps'
  })
  const timed = columns.findIndex((role) => role === 'time' || role === 'arrival')
  const unit = timed < 0 ? null : unitIn(header[timed] ?? '')
  const decimals = timed < 0 ? 0 : rows.reduce((most, row) => Math.max(most, decimalsOf(row[timed])), 0)
  const counted = columns.findIndex((role) => role === 'counts')
  const binSeconds =
    columns.includes('time') || counted < 0 ? null : (binIn(header[counted] ?? '') ?? binIn(comment))
  return {
    answer: {
      kind: 'text',
      ...dialect,
      columns,
      names: Array.from(
        { length: width },
        (_, column) => header[column]?.slice(0, LONGEST_NAME) ?? `column ${column + 1}`,
      ),
      timeUnit: unit,
      tickSeconds: null,
      binSeconds,
    },
    header,
    rows,
    step: timed < 0 ? null : step,
    decimals: Math.min(decimals, 12),
    timeUnitSaid: unit !== null,
    rolesSaid: said.some((role) => role !== null),
  }
}
