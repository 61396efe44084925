import type { BenchRow } from './bench-row.ts'

/**
 * Performance against named rivals, ratios from one run on this machine. Nothing here passes or fails a test:
 * times belong to benchmarks. `npm run bench -- NAME...` runs some; `-- browser` adds Chromium.
 */
const BENCHES: Record<string, () => Promise<{ run(): Promise<BenchRow[]> }>> = {
  binning: () => import('./binning.ts'),
  threshold: () => import('./threshold.ts'),
  fits: () => import('./fits.ts'),
  import: () => import('./import.ts'),
  browser: () => import('../../e2e/bench/browser.ts'),
}

const wanted = process.argv.slice(2).filter((name) => !name.startsWith('-'))
const names = wanted.length > 0 ? wanted : Object.keys(BENCHES)
for (const name of names) {
  const load = BENCHES[name]
  if (load === undefined) {
    console.error(`There is no benchmark “${name}”; known: ${Object.keys(BENCHES).join(', ')}.`)
    process.exitCode = 1
    continue
  }
  console.info(`\n${name}`)
  const bench = await load()
  for (const row of await bench.run()) {
    const ratio = row.ratio === null ? '' : `  ${row.ratio.toFixed(2)} x ${row.rival}`
    const verdict = row.ok === null ? '' : row.ok ? '  within budget' : '  OVER BUDGET'
    console.info(
      `  ${row.what.padEnd(64)} ${row.value.toPrecision(4).padStart(9)} ${row.unit}${ratio}  [${row.budget}]${verdict}`,
    )
  }
}
