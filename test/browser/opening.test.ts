import { expect, test } from 'vitest'
import { plain } from '../../src/report/page/prose'
import { DEMONSTRATION, pageInNode } from './core'
import { browserSession } from './session'

const session = browserSession()

test('the page opens with the demonstration study, and its numbers are those of the core in Node', async () => {
  const { page, faults } = await session.open()
  const expected = pageInNode(DEMONSTRATION)
  expect(await page.locator('h1').textContent()).toBe(expected.title)
  expect(await page.title()).toContain(expected.title)

  const grids = page.locator('.exposure table')
  const shown = expected.exposure.filter((grid) => grid.rows.length > 0)
  expect(await grids.count()).toBe(shown.length)
  for (const [k, grid] of shown.entries()) {
    const rows = grids.nth(k).locator('tbody tr')
    expect(await rows.count(), grid.title).toBe(grid.rows.length)
    for (const [i, row] of grid.rows.entries()) {
      const cells = await rows.nth(i).locator('td').allTextContents()
      const verdict = (met: boolean | undefined) => (met === undefined ? '' : met ? ' met' : ' not met')
      expect(cells, row.head).toEqual(row.cells.map((cell) => `${cell.text}${cell.mark ?? ''}${verdict(cell.met)}`))
    }
  }
  const sentences = await page.locator('.finding > p').allTextContents()
  expect(sentences).toEqual(expected.note.findings.map(plain))
  expect(faults).toEqual([])
})

test('the demonstration shows three regimens of which one meets every target', async () => {
  const { page } = await session.open()
  const verdicts = await page.locator('.exposure table').first().locator('tbody tr').all()
  const met = [0, 0, 0]
  for (const row of verdicts) {
    for (const [k, cell] of (await row.locator('td').allTextContents()).entries())
      if (/ met$/.test(cell) && !/not met$/.test(cell)) met[k]!++
  }
  expect(met.filter((count) => count === verdicts.length)).toHaveLength(1)
})

test.each([
  { width: 360, height: 640 },
  { width: 1440, height: 900 }
])('the caution is on the screen wherever the page is scrolled to, at $width px', async (viewport) => {
  const { page } = await session.open({ viewport })
  const length = await page.evaluate(() => document.documentElement.scrollHeight)
  for (const share of [0, 0.25, 0.5, 0.75, 1]) {
    await page.evaluate((y) => window.scrollTo(0, y), share * length)
    const box = await page.locator('.caution').boundingBox()
    expect(box).not.toBeNull()
    expect(box!.y).toBeGreaterThanOrEqual(0)
    expect(box!.y + box!.height).toBeLessThanOrEqual(viewport.height + 0.5)
    const text = await page.evaluate(
      ({ x, y }) => document.elementFromPoint(x, y)?.closest('.caution')?.textContent ?? '',
      { x: box!.x + box!.width / 2, y: box!.y + box!.height / 2 }
    )
    expect(text).toContain('not a medical device')
    expect(text).toContain('Licensed clinicians decide')
  }
})

test('the caution stands on every printed sheet', async () => {
  const { page } = await session.open()
  await page.emulateMedia({ media: 'print' })
  const style = await page.locator('.caution').evaluate((node) => getComputedStyle(node).display)
  // Browsers repeat a table's foot on each sheet; this holds only inside a table.
  expect(style).toBe('table-footer-group')
  expect(await page.locator('#app').evaluate((node) => getComputedStyle(node).display)).toBe('table')
  expect((await page.pdf({ format: 'A4' })).length).toBeGreaterThan(10_000)
})

test('nothing is wider than a phone of 360 px', async () => {
  const { page } = await session.open({ viewport: { width: 360, height: 640 } })
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(360)
})

test('a policy of its own keeps the page from loading, sending or running anything else', async () => {
  const { page } = await session.open()
  const policy = await page.locator('meta[http-equiv="Content-Security-Policy"]').getAttribute('content')
  expect(policy).toContain("default-src 'none'")
  expect(policy).not.toContain('unsafe')
  // The policy is in force: what it forbids is seen to be stopped by it.
  const stoppedBy = await page.evaluate(
    () =>
      new Promise((done) => {
        document.addEventListener('securitypolicyviolation', (event) => done(event.effectiveDirective))
        fetch('https://example.invalid/').then(
          () => done('nothing'),
          () => undefined
        )
      })
  )
  expect(stoppedBy).toBe('connect-src')
})
