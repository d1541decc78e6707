import { expect, test } from 'vitest'
import { findings } from './axe'
import { browserSession, openFile } from './session'

const session = browserSession()
const LOOKS = ([360, 1440] as const).flatMap((width) =>
  (['light', 'dark'] as const).map((colorScheme) => ({ width, colorScheme }))
)

test.each(LOOKS)('axe-core finds nothing on the page, $colorScheme, $width px', async ({ width, colorScheme }) => {
  const { page } = await session.open({ viewport: { width, height: 800 }, colorScheme })
  await page.evaluate(() => {
    for (const details of document.querySelectorAll('details')) details.open = true
  })
  expect(await findings(page)).toEqual([])
})

test.each(LOOKS)(
  'nor with problems listed over the last good result, $colorScheme, $width px',
  async ({ width, colorScheme }) => {
    const { page } = await session.open({ viewport: { width, height: 800 }, colorScheme })
    await openFile(page, 'broken.json', '{"format": "phasewise-study", "version": 1}')
    await page.getByRole('alert').waitFor()
    expect(await findings(page)).toEqual([])
  }
)

test('every control is reached with the Tab key, in the order of the page, and shows that it is', async () => {
  const { page } = await session.open()
  const wanted = await page.evaluate(
    () =>
      [...document.querySelectorAll('button:not(:disabled), a[href], summary, [tabindex="0"]')].filter((node) =>
        node.checkVisibility()
      ).length
  )
  const reached = new Set<string>()
  let unseen = 0
  for (let k = 0; k < wanted + 5; k++) {
    await page.keyboard.press('Tab')
    const at = await page.evaluate(() => {
      const node = document.activeElement
      if (node === null || node === document.body) return undefined
      const all = [...document.querySelectorAll('*')]
      return { place: String(all.indexOf(node)), outline: getComputedStyle(node).outlineStyle }
    })
    if (at === undefined) break
    if (at.outline === 'none') unseen++
    reached.add(at.place)
  }
  expect(reached.size).toBe(wanted)
  expect(unseen).toBe(0)
})

test('the axis, the site and the pages of the table are turned by keyboard', async () => {
  const { page } = await session.open()
  const log = page.getByRole('button', { name: 'Log' })
  await log.focus()
  await page.keyboard.press('Enter')
  expect(await log.getAttribute('aria-pressed')).toBe('true')
  const first = await page.locator('.rows tbody tr').first().textContent()
  await page.getByRole('button', { name: 'Next' }).focus()
  await page.keyboard.press('Space')
  await page.waitForFunction((text) => document.querySelector('.rows tbody tr')?.textContent !== text, first)
  expect(await page.locator('.pager').textContent()).toMatch(/rows 25 to 48 of \d+/)
  await page.getByRole('button', { name: /^Regimen B/ }).press('Enter')
  expect(await page.locator('.pager').textContent()).toMatch(/rows 1 to 24 of \d+/)
})

test('a worked study is opened from the menu by keyboard', async () => {
  const { page } = await session.open()
  await page.getByRole('button', { name: 'Worked studies' }).press('Enter')
  await page.keyboard.press('Tab')
  await page.keyboard.press('Tab')
  const chosen = await page.evaluate(() => document.activeElement?.textContent)
  await page.keyboard.press('Enter')
  await page.waitForFunction(() => document.querySelector('main')?.getAttribute('aria-busy') === 'false')
  expect(chosen).not.toBe('Worked studies')
  expect(await page.locator('.shelf').evaluate((node) => node.matches(':popover-open'))).toBe(false)
})

test('figures are images in words that name every regimen', async () => {
  const { page } = await session.open()
  const label = await page.locator('.curve-card svg[role="img"]').getAttribute('aria-label')
  for (const name of ['500 mg every 12 h', '500 mg every 18 h', '500 mg every 24 h']) expect(label).toContain(name)
})
