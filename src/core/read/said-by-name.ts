import type { ColumnRole, TimeUnit } from './import-answer.ts'

const BEFORE = '[([{/_\\s,]\\s*'
const AFTER = '\\s*[)\\]}]?\\s*$'
const UNITS: readonly (readonly [TimeUnit, RegExp])[] = [
  ['ms', named('ms|msec|milliseconds?')],
  ['us', named('us|µs|μs|usec|µsec|microseconds?')],
  ['ns', named('ns|nsec|nanoseconds?')],
  ['ticks', named('ticks?')],
  ['s', named('s|secs?|seconds?')],
]
/** Units that are read as ticks of their length, s. */
const LENGTHS: readonly (readonly [number, RegExp])[] = [
  [1e-12, named('ps|psec|picoseconds?')],
  [60, named('min|mins|minutes?')],
  [3600, named('h|hrs?|hours?')],
]
const UNIT_WORD =
  /^[([{]?\s*(?:[munµμpk]?s|[munµμp]?secs?|seconds|min|h|ticks?|k?cps|k?Hz|k?(?:cts|counts?)(?:\s*\/\s*m?s|\/bin)?|1\/s|s\^?-1|a\.?u\.?|m?V|nm|°?C|K|%|1|-)\s*[)\]}]?$/i

function named(words: string): RegExp {
  return new RegExp(`${BEFORE}(?:${words})${AFTER}`, 'i')
}

/** Unit of time at the end of a column's name: `time (ms)`, `t/s`, `arrival_ns`; null when none is. */
export function unitIn(name: string): TimeUnit | null {
  return UNITS.find(([, words]) => words.test(name))?.[0] ?? null
}

/** Length in s of a unit that stands in a column's name but is not among the usual ones: `time (min)`, `arrival / ps`. */
export function tickIn(name: string): number | null {
  return LENGTHS.find(([, words]) => words.test(name))?.[0] ?? null
}

/** Bin width in s named in a column's name: `counts per 10 ms`, `counts/bin (5 ms)`; null when none is. */
export function binIn(name: string): number | null {
  const match = /(\d+(?:[.,]\d+)?)\s*(ms|µs|μs|us|ns|s)\b/i.exec(name)
  if (match === null) return null
  const scale = { ms: 1e-3, µs: 1e-6, μs: 1e-6, us: 1e-6, ns: 1e-9, s: 1 }[match[2].toLowerCase()] ?? 1
  return Number(match[1].replace(',', '.')) * scale
}

/** Whether a field is nothing but a unit, as in a second line of names. */
export function isUnitWord(field: string): boolean {
  return UNIT_WORD.test(field)
}

/** What a column's name says it holds; null when it says nothing. */
export function roleIn(name: string): ColumnRole | null {
  if (/arriv|macro\s*time|photon\s*time|time\s*tag|timestamp/i.test(name)) return 'arrival'
  if (/gate|field|beam|shutter/i.test(name)) return 'gate'
  if (/kcps|kHz|kilocounts|k\s*c(?:oun)?ts?\b|\bc(?:oun)?ts?\s*(?:per|\/)\s*ms(?:ec)?\b/i.test(name))
    return 'rate-kcps'
  if (
    /\bcps\b|c(?:oun)?ts?\s*(?:per|\/)\s*s(?:ec(?:onds?)?)?\b|\bHz\b|(?<![a-z])rate|countrate|[([]\s*(?:1\s*\/\s*s|s\s*\^?-1|s⁻¹)\s*[)\]]/i.test(
      name,
    )
  )
    return 'rate-cps'
  if (/^\s*(t|time|zeit|temps)(?![a-z])/i.test(name)) return 'time'
  if (/count|\bcts\b|intens|photons|signal|emitter|dot|trace/i.test(name)) return 'counts'
  return null
}
