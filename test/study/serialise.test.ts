import { readdirSync, readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { readStudy } from '../../src/study/file/readStudy'
import { serialiseStudy } from '../../src/study/serialise'
import { shippedModel, study } from './example'

const read = (text: string) => {
  const reading = readStudy(text, shippedModel)
  if (!reading.ok) throw new Error(JSON.stringify(reading.issues))
  return reading
}

test.each([
  ['the example', JSON.stringify(study())] as const,
  ...readdirSync('models/studies').map((file) => [file, readFileSync(`models/studies/${file}`, 'utf8')] as const)
])('saving %s loses nothing: the same content, the same hash, the same study', (_, text) => {
  const first = read(text)
  const saved = serialiseStudy(first.file)
  expect(JSON.parse(saved)).toEqual(JSON.parse(text))
  const second = read(saved)
  expect(second.study).toEqual(first.study)
  expect(serialiseStudy(second.file)).toBe(saved)
})

test('a saved file is indented by two blanks and ends with a line break', () => {
  const saved = serialiseStudy(read(JSON.stringify(study())).file)
  expect(saved.startsWith('{\n  "format": "phasewise-study",\n')).toBe(true)
  expect(saved.endsWith('}\n')).toBe(true)
})
