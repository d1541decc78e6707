import { type Course, courseOf } from '../../src/pk/course'
import { profileRows } from '../../src/pk/profile'
import type { SamplingTimes } from '../../src/pk/profileTimes'
import { expectWithin } from '../expectWithin'
import { hourly, type RandomStudy } from './randomModel'

export interface Row {
  readonly time: number
  readonly row: string
  readonly values: readonly number[]
}

/** The course of a study that must be writable; its issues fail the test. */
export function course(study: RandomStudy): Course {
  const outcome = courseOf({ ...study, path: 'regimens[0]' })
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return outcome.course
}

/** Every row of a course's table, copied out of its buffer. */
export function rowsOf(given: Course, sampling: SamplingTimes = { every: hourly(2.5), also: [0.01, 0.3] }): Row[] {
  return [...profileRowsCopied(given, sampling)]
}

function* profileRowsCopied(given: Course, sampling: SamplingTimes): Generator<Row> {
  for (const { time, row, values } of profileRows(given, sampling)) yield { time, row, values: [...values] }
}

/** Below this a number has come down by hundreds of half-lives, and soon has fewer digits than a double's. */
const NOTHING = 1e-280

/** Values whose every bit counts: what is as good as nothing is 0. */
export function bitsOf(values: readonly number[]): number[] {
  return values.map((value) => (Math.abs(value) < NOTHING ? 0 : value))
}

/**
 * Fail unless two rows' values agree, each relative to itself. A number e^-x moves by u x where a rate or a time is rounded
 * by u, so that what has come down far is allowed its share: x |ln value| / 12 where that is more than 1.
 */
export function expectRowWithin(
  actual: readonly number[],
  expected: readonly number[],
  relative: number,
  what: string
): void {
  expected.forEach((value, i) => {
    const tolerance =
      Math.abs(value) < NOTHING
        ? { absolute: NOTHING }
        : { relative: relative * Math.max(1, Math.abs(Math.log(Math.abs(value))) / 12) }
    expectWithin(actual[i], value, tolerance, `${what}, column ${i}`)
  })
}
