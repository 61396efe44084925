import { execFileSync } from 'node:child_process'
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { gzipSync } from 'node:zlib'
import { type Browser, chromium, type Page } from 'playwright-core'
import { preview } from 'vite'
import { seededRandom } from '../../src/core/numeric/seeded-random.ts'
import { poissonVariate } from '../../src/core/numeric/variates.ts'
import type { BenchRow } from '../../test/bench/bench-row.ts'
import { CHROMIUM_FLAGS, findChromium } from '../find-chromium.ts'

const ROOT = resolve(import.meta.dirname, '../..')

function quantile(values: readonly number[], p: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(p * sorted.length))] ?? Number.NaN
}

/** A two-level trace with power-law dwells as a .npy of 16-bit counts. */
function writeTrace(path: string, bins: number): void {
  const random = seededRandom(`browser bench ${bins}`)
  const counts = new Uint16Array(bins)
  for (let i = 0, on = false; i < bins; on = !on) {
    const length = Math.min(20_000, Math.ceil(random.uniform() ** -2))
    for (const end = Math.min(bins, i + length); i < end; i++)
      counts[i] = poissonVariate(random, on ? 100 : 10)
  }
  const header = `{'descr': '<u2', 'fortran_order': False, 'shape': (${bins},), }`.padEnd(117, ' ')
  const head = Buffer.concat([
    Buffer.from([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, 118, 0]),
    Buffer.from(`${header}\n`),
  ])
  writeFileSync(path, Buffer.concat([head, Buffer.from(counts.buffer)]))
}

async function ready(page: Page): Promise<void> {
  await page.getByRole('slider', { name: /^Threshold/ }).waitFor({ timeout: 120_000 })
}

async function openTrace(page: Page, path: string, name: string, first: boolean): Promise<void> {
  await page.getByLabel('Open files', { exact: true }).setInputFiles(path)
  // A second file of the same shape is read without a question.
  if (first) {
    await page.getByLabel('The numbers are').selectOption('counts')
    await page.getByLabel('Bin width of the file').fill('10')
    await page.keyboard.press('Enter')
    await page.getByRole('button', { name: 'Open', exact: true }).click()
  }
  await page.getByRole('banner').getByText(name).waitFor({ timeout: 120_000 })
  await ready(page)
  await page.getByText(/All \d+ thresholds fitted/).waitFor({ timeout: 180_000 })
}

async function measures(page: Page, name: string): Promise<number[]> {
  return page.evaluate((wanted) => performance.getEntriesByName(wanted).map(({ duration }) => duration), name)
}

/** Real pointer events on the threshold handle. */
async function drag(page: Page): Promise<number[]> {
  const box = await page.getByRole('slider', { name: /^Threshold/ }).boundingBox()
  const [x, y] = [(box?.x ?? 0) + 200, (box?.y ?? 0) + 12]
  await page.evaluate(() => performance.clearMeasures())
  await page.mouse.move(x, y)
  await page.mouse.down()
  for (let i = 0; i < 240; i++) await page.mouse.move(x, y - 60 * Math.sin(i / 15))
  await page.mouse.up()
  await page.waitForTimeout(300)
  return measures(page, 'threshold-drag')
}

/** Zooms and pans with keys and wheel; returns what the painter of the upper picture took per repaint, ms. */
async function panPainter(page: Page): Promise<number[]> {
  return page.evaluate(async () => {
    const region = document.querySelector<HTMLElement>('[role=application]')
    if (region === null) return []
    const took: number[] = []
    for (let i = 0; i < 90; i++) {
      // The keyboard path paints in the coming frame.
      const key = i % 9 < 4 ? '+' : i % 9 < 5 ? 'ArrowRight' : '-'
      region.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true }))
      await new Promise((resolve) => requestAnimationFrame(resolve))
      await new Promise((resolve) => setTimeout(resolve, 0))
    }
    for (const entry of performance.getEntriesByName('upper-paint')) took.push(entry.duration)
    return took
  })
}

/** uPlot on the same points at the same size in the same page: what a general plotting library takes per zoom step. */
async function rivalPainter(page: Page, bins: number): Promise<number[]> {
  const source = readFileSync(createRequire(import.meta.url).resolve('uplot/dist/uPlot.iife.min.js'), 'utf8')
  await page.evaluate(source.replace('var uPlot', 'globalThis.uPlot'))
  return page.evaluate(async (count) => {
    interface Plot {
      setScale(key: string, range: { min: number; max: number }): void
      destroy(): void
    }
    const Plot_ = (globalThis as unknown as { uPlot: new (...parts: unknown[]) => Plot }).uPlot
    const host = document.createElement('div')
    host.style.cssText = 'position:fixed;left:0;top:0;z-index:99'
    document.body.append(host)
    const box = document.querySelector('[role=application]')?.getBoundingClientRect()
    const xs = Float64Array.from({ length: count }, (_, i) => i * 0.01)
    let seed = 1
    const ys = Float64Array.from({ length: count }, (_, i) => {
      seed = (seed * 1103515245 + 12345) % 2147483648
      return (Math.floor(i / 5000) % 2 === 0 ? 10 : 100) + (seed / 2147483648) * 20
    })
    const plot = new Plot_(
      {
        width: box?.width ?? 500,
        height: box?.height ?? 300,
        series: [{}, { stroke: '#555' }],
        scales: { x: { time: false } },
        legend: { show: false },
      },
      [xs, ys],
      host,
    )
    await new Promise((resolve) => setTimeout(resolve, 500))
    const took: number[] = []
    const end = count * 0.01
    for (let i = 0; i < 12; i++) {
      const start = performance.now()
      plot.setScale('x', { min: (i % 4) * 0.02 * end, max: end * (0.7 + 0.02 * i) })
      // Its repaint is queued as a microtask.
      await Promise.resolve()
      await new Promise<void>((resolve) => queueMicrotask(() => resolve()))
      took.push(performance.now() - start)
    }
    plot.destroy()
    host.remove()
    return took
  }, bins)
}

async function firstLoads(browser: Browser, address: string): Promise<number[]> {
  const took: number[] = []
  for (let i = 0; i < 5; i++) {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
    const page = await context.newPage()
    const start = performance.now()
    await page.goto(address)
    await ready(page)
    took.push(performance.now() - start)
    await context.close()
  }
  return took
}

function row(
  what: string,
  value: number,
  unit: string,
  budget: string,
  ok: boolean | null,
  rival = '',
  ratio: number | null = null,
): BenchRow {
  return { what, value, unit, rival, ratio, budget, ok }
}

/** Production build in Chromium with real pointer events. */
export async function run(): Promise<BenchRow[]> {
  execFileSync('npx', ['vite', 'build', '--logLevel', 'error'], { cwd: ROOT, stdio: 'inherit' })
  const server = await preview({
    root: ROOT,
    configFile: join(ROOT, 'vite.config.ts'),
    preview: { port: 4310 },
    logLevel: 'error',
  })
  const address = server.resolvedUrls?.local[0] ?? ''
  const browser = await chromium.launch({ executablePath: findChromium(), args: CHROMIUM_FLAGS })
  const folder = mkdtempSync(join(tmpdir(), 'heliograph-bench-'))
  const rows: BenchRow[] = []
  try {
    const script = readdirSync(join(ROOT, 'dist/assets')).filter((name) => /^index-.*\.js$/.test(name))
    const size =
      script.reduce((sum, name) => sum + gzipSync(readFileSync(join(ROOT, 'dist/assets', name))).length, 0) /
      1000
    rows.push(row('initial script, gzip', size, 'kB', '250 kB', size <= 250))
    const loads = await firstLoads(browser, address)
    rows.push(
      row(
        'first load to usable demonstration, median of 5',
        quantile(loads, 0.5) / 1000,
        's',
        '2 s',
        quantile(loads, 0.5) <= 2000,
      ),
    )

    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } })
    await page.goto(address)
    await ready(page)
    await page.getByText(/All \d+ thresholds fitted/).waitFor({ timeout: 60_000 })
    const demo = await drag(page)
    rows.push(
      row(
        `threshold drag, demonstration, p95 of ${demo.length} steps (median ${quantile(demo, 0.5).toFixed(1)})`,
        quantile(demo, 0.95),
        'ms',
        '16.7 ms',
        quantile(demo, 0.95) <= 16.7,
      ),
    )
    for (const [bins, budget] of [
      [1e6, 16.7],
      [1e7, 33],
    ] as const) {
      const path = join(folder, `trace ${bins}.npy`)
      writeTrace(path, bins)
      await openTrace(page, path, `trace ${bins}`, bins === 1e6)
      const steps = await drag(page)
      rows.push(
        row(
          `threshold drag, ${bins.toExponential(0)} bins, p95 of ${steps.length} steps (median ${quantile(steps, 0.5).toFixed(1)})`,
          quantile(steps, 0.95),
          'ms',
          `${budget} ms`,
          quantile(steps, 0.95) <= budget,
        ),
      )
      if (bins === 1e7) {
        await page.evaluate(() => performance.clearMeasures())
        const painter = await panPainter(page)
        const rival = await rivalPainter(page, bins)
        const ours = quantile(painter, 0.95)
        const theirs = quantile(rival, 0.95)
        rows.push(
          row(
            `pan and zoom of 1e7 bins, painter p95 of ${painter.length} repaints (median ${quantile(painter, 0.5).toFixed(1)})`,
            ours,
            'ms',
            '8 ms',
            ours <= 8,
          ),
        )
        rows.push(
          row(
            `the same points in uPlot, p95 of ${rival.length} repaints`,
            theirs,
            'ms',
            'at least 20 x slower',
            theirs / ours >= 20,
            'our painter',
            theirs / ours,
          ),
        )
      }
    }
  } finally {
    rmSync(folder, { recursive: true, force: true })
    await browser.close()
    await server.close()
  }
  return rows
}
