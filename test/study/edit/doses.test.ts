import { describe, expect, test } from 'vitest'
import { addDose, markDose, removeDose } from '../../../src/study/edit/doses'
import { readStudy } from '../../../src/study/file/readStudy'
import type { StudyFile } from '../../../src/study/file/studySchema'
import { serialiseStudy } from '../../../src/study/serialise'
import { q, shippedModel, study } from '../example'

const file = study() as unknown as StudyFile
const exceptions = (of: StudyFile, line = 1) => of.regimens[0]?.doses[line]?.exceptions
const readable = (of: StudyFile) => readStudy(serialiseStudy(of), shippedModel).ok

describe('what became of a dose', () => {
  test('missed, and given after all', () => {
    const missed = markDose(file, 0, 1, 1, 'missed')
    expect(exceptions(missed)?.map(({ number }) => number)).toEqual([1, 2, 3, 4])
    expect(exceptions(missed)?.[0]).toEqual({ number: 1, missed: true })
    expect(readable(missed)).toBe(true)
    expect(markDose(missed, 0, 1, 1, 'given')).toEqual(file)
  })

  test('a missed dose has no other departure', () => {
    expect(exceptions(markDose(file, 0, 1, 4, 'missed'))?.[2]).toEqual({ number: 4, missed: true })
  })

  test('late, with what else was said of the dose kept, but no longer missed', () => {
    const late = markDose(file, 0, 1, 4, { lateBy: q(90, 'min'), shiftsLater: true })
    expect(exceptions(late)?.[2]).toEqual({
      number: 4,
      stoppedAfter: q(20, 'min'),
      lateBy: q(90, 'min'),
      shiftsLater: true
    })
    expect(exceptions(markDose(file, 0, 1, 2, { lateBy: q(1, 'h') }))?.[0]).toEqual({ number: 2, lateBy: q(1, 'h') })
    expect(readable(late)).toBe(true)
  })

  test('the last exception taken back leaves no empty list', () => {
    const once = markDose(file, 0, 0, 1, 'missed')
    expect(exceptions(once, 0)).toHaveLength(1)
    expect(markDose(once, 0, 0, 1, 'given').regimens[0]?.doses[0]).not.toHaveProperty('exceptions')
  })

  test('there is no such dose line', () => {
    expect(() => markDose(file, 0, 9, 1, 'missed')).toThrow(RangeError)
    expect(() => markDose(file, 3, 0, 1, 'missed')).toThrow(RangeError)
  })
})

describe('dose lines', () => {
  test('one is added as the last once more, a day later where it does not repeat', () => {
    const added = addDose(file, 0)
    expect(added.regimens[0]?.doses).toHaveLength(5)
    // 160 h + 24 h
    expect(added.regimens[0]?.doses[4]).toMatchObject({ route: 'oral', amount: q(500, 'mg'), at: q(184, 'h') })
    expect(readable(added)).toBe(true)
  })

  test('or one of its intervals later, in the unit typed, without repeats and exceptions', () => {
    const repeating = removeDose(removeDose(file, 0, 3), 0, 2)
    const dose = addDose(repeating, 0).regimens[0]?.doses[2]
    expect(dose?.at).toEqual(q(48, 'h'))
    for (const key of ['every', 'count', 'exceptions']) expect(dose).not.toHaveProperty(key)
  })

  test('one is removed, but not the only one', () => {
    expect(removeDose(file, 0, 0).regimens[0]?.doses).toEqual(file.regimens[0]?.doses.slice(1))
    const one = removeDose(removeDose(removeDose(file, 0, 0), 0, 0), 0, 0)
    expect(() => removeDose(one, 0, 0)).toThrow(/at least one/)
  })
})
