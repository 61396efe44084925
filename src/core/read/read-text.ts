import type { ByteSource } from './byte-source.ts'
import { decimalsOf } from './decimal.ts'
import { firstText } from './first-text.ts'
import type { TextAnswer } from './import-answer.ts'
import type { ReadRecord } from './read-record.ts'
import { readArrivalTimes } from './read-arrival-times.ts'
import { readCountTable } from './read-count-table.ts'
import type { RowHooks } from './text-rows.ts'
import { commentMark, splitRow } from './text-shape.ts'
import { timeGrid } from './time-grid.ts'

const MOST_DECIMALS = 15

export interface TextRead {
  readonly records: ReadRecord[]
  readonly notes: string[]
}

/** A table of numbers as records; null when stopped. */
export async function readText(
  source: ByteSource,
  answer: TextAnswer,
  hooks: RowHooks,
): Promise<TextRead | null> {
  const arrival = answer.columns.indexOf('arrival')
  if (arrival >= 0) {
    const { decimals } = await firstTimes(source, answer, arrival)
    return readArrivalTimes(source, answer, hooks, decimals)
  }
  const column = answer.columns.indexOf('time')
  if (column < 0) return readCountTable(source, answer, hooks, null)
  const { times, decimals } = await firstTimes(source, answer, column)
  return readCountTable(source, answer, hooks, timeGrid(times, 10 ** -decimals))
}

/** Times and their most decimals in the first rows, as the answer reads them. */
async function firstTimes(
  source: ByteSource,
  answer: TextAnswer,
  column: number,
): Promise<{ times: number[]; decimals: number }> {
  const times: number[] = []
  let decimals = 0
  let headers = answer.headerLines
  for (const line of (await firstText(source)).split(/\r\n|\n|\r/)) {
    if (line.trim() === '' || commentMark(line, answer.delimiter)) continue
    if (headers > 0) {
      headers--
      continue
    }
    const field = splitRow(line, answer.delimiter)[column]
    if (field === undefined || field === '') continue
    const value = Number(answer.decimalComma ? field.replace(',', '.') : field)
    if (!Number.isFinite(value)) continue
    times.push(value)
    decimals = Math.max(decimals, decimalsOf(field))
  }
  return { times, decimals: Math.min(decimals, MOST_DECIMALS) }
}
