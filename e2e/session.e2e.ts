import { type BrowserContext, chromium, type Page } from 'playwright-core'
import { afterEach, describe, expect, inject, it } from 'vitest'
import { CHROMIUM_FLAGS } from './find-chromium.ts'
import { analysed, openBrowser, takeAway, temporaryFolder, threshold, thresholdNow } from './page.ts'

const KILLS = Number(process.env['KILLS'] ?? 50)
const folders: { remove(): void }[] = []

async function profile(path: string): Promise<BrowserContext> {
  return chromium.launchPersistentContext(path, {
    executablePath: inject('chromium'),
    args: CHROMIUM_FLAGS,
    viewport: { width: 1440, height: 900 },
  })
}

async function open(context: BrowserContext): Promise<Page> {
  const page = context.pages()[0] ?? (await context.newPage())
  await page.goto(inject('address'))
  await threshold(page).waitFor()
  return page
}

/** Chosen threshold once the app says that everything is saved. */
async function acknowledged(page: Page): Promise<number> {
  await page.getByText('Saved here', { exact: true }).waitFor()
  return thresholdNow(page)
}

/** Ends every process of the browser that uses this profile, without a chance to say goodbye. */
async function killBrowser(path: string): Promise<void> {
  const { execFileSync } = await import('node:child_process')
  try {
    execFileSync('pkill', ['-KILL', '-f', `user-data-dir=${path}`])
  } catch {
    // pkill answers 1 when nothing was left to end.
  }
}

function newFolder(): string {
  const folder = temporaryFolder()
  folders.push(folder)
  return folder.path
}

afterEach(() => {
  for (const folder of folders.splice(0)) folder.remove()
})

describe('the session', () => {
  it('comes back as it was: threshold, window, emitter, plot', async () => {
    const path = newFolder()
    const context = await profile(path)
    const page = await open(context)
    await page.getByRole('button', { name: /emitter 6/ }).click()
    await analysed(page)
    await page.getByRole('radio', { name: 'Survival' }).click()
    await page.getByRole('application', { name: /^Trace/ }).focus()
    await page.keyboard.press('+')
    await page.keyboard.press('+')
    await threshold(page).focus()
    await page.keyboard.press('ArrowDown')
    const chosen = await acknowledged(page)
    const saved = await sessionOf(page)
    await page.reload()
    await threshold(page).waitFor()
    await expect.poll(() => thresholdNow(page)).toBe(chosen)
    expect(await page.getByRole('radio', { name: 'Survival' }).getAttribute('aria-checked')).toBe('true')
    expect(
      await page
        .getByRole('button', { name: /emitter 6/, exact: false })
        .first()
        .getAttribute('aria-current'),
    ).toBe('true')
    expect((await sessionOf(page)).view).toEqual(saved.view)
    expect(Object.keys(saved.view.windows)).toHaveLength(1)
    await context.close()
  })

  it('tells a second tab and does not let it write', async () => {
    const context = await profile(newFolder())
    const first = await open(context)
    const chosen = await acknowledged(first)
    const second = await context.newPage()
    await second.goto(inject('address'))
    await second.getByText(/open in another tab/).waitFor()
    await threshold(second).focus()
    await second.keyboard.press('Shift+ArrowDown')
    await expect.poll(() => thresholdNow(second)).toBe(chosen - 10)
    await second.waitForTimeout(300)
    await second.close()
    await first.reload()
    await threshold(first).waitFor()
    expect(await thresholdNow(first)).toBe(chosen)
    await context.close()
  })

  it(`survives ${KILLS} kills of the browser during edits and holds every acknowledged change`, {
    timeout: 30_000 + KILLS * 8_000,
  }, async () => {
    const path = newFolder()
    let promised: number | null = null
    let attempted: number[] = []
    for (let round = 0; round <= KILLS; round++) {
      const context = await profile(path)
      const page = await open(context)
      const found = await thresholdNow(page)
      if (promised !== null) expect([promised, ...attempted]).toContain(found)
      expect(await page.getByText('could not be read').count()).toBe(0)
      if (round === KILLS) {
        await context.close()
        break
      }
      await threshold(page).focus()
      await page.keyboard.press(found > 60 ? 'Shift+ArrowDown' : 'ArrowUp')
      promised = await acknowledged(page)
      // More edits, not waited for: the browser dies somewhere among them.
      attempted = []
      for (let edit = 0; edit < round % 4; edit++) {
        await page.keyboard.press('ArrowUp')
        attempted.push(promised + edit + 1)
      }
      await killBrowser(path)
      await context.close().catch(() => {})
    }
  })

  it('says in words that storage is refused, and offers a file', async () => {
    const browser = await openBrowser()
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } })
    await page.addInitScript(() => {
      IDBObjectStore.prototype.put = () => {
        throw new DOMException('full', 'QuotaExceededError')
      }
    })
    await page.goto(inject('address'))
    await threshold(page).waitFor()
    await threshold(page).focus()
    await page.keyboard.press('ArrowUp')
    await page.getByText(/gives this page no more storage/).waitFor()
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Save to a file' }).click(),
    ])
    expect(download.suggestedFilename()).toMatch(/\.zip$/)
    await browser.close()
  })

  it('sets a damaged session aside, says so, and begins a new one', async () => {
    const context = await profile(newFolder())
    const page = await open(context)
    await acknowledged(page)
    await page.evaluate(
      () =>
        new Promise<void>((resolve, reject) => {
          const request = indexedDB.open('heliograph-session')
          request.onerror = () => reject(new Error('not opened'))
          request.onsuccess = () => {
            const transaction = request.result.transaction('entries', 'readwrite')
            transaction.objectStore('entries').put({ version: 2, emitters: 'gone' }, 'session')
            transaction.oncomplete = () => resolve()
          }
        }),
    )
    await page.reload()
    await page.getByText(/set aside, not deleted/).waitFor()
    await threshold(page).waitFor()
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Download what was set aside' }).click(),
    ])
    expect(download.suggestedFilename()).toBe('damaged session.json')
    await context.close()
  })

  it('goes out as a file and comes in again', async () => {
    const browser = await openBrowser()
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } })
    await page.goto(inject('address'))
    await threshold(page).waitFor()
    await threshold(page).focus()
    await page.keyboard.press('Shift+ArrowUp')
    const chosen = await acknowledged(page)
    const file = await takeAway(page, /Session file/)
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect.poll(() => thresholdNow(page)).toBe(chosen - 10)
    await page.getByLabel('Open files', { exact: true }).setInputFiles(file.path)
    await page.getByText(/Session “Demonstration” with 6 emitters is open/).waitFor()
    await page.getByRole('dialog').getByRole('button', { name: 'Close', exact: true }).last().click()
    await expect.poll(() => thresholdNow(page)).toBe(chosen)
    await browser.close()
  })

  it('recovers when its worker dies in the middle of a job', async () => {
    const browser = await openBrowser()
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } })
    await page.addInitScript(() => {
      const made: Worker[] = []
      const Original = Worker
      Object.assign(globalThis, { made })
      globalThis.Worker = class extends Original {
        constructor(url: string | URL, options?: WorkerOptions) {
          super(url, options)
          made.push(this)
        }
      }
    })
    await page.goto(inject('address'))
    await threshold(page).waitFor()
    await page.getByRole('button', { name: /emitter 3/ }).click()
    await page.evaluate(() => {
      const { made } = globalThis as unknown as { made: Worker[] }
      for (const worker of made) worker.terminate()
    })
    await analysed(page)
    await page.getByText(/All \d+ thresholds fitted/).waitFor({ timeout: 30_000 })
    await browser.close()
  })
})

interface SavedSession {
  readonly view: { readonly windows: Readonly<Record<string, unknown>>; readonly dwellPlot: string }
}

/** The session as it stands in the browser's storage. */
async function sessionOf(page: Page): Promise<SavedSession> {
  return page.evaluate(
    () =>
      new Promise((resolve, reject) => {
        const request = indexedDB.open('heliograph-session')
        request.onerror = () => reject(new Error('not opened'))
        request.onsuccess = () => {
          const get = request.result.transaction('entries').objectStore('entries').get('session')
          get.onsuccess = () => resolve(get.result as SavedSession)
        }
      }),
  )
}
