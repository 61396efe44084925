import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openApp, openBrowser, threshold, thresholdNow } from './page.ts'

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8')

interface AxeResult {
  readonly violations: readonly {
    readonly id: string
    readonly impact: string | null
    readonly nodes: readonly { readonly html: string; readonly failureSummary?: string }[]
  }[]
}

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
})

describe('access', () => {
  for (const colorScheme of ['light', 'dark'] as const) {
    for (const [width, height] of [
      [1440, 900],
      [1024, 768],
    ] as const) {
      it(`has nothing serious by axe-core, ${colorScheme}, ${width} x ${height}`, async () => {
        const { page, errors } = await openApp(browser, { width, height, colorScheme })
        const serious = async (): Promise<string[]> => {
          const result = await page.evaluate<AxeResult>(`(() => { ${AXE}; return axe.run(document) })()`)
          return result.violations
            .filter(({ impact }) => impact === 'serious' || impact === 'critical')
            .map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html.slice(0, 120)).join(' | ')}`)
        }
        expect(await serious()).toEqual([])
        await page.getByRole('button', { name: 'Help', exact: true }).click()
        expect(await serious()).toEqual([])
        await page.keyboard.press('Escape')
        await page.getByRole('button', { name: 'Take away' }).click()
        expect(await serious()).toEqual([])
        expect(errors).toEqual([])
        await page.close()
      })
    }
  }

  it('gives every button and handle 24 px', async () => {
    const { page } = await openApp(browser)
    const small = await page
      .locator('button:visible, [role=slider]:visible, select:visible')
      .evaluateAll((all) =>
        all
          .map((one) => ({ box: one.getBoundingClientRect(), text: one.textContent?.slice(0, 30) ?? '' }))
          .filter(({ box }) => box.width > 0 && (box.height < 24 || box.width < 24))
          .map(({ box, text }) => `${text} ${box.width.toFixed(0)} x ${box.height.toFixed(0)}`),
      )
    expect(small).toEqual([])
    await page.close()
  })

  it('does the whole main job by keyboard', async () => {
    const { page, errors } = await openApp(browser)
    const tabTo = async (name: RegExp): Promise<void> => {
      for (let presses = 0; presses < 80; presses++) {
        await page.keyboard.press('Tab')
        const focused = await page.evaluate(
          () =>
            document.activeElement?.getAttribute('aria-label') ?? document.activeElement?.textContent ?? '',
        )
        if (name.test(focused)) return
      }
      throw new Error(`Tab never reached ${name}`)
    }
    await page.locator('body').press('Home')
    await tabTo(/emitter 6/)
    await page.keyboard.press('Enter')
    await page
      .getByRole('banner')
      .getByText(/emitter 6/)
      .waitFor()
    await threshold(page).waitFor()
    await tabTo(/^Threshold/)
    const start = await thresholdNow(page)
    await page.keyboard.press('Shift+ArrowDown')
    await expect.poll(() => thresholdNow(page)).toBe(start - 10)
    await page.keyboard.press('Control+z')
    await expect.poll(() => thresholdNow(page)).toBe(start)
    await tabTo(/^Density$/)
    await page.keyboard.press('ArrowRight')
    await page.keyboard.press('ArrowRight')
    expect(await page.getByRole('radio', { name: 'Survival' }).getAttribute('aria-checked')).toBe('true')
    await page.getByRole('button', { name: 'Help', exact: true }).focus()
    await page.keyboard.press('Shift+Tab')
    await page.keyboard.press('Shift+Tab')
    await page.keyboard.press('Enter')
    const [download] = await Promise.all([page.waitForEvent('download'), page.keyboard.press('Enter')])
    expect(download.suggestedFilename()).toMatch(/85 mm\.svg$/)
    expect(errors).toEqual([])
    await page.close()
  })
})
