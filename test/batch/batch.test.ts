import { spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { benchNumbers } from '../../src/core/pipeline/bench-numbers.ts'
import { corridorOf } from '../../src/core/pipeline/corridor.ts'
import { DEFAULT_RECIPE } from '../../src/core/recipe/default-recipe.ts'
import { DEMONSTRATION } from '../../src/core/simulate/demonstration.ts'
import { simulateTrace } from '../../src/core/simulate/simulate-trace.ts'
import { batchArguments } from '../../src/batch/arguments.ts'

const ROOT = resolve(import.meta.dirname, '../..')
const { trace } = simulateTrace(DEMONSTRATION[0].model, 0.01, DEMONSTRATION[0].seed)
let folder = ''

function run(...argv: string[]) {
  const done = spawnSync(process.execPath, ['--import', 'tsx', 'src/batch/main.ts', ...argv], {
    cwd: ROOT,
    encoding: 'utf8',
  })
  return { code: done.status, out: done.stdout, error: done.stderr }
}

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'heliograph-batch-'))
  const rows = Array.from(trace.counts, (count, i) => `${(i * 0.01).toFixed(2)}\t${count}`)
  writeFileSync(join(folder, 'good.txt'), `time (s)\tcounts\n${rows.join('\n')}\n`)
  writeFileSync(join(folder, 'bad.txt'), 'time (s)\tcounts\n0.00\t5\n0.01\t-3\n0.02\t4\n')
  writeFileSync(
    join(folder, 'recipe.json'),
    JSON.stringify({ ...DEFAULT_RECIPE, threshold: { rule: 'hand', sigmas: 4, handCounts: 50 } }),
  )
  writeFileSync(
    join(folder, 'wrong recipe.json'),
    JSON.stringify({ ...DEFAULT_RECIPE, bin: { seconds: -1 } }),
  )
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

describe('the batch command', () => {
  it('gives the numbers of the same core, to the last digit, and goes on after a file that fails', () => {
    const out = join(folder, 'out')
    const { code, error } = run(
      '--out',
      out,
      join(folder, 'bad.txt'),
      join(folder, 'good.txt'),
      join(folder, 'missing.txt'),
    )
    expect(code).toBe(1)
    expect(error).toMatch(/“bad\.txt”, line 3: .*negative/)
    expect(error).toMatch(/missing\.txt” could not be opened/)
    const results = JSON.parse(readFileSync(join(out, 'results.json'), 'utf8'))
    expect(results.emitters).toHaveLength(1)
    const corridor = corridorOf({ record: trace, gate: null })
    const product = corridor.thresholds(DEFAULT_RECIPE)
    const numbers = benchNumbers(
      corridor.prepared(DEFAULT_RECIPE),
      product,
      DEFAULT_RECIPE,
      product.byRule.counts,
    )
    const [emitter] = results.emitters
    expect(emitter.threshold.countsPerBin).toBe(numbers.threshold)
    expect(emitter.onFraction.estimate).toBe(numbers.onFraction.estimate)
    for (const [state, name] of [
      [0, 'off'],
      [1, 'on'],
    ] as const) {
      const expected = numbers.states[state].fits.fits.find(({ law }) => law === 'power-cutoff-density')
      const found = emitter.dwells[name].fits.find(
        ({ law }: { law: string }) => law === 'power-cutoff-density',
      )
      // The mean step of printed times is the bin to a part in 10^12.
      expect(found.parameters.alpha.estimate).toBeCloseTo(
        expected?.parameters['alpha']?.estimate ?? Number.NaN,
        9,
      )
    }
    const rows = readFileSync(join(out, 'dwells.csv'), 'utf8').trim().split('\n')
    const seconds = rows.slice(1).reduce((sum, row) => sum + Number(row.split(',')[2]), 0)
    expect(seconds).toBeCloseTo(trace.counts.length * 0.01, 6)
  })

  it('takes a recipe, and refuses a wrong one in one sentence', () => {
    const out = join(folder, 'by hand')
    expect(run('--recipe', join(folder, 'recipe.json'), '--out', out, join(folder, 'good.txt')).code).toBe(0)
    const results = JSON.parse(readFileSync(join(out, 'results.json'), 'utf8'))
    expect(results.emitters[0].threshold.countsPerBin).toBe(50)
    const refused = run('--recipe', join(folder, 'wrong recipe.json'), '--out', out, join(folder, 'good.txt'))
    expect(refused.code).toBe(1)
    expect(refused.error).toMatch(/bin\.seconds/)
  })

  it('reads its command line', () => {
    expect(batchArguments(['--out', 'x', '--bin-seconds', '0.005', 'a.txt', 'b.npy'])).toMatchObject({
      files: ['a.txt', 'b.npy'],
      outFolder: 'x',
      binSeconds: 0.005,
    })
    expect(batchArguments(['a.txt'])).toMatch(/--out/)
    expect(batchArguments(['--out', 'x'])).toMatch(/No file/)
    expect(batchArguments(['--out', 'x', '--bin-seconds=-1', 'a'])).toMatch(/above 0/)
    expect(batchArguments(['--out', 'x', '--time-unit', 'h', 'a'])).toMatch(/s, ms, us or ns/)
    expect(batchArguments(['--what', 'x'])).toMatch(/what/)
  })
})
