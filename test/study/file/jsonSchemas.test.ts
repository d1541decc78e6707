import { readdirSync, readFileSync } from 'node:fs'
import Ajv from 'ajv/dist/2020'
import { describe, expect, test } from 'vitest'
import { jsonSchemas } from '../../../src/study/file/jsonSchemas'
import { model, put, q, study } from '../example'

const schemas = jsonSchemas()

describe('the JSON Schemas', () => {
  test.each(Object.keys(schemas))('%s in public/schemas is what the program reads with (npm run schemas)', (file) => {
    expect(readFileSync(`public/schemas/${file}`, 'utf8')).toBe(schemas[file])
  })

  // An independent validator, so that an editor with these schemas agrees with the program.
  const ajv = new Ajv({ strict: true, strictTuples: false, allErrors: true })
  const validator = (file: string) => ajv.compile(JSON.parse(schemas[file] ?? ''))
  const ofStudy = validator('study.schema.json')
  const ofModel = validator('model.schema.json')

  test('accept every shipped model and study', () => {
    for (const file of readdirSync('models/drugs')) {
      ofModel(JSON.parse(readFileSync(`models/drugs/${file}`, 'utf8')))
      expect(ofModel.errors, file).toBeNull()
    }
    for (const file of readdirSync('models/studies')) {
      ofStudy(JSON.parse(readFileSync(`models/studies/${file}`, 'utf8')))
      expect(ofStudy.errors, file).toBeNull()
    }
    ofStudy(put(study(), 'model', model('pw-101')))
    expect(ofStudy.errors).toBeNull()
  })

  test.each([
    ['an unknown key', 'regimens[0].doses[1].amont', 1],
    ['a bare number for a quantity', 'regimens[0].doses[1].amount', 500],
    ['an unknown unit', 'regimens[0].doses[1].amount', q(500, 'mcg')],
    ['a unit of another kind', 'patient.weight', q(500, 'mg')],
    ['a negative amount', 'regimens[0].doses[1].amount', q(-1, 'mg')],
    ['a missing key', 'regimens[0].doses[1].at', undefined],
    ['an unknown kind of target', 'targets[0].kind', 'auc']
  ])('refuse %s', (_, path, value) => {
    expect(ofStudy(put(study(), path, value))).toBe(false)
  })
})
