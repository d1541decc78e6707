import { readFileSync } from 'node:fs'
import type { Download, Page } from 'playwright-core'
import { expect, test } from 'vitest'
import { tableCsv } from '../../src/report/concentrationTable'
import { exposureCsv } from '../../src/report/exposureTable'
import { phasesCsv } from '../../src/report/phasesTable'
import { phasewise } from '../cli/phasewise'
import { DEMONSTRATION, resultInNode, STUDIES, studyBytes } from './core'
import { browserSession, openFile, openShipped, studyShown } from './session'

const session = browserSession()

/** The bytes of the download that an action starts; the CSV comes before its metadata. */
async function downloads(
  page: Page,
  count: number,
  act: () => Promise<void>
): Promise<{ name: string; bytes: Buffer }[]> {
  const arrived: Download[] = []
  const all = new Promise<void>((done) => {
    page.on('download', (download) => {
      arrived.push(download)
      if (arrived.length === count) done()
    })
  })
  await act()
  await all
  page.removeAllListeners('download')
  return Promise.all(
    arrived.map(async (download) => ({
      name: download.suggestedFilename(),
      bytes: readFileSync(await download.path())
    }))
  )
}

async function csvOf(page: Page, card: string): Promise<{ csv: Buffer; metadata: Buffer; name: string }> {
  const files = await downloads(page, 2, () => page.locator(`${card} .take`).click())
  const csv = files.find(({ name }) => name.endsWith('.csv'))
  const metadata = files.find(({ name }) => name.endsWith('.csv-metadata.json'))
  if (csv === undefined || metadata === undefined) throw new Error(`got ${files.map(({ name }) => name).join(', ')}`)
  return { csv: csv.bytes, metadata: metadata.bytes, name: csv.name }
}

function titleOf(id: string): string {
  return `${id.charAt(0).toUpperCase()}${id.slice(1).replaceAll('-', ' ')}`
}

test.each(STUDIES)('%s: the same study gives the same bytes in Node and in the browser', async (id) => {
  const { page, faults } = await session.open()
  if (id !== DEMONSTRATION) {
    const before = await page.locator('h1').textContent()
    await openShipped(page, titleOf(id))
    await page.waitForFunction((title) => document.querySelector('h1')?.textContent !== title, before)
  }
  const result = resultInNode(studyBytes(id))
  expect((await csvOf(page, '.table')).csv.equals(Buffer.from([...tableCsv(result)].join('')))).toBe(true)
  expect((await csvOf(page, '.exposure')).csv.toString()).toBe(exposureCsv(result))
  expect((await csvOf(page, '.phases')).csv.toString()).toBe(phasesCsv(result))
  expect(faults).toEqual([])
})

test('the downloaded tables are those of the command line, byte for byte, and their metadata carries the caution', async () => {
  const { page } = await session.open()
  for (const [card, verb] of [
    ['.table', 'table'],
    ['.exposure', 'exposure'],
    ['.phases', 'phases']
  ] as const) {
    const { csv, metadata, name } = await csvOf(page, card)
    expect(name).toBe(`${DEMONSTRATION}-${verb}.csv`)
    if (verb === 'table') {
      const command = phasewise(['table', `models/studies/${DEMONSTRATION}.json`])
      expect(csv.toString()).toBe(command.out)
    }
    expect(metadata.toString()).toContain('not a medical device')
    expect(JSON.parse(metadata.toString()).url).toBe(name)
  }
})

test('a study is opened by the button', async () => {
  const { page, faults } = await session.open()
  const study = JSON.parse(studyBytes(DEMONSTRATION).toString())
  study.title = 'Opened by button'
  study.patient.serumCreatinine.value = 1
  const chooser = page.waitForEvent('filechooser')
  await page.getByRole('button', { name: 'Open', exact: true }).click()
  const text = JSON.stringify(study)
  await (await chooser).setFiles({ name: 'mine.json', mimeType: 'application/json', buffer: Buffer.from(text) })
  await page.waitForFunction(() => document.querySelector('h1')?.textContent === 'Opened by button')
  expect(await page.locator('.note').textContent()).toContain('serum creatinine 1\u00a0mg/dL')
  expect(faults).toEqual([])
})

test('a study is opened by dropping it on the page, which shows that it may be let go', async () => {
  const { page, faults } = await session.open()
  const study = JSON.parse(studyBytes(DEMONSTRATION).toString())
  study.title = 'Opened by drop'
  const transfer = await page.evaluateHandle((text) => {
    const data = new DataTransfer()
    data.items.add(new File([text], 'dropped.json', { type: 'application/json' }))
    return data
  }, JSON.stringify(study))
  await page.dispatchEvent('main', 'dragover', { dataTransfer: transfer })
  expect(await page.evaluate(() => document.documentElement.classList.contains('dropping'))).toBe(true)
  await page.dispatchEvent('main', 'drop', { dataTransfer: transfer })
  await page.waitForFunction(() => document.querySelector('h1')?.textContent === 'Opened by drop')
  expect(await page.evaluate(() => document.documentElement.classList.contains('dropping'))).toBe(false)
  expect(faults).toEqual([])
})

test('saving gives the very bytes that were opened', async () => {
  const { page } = await session.open()
  // Spacing, key order and a number's spelling are the user's own.
  const text = studyBytes(DEMONSTRATION).toString().replace('"value": 71', '"value":   7.1e1').replaceAll('\n', '\r\n')
  await openFile(page, 'my study.json', text)
  await page.waitForFunction(() => document.querySelector('main')?.getAttribute('aria-busy') === 'false')
  const [saved] = await downloads(page, 1, () => page.getByRole('button', { name: 'Save' }).click())
  expect(saved?.name).toBe('my study.json')
  expect(saved?.bytes.equals(Buffer.from(text))).toBe(true)
})

test('everything wrong with a file is listed with its place, and the last good result stays, labelled', async () => {
  const { page, faults } = await session.open()
  const title = await page.locator('h1').textContent()
  const peak = await page.locator('.exposure table').nth(1).textContent()
  const study = JSON.parse(studyBytes(DEMONSTRATION).toString())
  study.patient.wieght = study.patient.weight
  study.regimens[1].doses[1].amount = 500
  await openFile(page, 'broken.json', JSON.stringify(study))
  const list = page.getByRole('alert')
  await list.waitFor()
  const places = await list.locator('code').allTextContents()
  expect(places).toContain('patient.wieght')
  expect(places).toContain('regimens[1].doses[1].amount')
  expect(await list.textContent()).toContain('weight')
  expect(await list.textContent()).toContain('broken.json was not used')
  expect(await list.textContent()).toContain(title)
  expect(await page.locator('.desk.old').count()).toBe(1)
  expect(await page.locator('.exposure table').nth(1).textContent()).toBe(peak)
  // The file on the desk is still the last good one, and so is what is saved.
  const [saved] = await downloads(page, 1, () => page.getByRole('button', { name: 'Save' }).click())
  expect(saved?.bytes.equals(studyBytes(DEMONSTRATION))).toBe(true)
  // A good file takes the list away.
  await openFile(page, 'good.json', studyBytes(DEMONSTRATION))
  await list.waitFor({ state: 'detached' })
  expect(await page.locator('.desk.old').count()).toBe(0)
  expect(faults).toEqual([])
})

test.each([
  ['not JSON', '{"format": '],
  ['empty', ''],
  ['not UTF-8', Buffer.from([0x7b, 0xff, 0xfe, 0x7d])],
  ['a list', '[]']
])('a file that is %s is refused with words, not with a fault', async (_, content) => {
  const { page, faults } = await session.open()
  await openFile(page, 'odd.json', content)
  const text = await page.getByRole('alert').textContent()
  expect(text).toContain('odd.json was not used')
  expect(text).not.toContain('fault of ours')
  expect(faults).toEqual([])
})

test('what a file calls its regimens is shown as text and never run', async () => {
  const { page, faults } = await session.open()
  const study = JSON.parse(studyBytes(DEMONSTRATION).toString())
  study.title = '<img src=x onerror=alert(1)>'
  study.regimens[0].name = '<script>alert(1)</script>'
  await openFile(page, 'markup.json', JSON.stringify(study))
  await page.waitForFunction(() => document.querySelector('h1')?.textContent?.startsWith('<img'))
  await studyShown(page)
  expect(await page.locator('main img, main script').count()).toBe(0)
  expect(await page.locator('.key').textContent()).toContain('<script>alert(1)</script>')
  expect(faults).toEqual([])
})
