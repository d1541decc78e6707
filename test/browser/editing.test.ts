import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import { describe, expect, test } from 'vitest'
import { findings } from './axe'
import { DEMONSTRATION, studyBytes } from './core'
import { browserSession, openFile, studyShown } from './session'

const session = browserSession()

const value = (page: Page, label: RegExp) => page.getByRole('button', { name: label })

/** Until the worker has answered and the page shows it. */
async function settled(page: Page): Promise<void> {
  await page.waitForFunction(() => document.querySelector('main')?.getAttribute('aria-busy') === 'false')
}

async function type(page: Page, label: RegExp, text: string, nth = 0): Promise<void> {
  await value(page, label).nth(nth).click()
  await page.keyboard.type(text)
  await page.keyboard.press('Enter')
  await settled(page)
}

/** The study that Save writes. */
async function saved(page: Page): Promise<Buffer> {
  const download = page.waitForEvent('download')
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  return readFileSync(await (await download).path())
}

async function savedStudy(page: Page) {
  return JSON.parse((await saved(page)).toString())
}

const regimenNames = (page: Page) => page.locator('.regimen h3 .edit').allTextContents()

describe('by mouse', () => {
  test('a weight is typed, everything follows, and Save writes the study with it', async () => {
    const { page, faults } = await session.open()
    const before = await page.locator('.finding').textContent()
    await type(page, /^weight:/, '72')
    expect(await value(page, /^weight:/).textContent()).toBe('72\u00a0kg')
    expect(await page.locator('.finding').textContent()).not.toBe(before)
    const study = await savedStudy(page)
    expect(study.patient.weight).toEqual({ value: 72, unit: 'kg' })
    const untouched = JSON.parse(studyBytes(DEMONSTRATION).toString())
    untouched.patient.weight.value = 72
    expect(study).toEqual(untouched)
    expect(faults).toEqual([])
  })

  test('a unit alone keeps the number, and the converted value is echoed', async () => {
    const { page } = await session.open()
    await type(page, /^most of one dose:/, '2000 mg')
    await type(page, /^most of one dose:/, 'ug')
    expect((await savedStudy(page)).regimens[0].doses[0].atMost).toEqual({ value: 2000, unit: 'ug' })
    // 2000 ug = 2 mg
    expect(await page.locator('.regimen').first().getByRole('status').textContent()).toContain('2\u00a0mg')
  })

  test('mcg is answered with "ug?", which is a button, and nothing is taken before', async () => {
    const { page } = await session.open()
    await type(page, /^dose:/, '850 mcg', 1)
    const field = page.getByRole('textbox', { name: 'dose' })
    expect(await field.inputValue()).toBe('850 mcg')
    expect(await field.getAttribute('aria-invalid')).toBe('true')
    const described = await field.getAttribute('aria-describedby')
    expect(await page.locator(`[id="${described}"]`).textContent()).toContain('ug?')
    expect((await savedStudy(page)).regimens[0].doses[1].amount).toEqual({ value: 500, unit: 'mg' })
    await page.getByRole('button', { name: 'ug?' }).click()
    await settled(page)
    expect((await savedStudy(page)).regimens[0].doses[1].amount).toEqual({ value: 850, unit: 'ug' })
  })

  test('an implausible weight is taken, questioned beside the number, and put right by the unit offered', async () => {
    const { page } = await session.open()
    await type(page, /^weight:/, '58000')
    const question = page.locator('.note .aside.asked')
    expect(await question.textContent()).toMatch(/weight 58000\u00a0kg is outside .* did you mean 58000\u00a0g\?/i)
    expect(await value(page, /^weight:/).getAttribute('aria-describedby')).toBe(await question.getAttribute('id'))
    await question.getByRole('button').click()
    await settled(page)
    expect((await savedStudy(page)).patient.weight).toEqual({ value: 58_000, unit: 'g' })
  })

  test('what the study refuses stays at its field, over the last good page in grey, and Escape takes it back', async () => {
    const { page, faults } = await session.open()
    await type(page, /^low limit:/, '60')
    const field = page.getByRole('textbox', { name: 'low limit' })
    expect(await field.inputValue()).toBe('60')
    expect(await page.locator('.desk.old').count()).toBe(1)
    expect(await page.locator('.issues').textContent()).toContain('The study as it is now cannot be computed')
    // The issue is of the other limit, and stands there too.
    const high = value(page, /^high limit:/).first()
    const described = await high.getAttribute('aria-describedby')
    expect(await page.locator(`[id="${described}"]`).textContent()).toContain('must be above the low one')
    await field.press('Escape')
    await settled(page)
    expect(await page.locator('.desk.old').count()).toBe(0)
    expect(await saved(page)).toEqual(studyBytes(DEMONSTRATION))
    expect(faults).toEqual([])
  })

  test('or the other value mends it', async () => {
    const { page } = await session.open()
    await type(page, /^low limit:/, '60')
    await type(page, /^high limit:/, '80')
    expect(await page.locator('.desk.old').count()).toBe(0)
    const [target] = (await savedStudy(page)).targets
    expect([target.low.value, target.high.value]).toEqual([60, 80])
  })

  test('regimens are added, copied, renamed, moved and removed', async () => {
    const { page } = await session.open()
    const [a, b, c] = await regimenNames(page)
    await page.getByRole('button', { name: 'Add a regimen' }).click()
    await page.locator('.regimen').nth(3).waitFor()
    expect(await regimenNames(page)).toEqual([a, b, c, `${c}, copy`])
    await page.getByRole('button', { name: 'Copy regimen A' }).click()
    await page.locator('.regimen').nth(4).waitFor()
    expect(await regimenNames(page)).toEqual([a, `${a}, copy`, b, c, `${c}, copy`])
    await type(page, /^name of regimen B:/, 'Half the dose')
    await page.getByRole('button', { name: 'Move regimen B up' }).click()
    await settled(page)
    expect((await regimenNames(page)).slice(0, 2)).toEqual(['Half the dose', a])
    await page.getByRole('button', { name: 'Remove regimen B' }).click()
    await page.locator('.regimen').nth(4).waitFor({ state: 'detached' })
    expect(await regimenNames(page)).toEqual(['Half the dose', b, c, `${c}, copy`])
    expect(await page.locator('.exposure thead').first().locator('th').count()).toBe(4)
  })

  test('a dose is marked as missed and as given again', async () => {
    const { page } = await session.open()
    await page.getByText('Doses one by one').first().click()
    const dose = page.locator('.scheduled button').nth(3)
    await dose.click()
    await settled(page)
    expect((await savedStudy(page)).regimens[0].doses[1].exceptions).toEqual([
      { number: 3, missed: true },
      { number: 6, missed: true }
    ])
    expect(await dose.getAttribute('aria-pressed')).toBe('true')
    await dose.click()
    await settled(page)
    expect((await savedStudy(page)).regimens[0].doses[1].exceptions).toEqual([{ number: 6, missed: true }])
  })

  test('undo and redo go all the way, and what was undone to the start is saved byte for byte', async () => {
    const { page } = await session.open()
    for (const weight of ['60', '61', '62']) await type(page, /^weight:/, weight)
    const undo = page.getByRole('button', { name: 'Undo' })
    for (let k = 0; k < 3; k++) {
      await undo.click()
      await settled(page)
    }
    expect(await undo.isDisabled()).toBe(true)
    expect(await saved(page)).toEqual(studyBytes(DEMONSTRATION))
    const redo = page.getByRole('button', { name: 'Redo' })
    for (let k = 0; k < 3; k++) {
      await redo.click()
      await settled(page)
    }
    expect(await value(page, /^weight:/).textContent()).toBe('62\u00a0kg')
    expect(await redo.isDisabled()).toBe(true)
  })
})

describe('by keyboard alone', () => {
  test('a weight is reached, stepped, typed, left and undone', async () => {
    const { page, faults } = await session.open()
    const tabTo = async (label: RegExp) => {
      for (let k = 0; k < 60; k++) {
        await page.keyboard.press('Tab')
        const name = await page.evaluate(() => document.activeElement?.getAttribute('aria-label') ?? '')
        if (label.test(name)) return
      }
      throw new Error(`nothing named ${label} was reached`)
    }
    await tabTo(/^weight:/)
    await page.keyboard.press('Enter')
    const field = page.getByRole('textbox', { name: 'weight' })
    await page.keyboard.press('ArrowUp')
    expect(await field.inputValue()).toBe('59 kg')
    await page.keyboard.press('Shift+ArrowUp')
    expect(await field.inputValue()).toBe('69 kg')
    await page.keyboard.press('Enter')
    await settled(page)
    await page.waitForFunction(() => document.activeElement?.getAttribute('aria-label')?.startsWith('weight'))
    expect(await value(page, /^weight:/).textContent()).toBe('69\u00a0kg')
    await page.keyboard.press('Enter')
    await page.keyboard.type('99')
    await page.keyboard.press('Escape')
    expect(await value(page, /^weight:/).textContent()).toBe('69\u00a0kg')
    await page.keyboard.press('Control+z')
    await settled(page)
    expect(await value(page, /^weight:/).textContent()).toBe('58\u00a0kg')
    await page.keyboard.press('Control+Shift+z')
    await settled(page)
    expect(await value(page, /^weight:/).textContent()).toBe('69\u00a0kg')
    // The offer of a unit is accepted by one key.
    await tabTo(/^most of one dose:/)
    await page.keyboard.press('Enter')
    await page.keyboard.type('1500000 mcg')
    await page.keyboard.press('Enter')
    await page.keyboard.press('Enter')
    await settled(page)
    expect((await savedStudy(page)).regimens[0].doses[0].atMost).toEqual({ value: 1_500_000, unit: 'ug' })
    expect(faults).toEqual([])
  })

  test('a choice is made, and going on takes what was typed', async () => {
    const { page } = await session.open()
    await value(page, /^sex:/).focus()
    await page.keyboard.press('Enter')
    await page.keyboard.press('ArrowDown')
    await page.keyboard.press('Enter')
    await settled(page)
    expect(await value(page, /^sex:/).textContent()).toBe('man')
    await value(page, /^age:/).press('Enter')
    await page.keyboard.type('60')
    await page.keyboard.press('Tab')
    await settled(page)
    expect((await savedStudy(page)).patient).toMatchObject({ sex: 'male', age: { value: 60, unit: 'a' } })
  })

  test('a choice that was never made is not made by going on', async () => {
    const { page } = await session.open()
    const study = JSON.parse(studyBytes(DEMONSTRATION).toString())
    study.title = 'Without a sex'
    study.patient = { weight: study.patient.weight, creatinineClearance: { value: 40, unit: 'mL/min' } }
    await openFile(page, 'without.json', JSON.stringify(study))
    await value(page, /^sex: person/).press('Enter')
    await page.keyboard.press('Tab')
    await settled(page)
    expect((await savedStudy(page)).patient).not.toHaveProperty('sex')
    await value(page, /^sex: person/).press('Enter')
    await page.getByRole('combobox', { name: 'sex' }).selectOption({ label: 'man' })
    await settled(page)
    expect((await savedStudy(page)).patient.sex).toBe('male')
  })

  test('another route is chosen with how the dose is given on it, and the focus follows a regimen that is moved', async () => {
    const { page } = await session.open()
    const choose = async (text: string) => {
      await value(page, /^route:/)
        .nth(1)
        .press('Enter')
      await page.getByRole('combobox', { name: 'route' }).selectOption({ label: text })
      await settled(page)
      return (await savedStudy(page)).regimens[0].doses[1]
    }
    const oral = await choose('orally')
    expect(oral.route).toBe('oral')
    expect(oral).not.toHaveProperty('over')
    expect(await choose('intravenously as a bolus')).toMatchObject({ route: 'intravenous', bolus: true })
    expect(await choose('intravenously over 1\u00a0h')).toMatchObject({ over: { value: 1, unit: 'h' } })
    const up = page.getByRole('button', { name: 'Move regimen C up' })
    await up.press('Enter')
    await page.getByRole('button', { name: 'Move regimen B up' }).and(page.locator(':focus')).waitFor()
  })

  test('what is refused is not lost by going on, and has its message', async () => {
    const { page } = await session.open()
    await value(page, /^weight:/).press('Enter')
    await page.keyboard.type('heavy')
    await page.keyboard.press('Tab')
    const field = page.getByRole('textbox', { name: 'weight' })
    expect(await field.inputValue()).toBe('heavy')
    expect(await field.getAttribute('aria-invalid')).toBe('true')
  })
})

describe('work is kept', () => {
  test('the first visit says what can be changed, and a reload brings the edited study back', async () => {
    const { page, faults } = await session.open()
    expect(await page.locator('.visit').textContent()).toContain('Every underlined value can be changed')
    await type(page, /^weight:/, '72')
    await page.waitForTimeout(300)
    await page.reload()
    await studyShown(page)
    expect(await value(page, /^weight:/).textContent()).toBe('72\u00a0kg')
    expect(await page.locator('.visit').textContent()).toContain('Your last study is open again')
    await page.getByRole('button', { name: 'start from the demonstration' }).click()
    await page.getByRole('button', { name: 'weight: 58\u00a0kg' }).waitFor()
    // Undo brings the last study back.
    await page.getByRole('button', { name: 'Undo' }).click()
    await page.getByRole('button', { name: 'weight: 72\u00a0kg' }).waitFor()
    expect(faults).toEqual([])
  })

  test('what was kept and is damaged is put aside, said, and can still be saved', async () => {
    const { page } = await session.open()
    await type(page, /^weight:/, '72')
    await page.waitForTimeout(300)
    await page.evaluate(damage)
    await page.reload()
    await studyShown(page).catch(() => undefined)
    await page.locator('.desk').waitFor()
    expect(await page.locator('.visit').textContent()).toContain('could not be opened again')
    await type(page, /^weight:/, '60')
    const download = page.waitForEvent('download')
    await page.getByRole('button', { name: 'save it as a file' }).click()
    expect(readFileSync(await (await download).path()).toString()).toBe('{ damaged')
    expect(await page.evaluate(keptKeys)).toEqual(expect.arrayContaining(['last', expect.stringMatching(/^aside /)]))
  })

  test('a browser that keeps nothing says so, and the study can still be edited', async () => {
    const { page } = await session.open()
    await page.addInitScript(() => {
      IDBFactory.prototype.open = () => {
        throw new DOMException('storage is off', 'SecurityError')
      }
    })
    await page.reload()
    await page.locator('.desk .rows tbody td').first().waitFor()
    await type(page, /^weight:/, '72')
    expect(await page.locator('.visit.warn').textContent()).toContain('does not keep your work (storage is off)')
    expect(await value(page, /^weight:/).textContent()).toBe('72\u00a0kg')
  })
})

test.each([
  { width: 360, colorScheme: 'light' },
  { width: 1440, colorScheme: 'dark' }
] as const)('axe-core finds nothing with a refused field and a question open, $width px', async (look) => {
  const { page } = await session.open({ viewport: { width: look.width, height: 800 }, colorScheme: look.colorScheme })
  await type(page, /^serum creatinine:/, '140')
  await page.getByText('Doses one by one').first().click()
  await type(page, /^weight:/, '58 kilos')
  expect(await page.locator('.aside.bad, .aside.asked').count()).toBe(2)
  expect(await findings(page)).toEqual([])
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(look.width)
})

/** In the page: what is kept becomes bytes that are no study. */
function damage(): Promise<void> {
  return new Promise((done) => {
    const opening = indexedDB.open('phasewise')
    opening.onsuccess = () => {
      const transaction = opening.result.transaction('studies', 'readwrite')
      const bytes = new TextEncoder().encode('{ damaged').buffer
      transaction.objectStore('studies').put({ name: 'mine.json', bytes }, 'last')
      transaction.oncomplete = () => {
        opening.result.close()
        done()
      }
    }
  })
}

/** In the page: the keys under which studies are kept. */
function keptKeys(): Promise<IDBValidKey[]> {
  return new Promise((done) => {
    const opening = indexedDB.open('phasewise')
    opening.onsuccess = () => {
      const request = opening.result.transaction('studies').objectStore('studies').getAllKeys()
      request.onsuccess = () => {
        opening.result.close()
        done(request.result)
      }
    }
  })
}
