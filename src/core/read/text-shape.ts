import { columnRoles } from './column-roles.ts'
import { decimalsOf } from './decimal.ts'
import type { TextAnswer } from './import-answer.ts'
import { binIn, isUnitWord, roleIn, tickIn, unitIn } from './said-by-name.ts'
import { timeGrid } from './time-grid.ts'

/** What the first lines of a text file look like. */
export interface TextShape {
  readonly answer: TextAnswer
  readonly header: readonly string[]
  readonly rows: readonly (readonly string[])[]
  /** Step of the time column in its first rows, in the file's unit. */
  readonly step: number | null
  /** Whether names in the file say what columns hold; else it is guessed from the numbers. */
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
const MOST_HEADER_LINES = 30
const MOST_DECIMALS = 15
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
  const headerLines = linesBefore(split, numeric)
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
  const header =
    headerLines > 0
      ? headerOf(split.slice(0, headerLines), width)
      : namesIn(comment === undefined ? [] : splitRow(comment, delimiter), width)
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

/** Lines before the table: up to its first row of numbers, or up to a line of names below numbers of another width. */
function linesBefore(split: readonly (readonly string[])[], numeric: readonly boolean[]): number {
  const most = Math.min(split.length, MOST_HEADER_LINES)
  let first = 0
  while (first < most && !numeric[first]) first++
  if (first === most) return split.length
  for (let names = most - 2; names > first; names--) {
    const width = split[names].length
    if (numeric[names] || !numeric[names + 1] || split[names + 1].length !== width) continue
    return split.some((row, i) => i < names && numeric[i] && row.length === width) ? first : names + 1
  }
  return first
}

function namesIn(fields: readonly string[], width: number): string[] {
  return fields.length === width ? fields.map((name) => name.replace(/^(["'])(.*)\1$/, '$2')) : []
}

/** Names from the lines above the numbers; a last line of units only is joined to the names above it. */
function headerOf(lines: readonly (readonly string[])[], width: number): string[] {
  const last = lines[lines.length - 1]
  const above = lines.length > 1 ? namesIn(lines[lines.length - 2], width) : []
  if (above.length === 0 || last.length > width || !last.every((field) => field === '' || isUnitWord(field)))
    return namesIn(last, width)
  return above.map((name, i) => {
    const unit = (last[i] ?? '').replace(/^[([{]\s*|\s*[)\]}]$/g, '')
    return unit === '' ? name : `${name} (${unit})`
  })
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
  const columns = columnRoles(header, valuesOf, width)
  const timed = columns.findIndex((role) => role === 'time' || role === 'arrival')
  const timeName = header[timed] ?? ''
  const unit = unitIn(timeName)
  // Fractions of a tick are not read as arrival times.
  const tick =
    columns[timed] === 'time' || valuesOf(Math.max(timed, 0)).every(Number.isInteger)
      ? tickIn(timeName)
      : null
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
      timeUnit: unit ?? (tick === null ? null : 'ticks'),
      tickSeconds: unit === null ? tick : null,
      binSeconds,
    },
    header,
    rows,
    step: columns.includes('time')
      ? (timeGrid(valuesOf(timed), 10 ** -Math.min(decimals, MOST_DECIMALS))?.step ?? null)
      : null,
    rolesSaid: header.some((name) => roleIn(name) !== null),
  }
}
