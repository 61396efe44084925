import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core'
import { inject } from 'vitest'
import { CHROMIUM_FLAGS } from './find-chromium.ts'

/** A browser of its own for one test file. */
export async function openBrowser(): Promise<Browser> {
  return chromium.launch({ executablePath: inject('chromium'), args: CHROMIUM_FLAGS })
}

export interface Opened {
  readonly page: Page
  /** Errors the page wrote to its console or threw; a test expects none. */
  readonly errors: string[]
}

function listen(page: Page): Opened {
  const errors: string[] = []
  page.on('pageerror', (error) => errors.push(error.message))
  page.on('console', (message) => {
    if (message.type() === 'error') errors.push(message.text())
  })
  return { page, errors }
}

/** The app in a fresh profile, analysed. */
export async function openApp(
  browser: Browser | BrowserContext,
  options: { width?: number; height?: number; colorScheme?: 'light' | 'dark'; hasTouch?: boolean } = {},
): Promise<Opened> {
  const { width = 1440, height = 900, ...rest } = options
  const page =
    'newContext' in browser
      ? await browser.newPage({ viewport: { width, height }, ...rest })
      : await browser.newPage()
  const opened = listen(page)
  await page.goto(inject('address'))
  await analysed(page)
  return opened
}

/** Waits until the emitter on the bench has its threshold and its settled numbers. */
export async function analysed(page: Page): Promise<void> {
  await threshold(page).waitFor()
  await page
    .getByRole('complementary', { name: 'Numbers at this threshold' })
    .getByText('[')
    .first()
    .waitFor()
}

export function threshold(page: Page) {
  return page.getByRole('slider', { name: /^Threshold/ })
}

export async function thresholdNow(page: Page): Promise<number> {
  return Number(await threshold(page).getAttribute('aria-valuenow'))
}

/** Text of the reading column. */
export async function reading(page: Page): Promise<string> {
  return page.getByRole('complementary', { name: 'Numbers at this threshold' }).innerText()
}

/** A fingerprint of what a canvas shows. */
export async function canvasPrint(page: Page, selector: string): Promise<string> {
  return page.locator(selector).evaluateAll((canvases) =>
    canvases
      .map((canvas) => {
        const { width, height } = canvas as HTMLCanvasElement
        const data = (canvas as HTMLCanvasElement).getContext('2d')?.getImageData(0, 0, width, height).data
        let hash = 17
        for (let i = 0; i < (data?.length ?? 0); i += 4)
          hash = (hash * 31 + (data?.[i] ?? 0) + 7 * (data?.[i + 3] ?? 0)) | 0
        return String(hash)
      })
      .join(' '),
  )
}

/** A folder for one test, gone afterwards. */
export function temporaryFolder(): { path: string; remove(): void } {
  const path = mkdtempSync(join(tmpdir(), 'heliograph-'))
  return { path, remove: () => rmSync(path, { recursive: true, force: true }) }
}

/** Takes something away and returns its text. */
export async function takeAway(
  page: Page,
  label: RegExp,
): Promise<{ name: string; text: string; path: string }> {
  await page.getByRole('button', { name: 'Take away' }).click()
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('list', { name: 'Take away' }).getByRole('button', { name: label }).click(),
  ])
  const path = await download.path()
  const { readFileSync } = await import('node:fs')
  return { name: download.suggestedFilename(), text: readFileSync(path, 'utf8'), path }
}
