import type { ColumnRole } from './import-answer.ts'
import { roleIn } from './said-by-name.ts'

/** Whether numbers rise in steps that are nearly all alike. */
function isEven(values: readonly number[]): boolean {
  const steps = values.slice(1).map((value, i) => value - values[i])
  if (steps.length === 0 || steps.some((step) => !(step > 0))) return false
  const median = steps.slice().sort((a, b) => a - b)[Math.floor((steps.length - 1) / 2)]
  return steps.filter((step) => Math.abs(step - median) < 0.3 * median).length >= 0.8 * steps.length
}

/**
 * Proposed roles of the columns of a table: by name, else by their numbers; one column of times at most.
 * @param header names, or empty when the file has none
 * @param valuesOf numbers of a column in the first rows
 */
export function columnRoles(
  header: readonly string[],
  valuesOf: (column: number) => number[],
  width: number,
): ColumnRole[] {
  const said = Array.from({ length: width }, (_, column): ColumnRole | null => {
    const name = header[column] ?? ''
    const role = roleIn(name)
    if (role !== 'gate') return role
    // `beam counts` are counts, and a field in V is no gate; one wrong number among 0 and 1 is left to be found.
    const rest = roleIn(name.replace(/gate|field|beam|shutter/gi, ''))
    if (rest !== null) return rest
    const values = valuesOf(column)
    const binary = values.filter((value) => value === 0 || value === 1).length
    return values.includes(1) && 2 * binary >= values.length ? 'gate' : 'ignore'
  })
  const timed = said.findIndex((role) => role === 'time' || role === 'arrival')
  const counted = said.some((role) => role === 'counts' || role === 'rate-cps' || role === 'rate-kcps')
  // A running number in front of the times is not the time.
  const numbered = timed < 0 && width > 2 && isNumbering(valuesOf(0)) && isEven(valuesOf(1))
  const whole = (column: number): boolean => valuesOf(column).every(Number.isInteger)
  return said.map((role, column) => {
    if (role === 'time' || role === 'arrival') {
      if (column !== timed) return 'ignore'
      if (width === 1) return 'arrival'
      return role === 'arrival' && counted && isEven(valuesOf(column)) ? 'time' : role
    }
    if (role !== null) return role
    if (column === 0 && width === 1) {
      const values = valuesOf(0)
      const rising = values.every((value, i) => i === 0 || value >= values[i - 1])
      return rising && values.length > 2 && values[values.length - 1] > values[0] ? 'arrival' : 'counts'
    }
    if (timed < 0 && column === (numbered ? 1 : 0) && isEven(valuesOf(column))) return 'time'
    if (column === 0 && (timed > 0 || numbered) && isNumbering(valuesOf(column))) return 'ignore'
    return whole(column) ? 'counts' : 'rate-cps'
  })
}

/** Whether numbers count the rows: 0, 1, 2 ... or 1, 2, 3 ... */
function isNumbering(values: readonly number[]): boolean {
  return (
    values.length > 2 &&
    values[0] >= 0 &&
    values[0] <= 1 &&
    values.every((value, i) => value === values[0] + i)
  )
}
