import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { exposureDocument } from '../../src/report/exposureDocument'
import { phasesDocument } from '../../src/report/phasesDocument'
import { readStudy } from '../../src/study/file/readStudy'
import { runStudy } from '../../src/study/run'
import { expectWithin } from '../expectWithin'

const FOLDER = 'test/reference/words'

interface Reference {
  readonly name: string
  readonly study: unknown
  readonly regimens: readonly unknown[]
  readonly stretches: readonly unknown[]
  readonly distribution: readonly unknown[]
}

const references = readdirSync(FOLDER).map((file) => JSON.parse(readFileSync(`${FOLDER}/${file}`, 'utf8')) as Reference)

/** Times and shares are held against 1 h and 1 where they are smaller; everything else relatively. */
function toleranceOf(path: string, expected: number): { absolute: number } {
  // Peak less minimum, where a dose is a ten-millionth of what is in the body.
  if (/(fluctuation|swing)$/.test(path)) return { absolute: 1e-8 * expected }
  const held = /time|_h$/i.test(path) ? Math.max(1, expected) : expected
  return { absolute: 1e-11 * held }
}

/** Every expected value is the found one, and what is not defined is null. */
function expectSame(found: unknown, expected: unknown, path: string): void {
  if (typeof expected === 'number') {
    if (typeof found !== 'number') throw new Error(`${path}: ${JSON.stringify(found)}, expected ${expected}`)
    expectWithin(found, expected, toleranceOf(path, expected), path)
  } else if (Array.isArray(expected)) {
    const list = found as readonly unknown[]
    expect(list.length, path).toBe(expected.length)
    for (const [i, value] of expected.entries()) expectSame(list[i], value, `${path}[${i}]`)
  } else if (typeof expected === 'object' && expected !== null) {
    const group = found as Record<string, unknown>
    for (const [key, value] of Object.entries(expected)) expectSame(group[key], value, `${path}.${key}`)
  } else expect(found, path).toBe(expected)
}

// Source: an independent reading of the files and of every word, mpmath at 50 digits (test/reference/generate/words.py).
describe.each(references)('$name: every word is its number', ({ study, ...expected }) => {
  const read = readStudy(new TextEncoder().encode(JSON.stringify(study)), () => undefined)
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))

  test('intervals, days, steady state and targets, met or not', () => {
    const { regimens } = exposureDocument(outcome.result) as { regimens: unknown }
    expectSame(regimens, expected.regimens, 'regimens')
  })

  test('phases, moments, decrement times and the end of distribution', () => {
    const { stretches, distribution } = phasesDocument(outcome.result) as { stretches: object[]; distribution: unknown }
    const standard = stretches.map((stretch) => ({
      ...stretch,
      decrementTimes: (stretch as { decrementTimes: { infusion_h: number }[] }).decrementTimes.filter(
        ({ infusion_h }) => [1, 4, 12, 24].includes(infusion_h)
      )
    }))
    expectSame(standard, expected.stretches, 'stretches')
    expectSame(distribution, expected.distribution, 'distribution')
  })
})
