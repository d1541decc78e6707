import { describe, expect, test } from 'vitest'
import { readStudy } from '../../src/study/file/readStudy'
import type { StudyResult } from '../../src/study/result'
import { runStudy } from '../../src/study/run'
import { type Json, put, q, shippedModel, study } from './example'

/** The example study with one value of the patient typed otherwise, run. */
function resultWith(path: string, value: Json): StudyResult {
  const read = readStudy(JSON.stringify(put(study(), path, value)), shippedModel)
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return outcome.result
}

// Bounds: a fact of common practice, as the program states them.
describe('implausible values are questioned in the unit typed, with the neighbour offered, and never blocked', () => {
  test.each([
    ['patient.weight', q(20, 'kg'), undefined],
    ['patient.serumCreatinine', q(140, 'mg/dL'), q(140, 'umol/L')],
    ['patient.serumCreatinine', q(1.6, 'umol/L'), q(1.6, 'mg/dL')]
  ])('%s of %j', (path, typed, offer) => {
    const { questions, cautions } = resultWith(path, typed)
    const question = questions.find((each) => each.path === path)
    expect(question?.text).toContain(`${typed.value} ${typed.unit}`)
    expect(question?.offer).toEqual(offer)
    expect(cautions).toContain(question?.text)
  })

  test('plausible values are not questioned', () => {
    expect(resultWith('patient.weight', q(58, 'kg')).questions).toEqual([])
  })
})
