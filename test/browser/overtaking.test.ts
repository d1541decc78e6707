import { expect, test } from 'vitest'
import { DEMONSTRATION, studyBytes } from './core'
import { browserSession } from './session'

const session = browserSession()

test('of files let go in quick succession the last one stands, and the table is of the study that is shown', async () => {
  const { page, faults } = await session.open()
  const texts = [1, 2, 3, 4].map((k) => {
    const study = JSON.parse(studyBytes(DEMONSTRATION).toString())
    study.title = `number ${k}`
    for (const { doses } of study.regimens) doses[0].at.value = k
    return JSON.stringify(study)
  })
  // The last one is refused: what was computed last stays, whichever that is.
  texts.push('{"format": "phasewise-study"}')
  await page.evaluate((files) => {
    for (const text of files) {
      const data = new DataTransfer()
      data.items.add(new File([text], 'quick.json', { type: 'application/json' }))
      document.querySelector('main')?.dispatchEvent(new DragEvent('drop', { bubbles: true, dataTransfer: data }))
    }
  }, texts)
  await page.getByRole('alert').waitFor()
  await page.waitForFunction(() => document.querySelector('main')?.getAttribute('aria-busy') === 'false')
  const title = (await page.locator('h1').textContent()) ?? ''
  const regimen = (await page.locator('.regimen').first().textContent()) ?? ''
  const start = title.startsWith('number') ? title.slice('number '.length) : '0'
  expect(regimen).toContain(`at ${start}\u00a0h`)
  const rows = await page.locator('.rows tbody tr').allTextContents()
  expect(rows.filter((row) => row.includes('before dose'))[0]).toMatch(new RegExp(`^${start}before dose`))
  expect(faults).toEqual([])
})

test('a page whose worker cannot be loaded says so', async () => {
  const { page } = await session.open()
  await page.route(/pageWorker/, (route) => route.abort())
  await page.reload()
  const text = await page.getByRole('alert').textContent()
  expect(text).toContain('it stopped')
})
