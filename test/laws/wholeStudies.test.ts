import { describe, expect, test } from 'vitest'
import { tableColumns, tableRows } from '../../src/report/concentrationTable'
import { exposureDocument } from '../../src/report/exposureDocument'
import { exposureRows } from '../../src/report/exposureTable'
import { exposureText } from '../../src/report/exposureText'
import { pageOf } from '../../src/report/page/pageOf'
import { phasesDocument } from '../../src/report/phasesDocument'
import { phasesRows } from '../../src/report/phasesTable'
import { phasesText } from '../../src/report/phasesText'
import { confirm } from '../../src/study/confirmation'
import { readStudy } from '../../src/study/file/readStudy'
import type { StudyResult } from '../../src/study/result'
import { runStudy } from '../../src/study/run'
import { shippedModel } from '../study/example'
import { randomStudy } from '../study/randomStudy'

const SEEDS = Array.from({ length: 150 }, (_, i) => 7000 + i)

function resultOf(seed: number): StudyResult {
  const read = readStudy(JSON.stringify(randomStudy(seed)), shippedModel)
  if (!read.ok) throw new Error(`seed ${seed}: ${JSON.stringify(read.issues)}`)
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(`seed ${seed}: ${JSON.stringify(outcome.issues)}`)
  return outcome.result
}

/** Every number anywhere in a document, with where it stands. */
function* numbersIn(value: unknown, at = ''): Generator<readonly [string, number]> {
  if (typeof value === 'number') yield [at, value]
  else if (Array.isArray(value)) for (const [i, each] of value.entries()) yield* numbersIn(each, `${at}[${i}]`)
  else if (ArrayBuffer.isView(value))
    for (const [i, each] of (value as Float64Array).entries()) yield [`${at}[${i}]`, each]
  else if (typeof value === 'object' && value !== null) {
    for (const [key, each] of Object.entries(value)) yield* numbersIn(each, `${at}.${key}`)
  }
}

describe('any valid random study', () => {
  test('gives a table of finite numbers, none negative', () => {
    for (const seed of SEEDS) {
      const result = resultOf(seed)
      const width = tableColumns(result).length
      let last = ''
      for (const row of tableRows(result)) {
        expect(row.length).toBe(width)
        for (const cell of row) {
          if (typeof cell === 'number' && !(Number.isFinite(cell) && cell >= 0)) {
            expect.fail(`seed ${seed}: ${row.join(',')}`)
          }
        }
        last = String(row[0])
      }
      expect(last).toBe(result.regimens.at(-1)?.name)
    }
  })

  test('gives documents, long tables, texts and a page without a number that is not finite', () => {
    for (const seed of SEEDS) {
      const result = resultOf(seed)
      for (const document of [
        exposureDocument(result),
        phasesDocument(result),
        exposureRows(result),
        phasesRows(result),
        pageOf(result)
      ]) {
        for (const [at, number] of numbersIn(document)) {
          if (!Number.isFinite(number)) expect.fail(`seed ${seed}: ${at} is ${number}`)
        }
      }
      for (const text of [exposureText(result), phasesText(result)]) expect(text).not.toMatch(/NaN|undefined|Infinity/)
    }
  })

  test('is confirmed by the second method within 1e-9', () => {
    for (const seed of SEEDS.slice(0, 25)) {
      for (const { regimen, largestRelativeDifference, at, massBalance } of confirm(resultOf(seed))) {
        if (!(largestRelativeDifference <= 1e-9))
          expect.fail(`seed ${seed}, ${regimen}: ${largestRelativeDifference} at ${at} h`)
        expect(massBalance).toBeLessThan(1e-12)
      }
    }
  })
})
