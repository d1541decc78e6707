import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { browserSession, openFile } from './session'

const session = browserSession()

/** A study of target-mediated disposition over decades, which takes many seconds. */
function longStudy(): string {
  const study = JSON.parse(readFileSync('models/studies/bound-by-its-target.json', 'utf8'))
  study.sampling = { until: { value: 4000, unit: 'wk' }, every: { value: 1, unit: 'wk' } }
  return JSON.stringify(study)
}

test('a run of over two seconds can be stopped, says what it was doing, and the page goes on with what it shows', async () => {
  const { page, faults } = await session.open()
  const title = await page.title()
  await openFile(page, 'long.json', longStudy())
  const stop = page.getByRole('button', { name: 'Stop', exact: true })
  await stop.waitFor({ timeout: 30_000 })
  expect(await page.getByRole('status').first().textContent()).toMatch(/^(computing|reading|laying)/)
  await stop.click()
  await page
    .getByText(/stopped while (computing|reading|laying)/)
    .first()
    .waitFor()
  expect(await page.title()).toBe(title)

  // The worker that took over answers: the study that is shown can still be checked and edited.
  await page.getByRole('button', { name: 'Check by a second method' }).click()
  await page.locator('.witness', { hasText: 'confirmed by a second method' }).waitFor()
  expect(faults).toEqual([])
})
