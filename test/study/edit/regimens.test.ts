import { describe, expect, test } from 'vitest'
import { addRegimen, copyRegimen, moveRegimen, removeRegimen, renameRegimen } from '../../../src/study/edit/regimens'
import { readStudy } from '../../../src/study/file/readStudy'
import type { StudyFile } from '../../../src/study/file/studySchema'
import { serialiseStudy } from '../../../src/study/serialise'
import { shippedModel, study } from '../example'

const file = study() as unknown as StudyFile
const names = (of: StudyFile) => of.regimens.map(({ name }) => name)

function three(): StudyFile {
  return renameRegimen(renameRegimen(addRegimen(addRegimen(file)), 1, 'B'), 2, 'C')
}

describe('regimens are edited as a new file that is still valid', () => {
  test('a copy stands behind what it copies, under a free name', () => {
    const copied = copyRegimen(copyRegimen(file, 0), 0)
    expect(names(copied)).toEqual(['750 mg every 24 h', '750 mg every 24 h, copy 2', '750 mg every 24 h, copy'])
    expect(names(copyRegimen(copied, 2))[3]).toBe('750 mg every 24 h, copy 3')
    expect(copied.regimens[1]?.doses).toEqual(file.regimens[0]?.doses)
    expect(readStudy(serialiseStudy(copied), shippedModel).ok).toBe(true)
  })

  test('a copy of a name of the greatest length has a name that is read', () => {
    const long = renameRegimen(file, 0, 'x'.repeat(200))
    expect(readStudy(serialiseStudy(copyRegimen(long, 0)), shippedModel).ok).toBe(true)
  })

  test('one is added as a copy of the last', () => {
    expect(names(addRegimen(three()))).toEqual(['750 mg every 24 h', 'B', 'C', 'C, copy'])
  })

  test('measured levels follow a new name', () => {
    const renamed = renameRegimen(file, 0, 'A')
    expect(renamed.levels?.map(({ regimen }) => regimen)).toEqual(['A'])
    expect(readStudy(serialiseStudy(renamed), shippedModel).ok).toBe(true)
  })

  test('one is removed, but neither the last one nor one with measured levels', () => {
    expect(names(removeRegimen(three(), 1))).toEqual(['750 mg every 24 h', 'C'])
    expect(() => removeRegimen(three(), 0)).toThrow(/measured/)
    const { levels: _, ...unmeasured } = file
    expect(() => removeRegimen(unmeasured as StudyFile, 0)).toThrow(/at least one/)
    expect(() => removeRegimen(three(), 3)).toThrow(RangeError)
  })

  test('one is moved up and down, and back to the same file', () => {
    expect(names(moveRegimen(three(), 2, 0))).toEqual(['C', '750 mg every 24 h', 'B'])
    expect(moveRegimen(moveRegimen(three(), 0, 1), 1, 0)).toEqual(three())
    expect(() => moveRegimen(three(), 0, 3)).toThrow(RangeError)
  })

  test('the file before stays as it was', () => {
    const before = structuredClone(file)
    removeRegimen(moveRegimen(renameRegimen(addRegimen(file), 0, 'X'), 0, 1), 0)
    expect(file).toEqual(before)
  })
})
