import { mkdir, readFile, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { DWELLS_HEADER } from '../core/pipeline/dwells-csv.ts'
import { type EmitterResult, resultDocument } from '../core/pipeline/result-document.ts'
import { DEFAULT_RECIPE } from '../core/recipe/default-recipe.ts'
import { parseRecipe } from '../core/recipe/recipe-schema.ts'
import type { Recipe } from '../core/recipe/recipe.ts'
import { analyseFile } from './analyse-file.ts'
import { batchArguments, type BatchArguments, USAGE } from './arguments.ts'

/** The recipe of the run: the default or the one in the file, with --bin-seconds on top; a sentence when it is not valid. */
async function recipeOf(options: BatchArguments): Promise<Recipe | string> {
  let recipe: Recipe = DEFAULT_RECIPE
  if (options.recipeFile !== null) {
    let value: unknown
    try {
      value = JSON.parse(await readFile(options.recipeFile, 'utf8'))
    } catch (error) {
      return `The recipe “${options.recipeFile}” could not be read (${error instanceof Error ? error.message : String(error)}).`
    }
    const parsed = parseRecipe(value)
    if (!parsed.ok) return `“${options.recipeFile}”: ${parsed.problem}`
    recipe = parsed.recipe
  }
  if (options.binSeconds === null) return recipe
  const parsed = parseRecipe({ ...recipe, bin: { seconds: options.binSeconds } })
  return parsed.ok ? parsed.recipe : parsed.problem
}

async function main(): Promise<number> {
  const options = batchArguments(process.argv.slice(2))
  if (typeof options === 'string') {
    if (options !== '') console.error(options)
    console.error(USAGE)
    return options === '' ? 0 : 1
  }
  const recipe = await recipeOf(options)
  if (typeof recipe === 'string') {
    console.error(recipe)
    return 1
  }
  const { version } = JSON.parse(await readFile(new URL('../../package.json', import.meta.url), 'utf8')) as {
    version: string
  }
  const emitters: EmitterResult[] = []
  const tables: string[] = []
  let failed = 0
  for (const file of options.files) {
    const result = await analyseFile(file, recipe, options)
    if (!result.ok) {
      failed++
      console.error(result.sentence)
      continue
    }
    for (const note of result.notes) console.error(`“${file}”: ${note}`)
    emitters.push(...result.emitters)
    tables.push(...result.dwells)
  }
  await mkdir(options.outFolder, { recursive: true })
  await writeFile(
    join(options.outFolder, 'results.json'),
    `${JSON.stringify(resultDocument(version, recipe, emitters), null, 2)}\n`,
  )
  await writeFile(join(options.outFolder, 'dwells.csv'), `${DWELLS_HEADER}\n${tables.join('')}`)
  console.info(
    `${emitters.length} emitters analysed, ${failed} files failed. Results in ${options.outFolder}.`,
  )
  return failed === 0 ? 0 : 1
}

process.exitCode = await main()
