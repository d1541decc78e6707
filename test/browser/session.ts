import type { Browser, BrowserContextOptions, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll } from 'vitest'
import { launchBrowser, openPage, serveApp, type WatchedPage } from './browser'

/** A browser and the served app for the tests of one file; both end with it. */
export function browserSession() {
  let browser: Browser | undefined
  let served: Awaited<ReturnType<typeof serveApp>> | undefined
  beforeAll(async () => {
    browser = await launchBrowser()
    served = await serveApp()
  })
  afterEach(async () => {
    await Promise.all((browser?.contexts() ?? []).map((context) => context.close()))
  })
  afterAll(async () => {
    await browser?.close()
    await served?.close()
  })
  return {
    /** A fresh page with the demonstration study on it. */
    async open(options: BrowserContextOptions = {}): Promise<WatchedPage> {
      if (browser === undefined || served === undefined) throw new Error('the session has not begun')
      const watched = await openPage(browser, served.address, options)
      await studyShown(watched.page)
      return watched
    }
  }
}

/** Until a study, with the first rows of its table, is on the page. */
export async function studyShown(page: Page): Promise<void> {
  await page.waitForSelector('.desk .rows tbody td, [role="alert"]')
  const refused = await page.locator('[role="alert"]').allTextContents()
  if (refused.length > 0) throw new Error(refused.join('\n'))
}

export async function openShipped(page: Page, title: string): Promise<void> {
  await page.getByRole('button', { name: 'Worked studies' }).click()
  await page.getByRole('button', { name: title, exact: true }).click()
}

export async function openFile(page: Page, name: string, content: Buffer | string): Promise<void> {
  await page.setInputFiles('input[type=file]', {
    name,
    mimeType: 'application/json',
    buffer: Buffer.isBuffer(content) ? content : Buffer.from(content)
  })
}
