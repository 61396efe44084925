import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import {
  analysed,
  canvasPrint,
  openApp,
  openBrowser,
  reading,
  takeAway,
  temporaryFolder,
  thresholdNow,
} from './page.ts'

let browser: Browser
const folder = temporaryFolder()
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
  folder.remove()
})

/** A table of two blinking emitters that no run of the simulator made: plain arithmetic, so that counts are known. */
function table(): string {
  let text = 'time (s),left,right\n'
  let on = false
  let left = 0
  let seed = 12345
  const uniform = (): number => {
    seed = (seed * 1103515245 + 12345) % 2147483648
    return (seed + 0.5) / 2147483648
  }
  for (let i = 0; i < 12_000; i++) {
    if (left-- <= 0) {
      on = !on
      left = Math.floor(3 * uniform() ** -0.9)
    }
    const noise = (): number => 8 * (uniform() + uniform() - 1)
    text += `${(i * 0.01).toFixed(2)},${Math.round((on ? 90 : 14) + noise())},${Math.round((on ? 60 : 12) + noise())}\n`
  }
  return text
}

describe('the main job', () => {
  it('moves about the record by wheel, drag, keys and strip', async () => {
    const { page, errors } = await openApp(browser)
    await page.getByText(/All \d+ thresholds fitted/).waitFor({ timeout: 30_000 })
    const trace = page.getByRole('application', { name: /^Trace/ })
    const box = await trace.boundingBox()
    const middle = { x: (box?.x ?? 0) + 200, y: (box?.y ?? 0) + 30 }
    const whole = await canvasPrint(page, '.upper canvas')
    await page.mouse.move(middle.x, middle.y)
    for (let i = 0; i < 10; i++) await page.mouse.wheel(0, -200)
    await expect.poll(() => canvasPrint(page, '.upper canvas')).not.toBe(whole)
    const zoomed = await canvasPrint(page, '.upper canvas')
    await page.mouse.down()
    await page.mouse.move(middle.x - 120, middle.y, { steps: 6 })
    await page.mouse.up()
    await expect.poll(() => canvasPrint(page, '.upper canvas')).not.toBe(zoomed)
    await trace.focus()
    const panned = await canvasPrint(page, '.upper canvas')
    await page.keyboard.press('ArrowRight')
    await expect.poll(() => canvasPrint(page, '.upper canvas')).not.toBe(panned)
    await page.mouse.move(10, 10)
    await page.keyboard.press('0')
    await expect.poll(() => canvasPrint(page, '.upper canvas')).toBe(whole)
    expect(errors).toEqual([])
    await page.close()
  })

  it('shows every form of the plots, plants an event, tests the fit, excludes a span, explains numbers', async () => {
    const { page, errors } = await openApp(browser)
    const seen = new Set([await canvasPrint(page, '.lower canvas')])
    for (const name of ['Neighbour', 'Survival', 't × hazard', 'α by shortest']) {
      await page.getByRole('radio', { name }).click()
      await page.waitForTimeout(100)
      seen.add(await canvasPrint(page, '.lower canvas'))
    }
    expect(seen.size).toBe(5)

    await page.getByLabel('Plant an on-time of').fill('10')
    await page.keyboard.press('Enter')
    await page.getByRole('button', { name: 'Plant an event' }).click()
    await page.getByText(/10 s of 10 s survive|of 10 s survive/).waitFor()

    await page.getByRole('button', { name: 'Goodness of fit, on' }).click()
    await page.waitForFunction(() => (document.querySelector('progress')?.value ?? 0) > 0)
    await page.getByRole('button', { name: 'Stop' }).click()
    await page.getByText(/on: p = .*samples\)/).waitFor({ timeout: 30_000 })
    await page.getByRole('button', { name: 'Again' }).click()
    await page.getByText(/on: p = [\d.]+ ± [\d.]+$/).waitFor({ timeout: 60_000 })

    const fraction = (await reading(page)).match(/On fraction\n([\d.]+)/)?.[1]
    const trace = page.getByRole('application', { name: /^Trace/ })
    await trace.focus()
    for (let i = 0; i < 4; i++) await page.keyboard.press('+')
    await page.getByRole('button', { name: 'Exclude visible span' }).click()
    await page.getByRole('button', { name: /^Use .* again$/ }).waitFor()
    await expect
      .poll(async () => (await reading(page)).match(/On fraction\n([\d.]+)/)?.[1])
      .not.toBe(fraction)
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect.poll(async () => (await reading(page)).match(/On fraction\n([\d.]+)/)?.[1]).toBe(fraction)

    await page.getByRole('button', { name: 'Artefact cutoff', exact: true }).first().click()
    await page.getByRole('dialog', { name: 'Help' }).getByText('laser safety officer').waitFor()
    await page.keyboard.press('Escape')
    expect(errors).toEqual([])
    await page.close()
  })

  it('opens a file, remembers how it was read, refuses a broken one in words, and takes everything away', async () => {
    const { page, errors } = await openApp(browser)
    const good = join(folder.path, 'two emitters.csv')
    const again = join(folder.path, 'two more.csv')
    const broken = join(folder.path, 'broken.csv')
    writeFileSync(good, table())
    writeFileSync(again, table())
    writeFileSync(broken, `${table().slice(0, 4000)}\n1.5,what,7\n`)
    await page.getByLabel('Open files', { exact: true }).setInputFiles(good)
    const sheet = page.getByRole('dialog', { name: /^Open two emitters/ })
    await sheet.getByText('3 columns separated by commas').waitFor()
    await sheet.getByRole('button', { name: 'Open', exact: true }).click()
    await page.getByRole('button', { name: 'two emitters left', exact: true }).waitFor()
    await analysed(page)
    expect(await reading(page)).toMatch(/1\.\d+ kcps → [89]\.\d+ kcps|1\.\d+ kcps → 9 kcps/)

    // The same shape again is read without a question.
    await page.getByLabel('Open files', { exact: true }).setInputFiles(again)
    await page.getByRole('button', { name: 'two more left', exact: true }).waitFor()
    await analysed(page)

    await page.getByLabel('Open files', { exact: true }).setInputFiles(broken)
    await page.getByText(/“broken\.csv”, line \d+: .*Nothing was changed\./).waitFor()
    await page.getByRole('button', { name: 'Cancel' }).click()
    expect(await page.getByRole('button', { name: /broken/ }).count()).toBe(0)

    const csv = await takeAway(page, /Dwell table/)
    const rows = csv.text.trim().split('\n').slice(1)
    const total = rows.reduce((sum, row) => sum + Number(row.split(',')[2]), 0)
    expect(total).toBeCloseTo(120, 6)

    const results = JSON.parse((await takeAway(page, /Result document/)).text)
    const [emitter] = results.emitters
    expect(emitter.record.durationSeconds).toBeCloseTo(120, 6)
    expect(emitter.threshold.countsAboveBaseline).toBeGreaterThan(10)
    expect(emitter.dwells.on.fits).toHaveLength(6)
    expect(results.heliograph.recipeHash).toMatch(/^[0-9a-f]{16}$/)
    expect(errors).toEqual([])
    await page.close()
  })

  it('takes figures away that are sound SVG and restore their choices', async () => {
    const { page, errors } = await openApp(browser)
    const start = await thresholdNow(page)
    await page.getByRole('slider', { name: /^Threshold/ }).focus()
    await page.keyboard.press('Shift+ArrowDown')
    await expect.poll(() => thresholdNow(page)).toBe(start - 10)
    for (const width of [85, 178]) {
      const figure = await takeAway(page, new RegExp(`Figure, ${width} mm`))
      const facts = await page.evaluate((text) => {
        const parsed = new DOMParser().parseFromString(text, 'image/svg+xml')
        const sizes = [...parsed.querySelectorAll('text')].map((one) => Number(one.getAttribute('font-size')))
        const strokes = [...parsed.querySelectorAll('[stroke-width]')].map((one) =>
          Number(one.getAttribute('stroke-width')),
        )
        return {
          broken: parsed.querySelector('parsererror') !== null,
          width: parsed.documentElement.getAttribute('width'),
          texts: sizes.length,
          smallest: Math.min(...sizes),
          largest: Math.max(...sizes),
          thinnest: Math.min(...strokes),
        }
      }, figure.text)
      expect(facts.broken).toBe(false)
      expect(facts.width).toBe(`${((width * 72) / 25.4).toFixed(3)}pt`)
      expect(facts.texts).toBeGreaterThan(40)
      expect(facts.smallest).toBeGreaterThanOrEqual(6)
      expect(facts.largest).toBeLessThanOrEqual(8)
      expect(facts.thinnest).toBeGreaterThanOrEqual(0.25)
      if (width === 178) {
        const path = join(folder.path, 'figure.svg')
        writeFileSync(path, figure.text)
        await page.getByRole('button', { name: 'Undo' }).click()
        await expect.poll(() => thresholdNow(page)).toBe(start)
        await page.getByLabel('Open files', { exact: true }).setInputFiles(path)
        await page.getByText(/choices of “figure.svg” are restored/).waitFor()
        await page.getByRole('dialog').getByRole('button', { name: 'Close', exact: true }).last().click()
        await expect.poll(() => thresholdNow(page)).toBe(start - 10)
      }
    }
    expect(errors).toEqual([])
    await page.close()
  })
})
