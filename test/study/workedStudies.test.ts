import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { areaBetween, valueAt } from '../../src/pk/curve'
import { readStudy } from '../../src/study/file/readStudy'
import type { StudyResult } from '../../src/study/result'
import { runStudy } from '../../src/study/run'
import { expectWithin } from '../expectWithin'

interface Reference {
  readonly study: string
  readonly cases: readonly {
    readonly regimen: string
    readonly peak_mg_L: number
    readonly peakTime_h: number
    readonly rows: readonly (readonly [number, number, number, number])[]
  }[]
}

const FOLDER = 'test/reference/studies'
const OBSERVED = { kind: 'observed' } as const

function shippedModel(id: string): unknown {
  return JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8'))
}

function resultOf(study: string): StudyResult {
  const read = readStudy(readFileSync(`models/studies/${study}`), shippedModel)
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return outcome.result
}

const references = readdirSync(FOLDER).map((name) => JSON.parse(readFileSync(`${FOLDER}/${name}`, 'utf8')) as Reference)

// Source: an independent reading of the same files, mpmath at 40 digits (test/reference/generate/whole_study.py).
describe.each(references)('$study, from the file to the numbers', ({ study, cases }) => {
  const result = resultOf(study)

  test('every regimen is there, in its order', () => {
    expect(result.regimens.map(({ name }) => name)).toEqual(cases.map(({ regimen }) => regimen))
  })

  test.each(cases)('$regimen: concentration, area and what has left the body', ({ regimen, rows }) => {
    const course = result.regimens.find(({ name }) => name === regimen)?.course
    if (course === undefined) throw new Error(`no ${regimen}`)
    for (const [time, concentration, area, eliminated] of rows) {
      expectWithin(
        valueAt(course.trajectory, OBSERVED, time, 'before'),
        concentration,
        { relative: 1e-11 },
        `${time} h`
      )
      expectWithin(areaBetween(course.trajectory, OBSERVED, 0, time), area, { relative: 1e-11 }, `area to ${time} h`)
      let out = 0
      for (const piece of course.trajectory.pieces) {
        const { start, duration } = piece.segment
        if (start < time) out += piece.eliminated(Math.min(duration, time - start))
      }
      expectWithin(out, eliminated, { relative: 1e-11 }, `eliminated to ${time} h`)
    }
  })

  test.each(cases)('$regimen: the highest peak', ({ regimen, peak_mg_L }) => {
    const intervals = result.regimens.find(({ name }) => name === regimen)?.exposure.intervals ?? []
    expectWithin(Math.max(...intervals.map(({ peak }) => peak)), peak_mg_L, { relative: 1e-11 })
  })
})
