import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { canvasPrint, openApp, openBrowser, reading, threshold, thresholdNow } from './page.ts'

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
})

describe('the threshold', () => {
  it('opens on the demonstration, analysed', async () => {
    const { page, errors } = await openApp(browser)
    const text = await reading(page)
    expect(text).toMatch(/Exponent α/)
    expect(text).toMatch(/\[1\.\d+, 1\.\d+\]/)
    expect(await page.getByRole('button', { name: /emitter \d/ }).count()).toBeGreaterThanOrEqual(6)
    expect(errors).toEqual([])
    await page.close()
  })

  it('follows the mouse; numbers and both plots change in the same step, and each step leaves a measure', async () => {
    const { page, errors } = await openApp(browser)
    await page.getByText(/All \d+ thresholds fitted/).waitFor({ timeout: 30_000 })
    const start = await thresholdNow(page)
    const [before, plots] = [await reading(page), await canvasPrint(page, '.lower canvas')]
    const box = await threshold(page).boundingBox()
    expect(box?.height).toBeGreaterThanOrEqual(24)
    const [x, y] = [(box?.x ?? 0) + 150, (box?.y ?? 0) + (box?.height ?? 0) / 2]
    await page.mouse.move(x, y)
    await page.mouse.down()
    for (let i = 1; i <= 20; i++) await page.mouse.move(x, y + 3 * i)
    await page.waitForTimeout(50)
    expect(await thresholdNow(page)).toBeLessThan(start)
    expect(await reading(page)).not.toBe(before)
    expect(await canvasPrint(page, '.lower canvas')).not.toBe(plots)
    const measures = await page.evaluate(() => performance.getEntriesByName('threshold-drag').length)
    expect(measures).toBeGreaterThanOrEqual(5)
    // Escape puts it back where the drag began.
    await page.keyboard.press('Escape')
    expect(await thresholdNow(page)).toBe(start)
    await page.mouse.up()
    expect(await thresholdNow(page)).toBe(start)
    expect(errors).toEqual([])
    await page.close()
  })

  it('follows the keyboard, a typed number, undo and redo', async () => {
    const { page, errors } = await openApp(browser)
    const start = await thresholdNow(page)
    await threshold(page).focus()
    await page.keyboard.press('ArrowUp')
    await expect.poll(() => thresholdNow(page)).toBe(start + 1)
    await page.keyboard.press('Shift+ArrowDown')
    await expect.poll(() => thresholdNow(page)).toBe(start - 9)
    await page.waitForTimeout(800)
    await page.getByLabel('Counts', { exact: true }).fill(String(start + 5))
    await page.keyboard.press('Enter')
    await expect.poll(() => thresholdNow(page)).toBe(start + 5)
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect.poll(() => thresholdNow(page)).toBe(start - 9)
    await page.getByRole('button', { name: 'Undo' }).click()
    // Two arrow presses in quick succession are one step.
    await expect.poll(() => thresholdNow(page)).toBe(start)
    await page.locator('body').press('Control+Shift+z')
    await expect.poll(() => thresholdNow(page)).toBe(start - 9)
    await page.locator('body').press('Control+z')
    await expect.poll(() => thresholdNow(page)).toBe(start)
    // Out of range is refused in words.
    await page.getByLabel('Counts', { exact: true }).fill('100000')
    await page.keyboard.press('Enter')
    await page.getByText(/^Allowed: /).waitFor()
    expect(await thresholdNow(page)).toBe(start)
    expect(errors).toEqual([])
    await page.close()
  })

  it('follows a finger', async () => {
    const { page, errors } = await openApp(browser, { hasTouch: true })
    const start = await thresholdNow(page)
    const box = await threshold(page).boundingBox()
    const [x, y] = [(box?.x ?? 0) + 150, (box?.y ?? 0) + (box?.height ?? 0) / 2]
    const session = await page.context().newCDPSession(page)
    const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', at: number) =>
      session.send('Input.dispatchTouchEvent', {
        type,
        touchPoints: type === 'touchEnd' ? [] : [{ x, y: at }],
      })
    await touch('touchStart', y)
    for (let i = 1; i <= 10; i++) await touch('touchMove', y - 5 * i)
    await touch('touchEnd', y - 50)
    await expect.poll(() => thresholdNow(page)).toBeGreaterThan(start)
    expect(errors).toEqual([])
    await page.close()
  })

  it('has its shortest fitted dwell as a mark that can be moved', async () => {
    const { page, errors } = await openApp(browser)
    const mark = page.getByRole('slider', { name: /^Shortest fitted on-time/ })
    await mark.waitFor()
    expect(await mark.getAttribute('aria-valuenow')).toBe('3')
    await mark.focus()
    await page.keyboard.press('ArrowRight')
    await page.keyboard.press('ArrowRight')
    await expect.poll(() => mark.getAttribute('aria-valuenow')).toBe('5')
    await expect.poll(() => reading(page)).toMatch(/5 bins: set by hand/)
    const box = await mark.boundingBox()
    await page.mouse.move((box?.x ?? 0) + 12, (box?.y ?? 0) + 100)
    await page.mouse.down()
    for (let i = 1; i <= 8; i++) await page.mouse.move((box?.x ?? 0) + 12 + 6 * i, (box?.y ?? 0) + 100)
    await page.mouse.up()
    await expect.poll(async () => Number(await mark.getAttribute('aria-valuenow'))).toBeGreaterThan(5)
    expect(errors).toEqual([])
    await page.close()
  })
})
