import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { saturationView } from '../../src/report/page/saturationView'
import { readStudy } from '../../src/study/file/readStudy'
import { runStudy } from '../../src/study/run'
import { browserSession, openFile } from './session'

const session = browserSession()
const STUDY = readFileSync('models/studies/stepped-up-too-far.json')

/** What the core in Node makes of the same study. */
function viewInNode() {
  const read = readStudy(STUDY, (id) => JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8')))
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  const view = saturationView(outcome.result)
  if (view === undefined) throw new Error('no view')
  return view
}

test('a study that saturates shows its steady state against the dose rate, with the numbers of the core in Node', async () => {
  const { page, faults } = await session.open()
  await openFile(page, 'stepped-up-too-far.json', STUDY)
  const card = page.getByRole('region', { name: 'Saturation' })
  await card.waitFor()
  const expected = viewInNode()
  const rows = card.locator('tbody tr')
  expect(await rows.count()).toBe(expected.grid.rows.length)
  for (const [i, row] of expected.grid.rows.entries()) {
    const cells = await rows.nth(i).locator('td').allTextContents()
    expect(cells, row.head).toEqual(row.cells.map((cell) => `${cell.text}${cell.mark ?? ''}`))
  }
  expect(await card.textContent()).toMatch(/no steady state: the dose rate .* is above the capacity/)
  expect(await card.locator('svg[role=img]').getAttribute('aria-label')).toBe(expected.figure.label)
  expect(faults).toEqual([])
})

test('a linear study has no such card', async () => {
  const { page } = await session.open()
  await page.getByRole('region', { name: 'Phases' }).waitFor()
  expect(await page.getByRole('region', { name: 'Saturation' }).count()).toBe(0)
})

test('the second computation answers on demand, and says what it does not prove', async () => {
  const { page, faults } = await session.open()
  await page.getByRole('button', { name: 'Check by a second method' }).click()
  const said = page.locator('.witness', { hasText: 'confirmed by a second method' })
  await said.waitFor()
  expect(await said.textContent()).toMatch(
    /\(\d+ in 10\^\d+\).*says nothing about how well the model fits this patient/
  )
  expect(faults).toEqual([])
})

test('a study that was integrated is checked at a hundredth of its tolerance', async () => {
  const { page } = await session.open()
  await openFile(page, 'stepped-up-too-far.json', STUDY)
  await page.getByRole('region', { name: 'Saturation' }).waitFor()
  await page.getByRole('button', { name: 'Check by a second method' }).click()
  await page.locator('.witness', { hasText: 'at a hundredth of its tolerance' }).waitFor()
})
