import { parseArgs } from 'node:util'
import { type TimeUnit, UNIT_SECONDS } from '../core/read/import-answer.ts'

export interface BatchArguments {
  readonly files: readonly string[]
  readonly outFolder: string
  readonly recipeFile: string | null
  readonly binSeconds: number | null
  readonly timeUnit: Exclude<TimeUnit, 'ticks'> | null
  readonly countsBinSeconds: number | null
}

export const USAGE = `Usage: npm run batch -- [options] --out FOLDER FILE...

  --out FOLDER             where results.json and dwells.csv go (made when missing)
  --recipe recipe.json     analysis choices; without it the default recipe
  --bin-seconds S          bin width for arrival times, s (overrides the recipe)
  --time-unit s|ms|us|ns   unit of times in files that do not say
  --counts-bin-seconds S   bin width of counts in files that have no time axis
`

/** Reads the command line; a string is the sentence to print before the usage. */
export function batchArguments(argv: readonly string[]): BatchArguments | string {
  let parsed: ReturnType<typeof parse>
  try {
    parsed = parse(argv)
  } catch (error) {
    return error instanceof Error ? error.message : String(error)
  }
  const { values, positionals } = parsed
  if (values.help === true) return ''
  if (values.out === undefined) return 'Say where the results go: --out FOLDER.'
  if (positionals.length === 0) return 'No file was named.'
  const seconds = (text: string | undefined, option: string): number | null | string => {
    if (text === undefined) return null
    const number = Number(text)
    return number > 0 && Number.isFinite(number)
      ? number
      : `${option} expects seconds above 0, got “${text}”.`
  }
  const bin = seconds(values['bin-seconds'], '--bin-seconds')
  const countsBin = seconds(values['counts-bin-seconds'], '--counts-bin-seconds')
  if (typeof bin === 'string') return bin
  if (typeof countsBin === 'string') return countsBin
  const unit = values['time-unit'] ?? null
  if (unit !== null && !isUnit(unit)) {
    return `--time-unit expects s, ms, us or ns, got “${unit}”.`
  }
  return {
    files: positionals,
    outFolder: values.out,
    recipeFile: values.recipe ?? null,
    binSeconds: bin,
    timeUnit: unit,
    countsBinSeconds: countsBin,
  }
}

function parse(argv: readonly string[]) {
  return parseArgs({
    args: [...argv],
    allowPositionals: true,
    options: {
      out: { type: 'string' },
      recipe: { type: 'string' },
      'bin-seconds': { type: 'string' },
      'time-unit': { type: 'string' },
      'counts-bin-seconds': { type: 'string' },
      help: { type: 'boolean', short: 'h' },
    },
  })
}

function isUnit(text: string): text is Exclude<TimeUnit, 'ticks'> {
  return Object.hasOwn(UNIT_SECONDS, text)
}
