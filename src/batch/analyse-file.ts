import { basename } from 'node:path'
import { benchNumbers, dwellsAt } from '../core/pipeline/bench-numbers.ts'
import { corridorOf } from '../core/pipeline/corridor.ts'
import { dwellsCsv } from '../core/pipeline/dwells-csv.ts'
import { type EmitterResult, emitterResult } from '../core/pipeline/result-document.ts'
import { type ImportAnswer, missingAnswers } from '../core/read/import-answer.ts'
import { previewSource } from '../core/read/import-preview.ts'
import { readSource } from '../core/read/read-source.ts'
import type { Recipe } from '../core/recipe/recipe.ts'
import type { BatchArguments } from './arguments.ts'
import { fileSource, sha256Of } from './file-source.ts'

export type FileResult =
  | {
      readonly ok: true
      readonly emitters: readonly EmitterResult[]
      /** One table of dwells per emitter, CSV without header. */
      readonly dwells: readonly string[]
      /** What was assumed or dropped, one sentence each. */
      readonly notes: readonly string[]
    }
  | { readonly ok: false; readonly sentence: string }

const QUIET = { onProgress: (): void => {}, shouldStop: (): boolean => false }

const OPTION = {
  timeUnit: 'the unit of its times: give --time-unit',
  binSeconds: 'its bin width: give --counts-bin-seconds',
  content: 'whether it holds arrival times or counts: open it in the app once',
  columns: 'which columns hold counts or arrival times: open it in the app once',
} as const

/** Reads and analyses every record of one file under one recipe; never throws on data. */
export async function analyseFile(
  path: string,
  recipe: Recipe,
  options: Pick<BatchArguments, 'timeUnit' | 'countsBinSeconds'>,
): Promise<FileResult> {
  let source: Awaited<ReturnType<typeof fileSource>>
  try {
    source = await fileSource(path)
  } catch (error) {
    return {
      ok: false,
      sentence: `“${path}” could not be opened (${error instanceof Error ? error.message : String(error)}).`,
    }
  }
  try {
    const preview = await previewSource(source)
    if (preview.problem !== null) return { ok: false, sentence: preview.problem.sentence }
    if (preview.answer === null) return { ok: false, sentence: `“${path}” was not understood.` }
    const { answer, notes } = answered(preview.answer, preview.guessedUnit, options)
    const missing = missingAnswers(answer)
    if (missing.length > 0) {
      return {
        ok: false,
        sentence: `“${basename(path)}” does not say ${missing.map((key) => OPTION[key]).join('; nor ')}.`,
      }
    }
    const read = await readSource(source, answer, QUIET)
    if (!read.ok) return { ok: false, sentence: read.problem.sentence }
    const sha256 = await sha256Of(path)
    const emitters: EmitterResult[] = []
    const dwells: string[] = []
    for (const { name, column, record, gate } of read.records) {
      const corridor = corridorOf({ record, gate })
      const product = corridor.thresholds(recipe)
      const { rule, handCounts } = recipe.threshold
      const threshold = rule === 'hand' && handCounts !== null ? handCounts : product.byRule.counts
      const prepared = corridor.prepared(recipe)
      const numbers = benchNumbers(prepared, product, recipe, threshold)
      emitters.push(
        emitterResult(
          name,
          { file: basename(path), sha256, column },
          corridor.traceProduct(recipe),
          product,
          numbers,
        ),
      )
      dwells.push(dwellsCsv(name, dwellsAt(prepared, product, recipe, numbers.threshold), false))
    }
    return { ok: true, emitters, dwells, notes: [...notes, ...read.notes] }
  } finally {
    await source.close()
  }
}

/** The preview's answer with the command's options on top; a guess that had to serve is said. */
function answered(
  answer: ImportAnswer,
  guessed: ImportAnswer['timeUnit'],
  options: Pick<BatchArguments, 'timeUnit' | 'countsBinSeconds'>,
): { answer: ImportAnswer; notes: string[] } {
  const notes: string[] = []
  let timeUnit = answer.timeUnit
  if (timeUnit === null && missingAnswers(answer).includes('timeUnit')) {
    timeUnit = options.timeUnit ?? guessed
    if (options.timeUnit === null && guessed !== null) {
      notes.push(
        `the file does not say the unit of its times; ${guessed} was assumed (say it with --time-unit)`,
      )
    }
  }
  const single = answer.kind === 'text' && answer.columns.length === 1 && answer.columns[0] === 'arrival'
  if (single || (answer.kind !== 'text' && answer.content === 'arrival')) {
    notes.push('the numbers never decrease and were taken as arrival times')
  }
  return { answer: { ...answer, timeUnit, binSeconds: answer.binSeconds ?? options.countsBinSeconds }, notes }
}
