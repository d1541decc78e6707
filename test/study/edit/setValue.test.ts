import { expect, test } from 'vitest'
import { setChoice, setValue, valueAt } from '../../../src/study/edit/setValue'
import type { StudyFile } from '../../../src/study/file/studySchema'
import { q, study } from '../example'

const file = study() as unknown as StudyFile

test('one value is put in place of another, and nothing else changes', () => {
  const path = ['regimens', 0, 'doses', 1, 'amount']
  const before = structuredClone(file)
  const edited = setValue(file, path, q(1.2, 'g'))
  expect(valueAt(edited, path)).toEqual({ value: 1.2, unit: 'g' })
  expect(file).toEqual(before)
  expect(setValue(edited, path, valueAt(file, path))).toEqual(file)
  // What is not on the path is the same object as before.
  expect(edited.patient).toBe(file.patient)
  expect(edited.regimens[0]?.doses[0]).toBe(file.regimens[0]?.doses[0])
})

test('undefined takes a key or an entry away', () => {
  expect(setValue(file, ['title'], undefined)).not.toHaveProperty('title')
  expect(setValue(file, ['targets', 1], undefined).targets).toHaveLength(4)
})

test('a key that was not there is added', () => {
  expect(valueAt(setValue(file, ['patient', 'albumin'], q(40, 'g/L')), ['patient', 'albumin'])).toEqual(q(40, 'g/L'))
})

test.each([[[]], [['regimens', 7, 'name']], [['regimens', -1]], [['title', 'x']], [['patient', 'constructor', 'x']]])(
  'a path that leads nowhere is our own mistake: %j',
  (path) => {
    expect(() => setValue(file, path, 1)).toThrow(RangeError)
  }
)

test('a path into what every object inherits leads to nothing', () => {
  expect(valueAt(file, ['patient', 'constructor'])).toBeUndefined()
})

test('a choice brings with it what must stand beside it, and takes away what must not', () => {
  const path = ['regimens', 0, 'doses', 1, 'route']
  const chosen = setChoice(file, path, { value: 'oral', text: 'orally', beside: { over: undefined, reason: 'x' } })
  const dose = chosen.regimens[0]?.doses[1]
  expect(dose).toMatchObject({ route: 'oral', reason: 'x' })
  expect(dose).not.toHaveProperty('over')
})
