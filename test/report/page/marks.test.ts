import { readdirSync, readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import type { NoteView, PageView } from '../../../src/report/page/page'
import { pageOf } from '../../../src/report/page/pageOf'
import { type EditMark, type Prose, plain } from '../../../src/report/page/prose'
import { valueIn } from '../../../src/study/edit/place'
import { readTyped, typedText } from '../../../src/study/edit/readTyped'
import { setChoice, setValue, valueAt } from '../../../src/study/edit/setValue'
import { readStudy } from '../../../src/study/file/readStudy'
import type { StudyFile } from '../../../src/study/file/studySchema'
import { runStudy } from '../../../src/study/run'
import { type Json, put, q, shippedModel, study } from '../../study/example'
import { randomStudy } from '../../study/randomStudy'

const SEEDS = Array.from({ length: 50 }, (_, i) => 41_000 + i)

function pageFor(content: Json): { page: PageView; file: StudyFile } {
  const reading = readStudy(JSON.stringify(content), shippedModel)
  if (!reading.ok) throw new Error(JSON.stringify(reading.issues))
  const outcome = runStudy(reading.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return { page: pageOf(outcome.result, reading.file), file: reading.file }
}

/** Random studies with their pages, made once. */
const PAGES = SEEDS.map((seed) => ({ seed, ...pageFor(randomStudy(seed)) }))

/** Every sentence of the note in which something may be edited. */
function sentences({ heading, note }: PageView): readonly Prose[] {
  const { patient, targets, course, regimens }: NoteView = note
  return [heading, ...patient, ...targets, course, ...regimens.flatMap(({ name, sentence }) => [name, sentence])]
}

function marksOf(page: PageView): readonly EditMark[] {
  return sentences(page).flatMap((prose) =>
    prose.flatMap((part) => (typeof part === 'object' && part.edit !== undefined ? [part.edit] : []))
  )
}

/** The paths of the quantities in the parts of a file that the note shows, as issues write them. */
function typedPaths(value: unknown, at = ''): string[] {
  if (typeof value !== 'object' || value === null) return []
  if ('value' in value && 'unit' in value) return [at]
  return Object.entries(value).flatMap(([key, member]) => {
    const step = Array.isArray(value) ? `[${key}]` : at === '' ? key : `.${key}`
    return typedPaths(member, `${at}${step}`)
  })
}

test('every mark of any study leads to the very value in the file that it says it shows', () => {
  for (const { seed, page, file } of PAGES) {
    for (const { place, at } of marksOf(page)) {
      expect(valueAt(file, place.path), `seed ${seed}: ${at}`).toEqual(valueIn(place))
    }
  }
})

test('every quantity that was typed for patient, regimens, targets and course has its mark, once', () => {
  for (const { seed, page, file } of PAGES) {
    const { patient, regimens, targets, sampling, now, mic } = file
    const overtaken = (path: string) => path.startsWith('patient.') && atZero(file)
    const wanted = typedPaths({ patient, regimens, targets, sampling, now, mic }).filter((path) => !overtaken(path))
    const marked = marksOf(page).map(({ at }) => at)
    expect([...new Set(marked)].length, `seed ${seed}: marked twice`).toBe(marked.length)
    expect(
      wanted.filter((path) => !marked.includes(path)),
      `seed ${seed}`
    ).toEqual([])
  }
})

/** A change at time 0 stands in place of what it changes. */
function atZero(file: StudyFile): boolean {
  return file.patient.changes?.some(({ at }) => at.value === 0) === true
}

test('typing again what stands at a mark changes nothing', () => {
  for (const { seed, page, file } of PAGES) {
    for (const { place, at } of marksOf(page)) {
      if (valueIn(place) === undefined) continue
      const answer = readTyped(place, typedText(place))
      if (!answer.ok) expect.fail(`seed ${seed}: ${at}: ${answer.message}`)
      expect(setValue(file, place.path, answer.value), `seed ${seed}: ${at}`).toEqual(file)
    }
  }
})

test.each(readdirSync('models/studies'))('%s reads the same with marks, and is shown as it was typed', (name) => {
  const content = JSON.parse(readFileSync(`models/studies/${name}`, 'utf8'))
  const reading = readStudy(JSON.stringify(content), (id) =>
    JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8'))
  )
  if (!reading.ok) throw new Error(JSON.stringify(reading.issues))
  const outcome = runStudy(reading.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  const page = pageOf(outcome.result, reading.file)
  for (const prose of sentences(page)) expect(plain(prose)).not.toMatch(/undefined|NaN| {2}| ,| \./)
  expect(marksOf(page).length).toBeGreaterThan(10)
  expect(marksOf(pageOf(outcome.result))).toEqual([])
})

test('an implausible weight carries its question and the neighbouring unit', () => {
  const { page } = pageFor(put(study(), 'patient.serumCreatinine', q(140, 'mg/dL')))
  const mark = marksOf(page).find(({ at }) => at === 'patient.serumCreatinine')
  expect(mark?.question?.text).toContain('140\u00a0mg/dL')
  expect(mark?.question?.offer?.quantity).toEqual({ value: 140, unit: 'umol/L' })
})

test('a value typed in another unit than the canonical one is echoed in that', () => {
  const { page } = pageFor(put(study(), 'patient.weight', q(58_000, 'g')))
  const marks = marksOf(page)
  // 58 000 g = 58 kg; 2 g = 2000 mg; 20 min = 1/3 h.
  expect(marks.find(({ at }) => at === 'patient.weight')?.echo).toBe('58\u00a0kg')
  expect(marks.find(({ at }) => at === 'regimens[0].doses[0].atMost')?.echo).toBe('2\u202f000\u00a0mg')
  const stopped = marks.find(({ at }) => at === 'regimens[0].doses[1].exceptions[2].stoppedAfter')
  expect(stopped?.echo).toBe('0.333333\u00a0h')
  expect(marks.find(({ at }) => at === 'regimens[0].doses[1].amount')?.echo).toBeUndefined()
})

test('every route and product that is offered gives a study that is read', () => {
  for (const { seed, page, file } of PAGES.slice(0, 25)) {
    for (const { place, at } of marksOf(page)) {
      if (place.kind !== 'choice' || !/\.(?:route|product)$/.test(at)) continue
      for (const choice of place.choices) {
        const reading = readStudy(JSON.stringify(setChoice(file, place.path, choice)), shippedModel)
        // What happened to an infusion, stopped early, may not fit a dose that is given at once; that is said.
        const issues = reading.ok ? [] : reading.issues.filter(({ path }) => !path.includes('.exceptions'))
        expect(issues, `seed ${seed}: ${at} ${choice.text}`).toEqual([])
      }
    }
  }
})
