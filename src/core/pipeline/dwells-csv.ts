import { CENSORING, type DwellTable } from '../dwells/dwell-table.ts'
import { GATE_CLASSES } from '../photons/gate.ts'

/** First line of a dwell table as CSV. */
export const DWELLS_HEADER =
  'emitter,start_s,duration_s,state,gate_at_start,gate_at_end,entry_age_s,censoring,spurious_probability'

/**
 * RFC 4180 quoting; a leading = + - @ gets an apostrophe so that a spreadsheet does not run it. Semicolons and tabs
 * are quoted too: where they separate columns, what follows one would lead its own cell.
 */
export function csvText(text: string): string {
  const safe = /^[\s\0]*[=+\-@\uff0b\uff0d\uff1d\uff20]|^[\t\r\n]/.test(text) ? `'${text}` : text
  return /[",;\t\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** Dwell table as CSV text with a header; units in the column names; durations exact multiples of the bin. */
export function dwellsCsv(emitter: string, table: DwellTable, withHeader = true): string {
  const name = csvText(emitter)
  const lines: string[] = withHeader ? [DWELLS_HEADER] : []
  const seconds = (bins: number): string => Number((bins * table.binSeconds).toPrecision(12)).toString()
  for (let row = 0; row < table.rows; row++) {
    lines.push(
      [
        name,
        Number(table.startSeconds[row].toPrecision(12)).toString(),
        seconds(table.durationBins[row]),
        table.state[row] === 1 ? 'on' : 'off',
        GATE_CLASSES[table.gateAtStart[row]] ?? '',
        GATE_CLASSES[table.gateAtEnd[row]] ?? '',
        seconds(table.entryAgeBins[row]),
        CENSORING[table.censoring[row]] ?? '',
        Number.isNaN(table.spuriousProbability[row]) ? '' : table.spuriousProbability[row].toPrecision(3),
      ].join(','),
    )
  }
  return `${lines.join('\n')}\n`
}
