import { mkdirSync, statSync } from 'node:fs'
import { join, resolve } from 'node:path'
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openApp, openBrowser, temporaryFolder } from './page.ts'

/** SCREENSHOT=1 renews the README's picture; otherwise pictures go to a folder that is removed. */
const RENEW = process.env['SCREENSHOT'] === '1'
const folder = temporaryFolder()
let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
  folder.remove()
})

describe('pictures', () => {
  for (const colorScheme of ['light', 'dark'] as const) {
    for (const [width, height] of [
      [1440, 900],
      [1024, 768],
    ] as const) {
      it(`are taken at ${width} x ${height}, ${colorScheme}, with nothing outside the window`, async () => {
        const { page, errors } = await openApp(browser, { width, height, colorScheme })
        await page.getByText(/All \d+ thresholds fitted/).waitFor({ timeout: 30_000 })
        const readme = RENEW && width === 1440 && colorScheme === 'light'
        const path = readme
          ? resolve(import.meta.dirname, '../public/screenshot.png')
          : join(folder.path, `${width}-${colorScheme}.png`)
        mkdirSync(folder.path, { recursive: true })
        await page.screenshot({ path })
        expect(statSync(path).size).toBeGreaterThan(20_000)
        const overflow = await page.evaluate(() => ({
          x: document.documentElement.scrollWidth - innerWidth,
          y: document.documentElement.scrollHeight - innerHeight,
        }))
        expect(overflow).toEqual({ x: 0, y: 0 })
        expect(errors).toEqual([])
        await page.close()
      })
    }
  }
})
