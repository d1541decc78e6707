import { describe, expect, test } from 'vitest'
import { type Course, type CourseRequest, continuedCourse, courseOf } from '../../src/pk/course'
import { valueAt } from '../../src/pk/curve'
import type { DoseLine } from '../../src/pk/prescription'
import { repeatsAtEnd } from '../../src/pk/repeating'
import { expectWithin } from '../expectWithin'
import { hours, line, oneCompartment, subjectOf } from './subjects'

const model = oneCompartment({ volume: 10, k: 0.1 })
const subject = subjectOf(model)

function request(lines: readonly DoseLine[], rest: Partial<CourseRequest> = {}): CourseRequest {
  const prescription = { name: 'regimen', start: 'empty' as const, lines }
  return { prescription, stretches: [{ from: 0, subject }], sessions: [], until: 24, path: 'regimens[0]', ...rest }
}

function continued(given: CourseRequest, end: number): Course {
  const outcome = continuedCourse(given, end)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return outcome.course
}

function times(course: Course): number[] {
  return course.administrations.map(({ at }) => at)
}

describe('what repeats at the end', () => {
  test('is a line without a count, or whose count reaches the end', () => {
    expect(repeatsAtEnd(line(1, { every: hours(12) }), 24)).toBe(true)
    expect(repeatsAtEnd(line(1, { every: hours(12), count: 2 }), 24)).toBe(true)
    expect(repeatsAtEnd(line(1, { every: hours(12), count: 1 }), 24)).toBe(false)
    expect(repeatsAtEnd(line(1, { at: 6, every: hours(9), count: 2 }), 24)).toBe(true)
    expect(repeatsAtEnd(line(1), 24)).toBe(false)
    expect(repeatsAtEnd(line(1, { at: 24, every: hours(12) }), 24)).toBe(false)
  })

  test('goes on in a continued course; what does not, and what comes too late, does not', () => {
    const lines = [
      line(1, { every: hours(12), count: 2 }),
      line(2, { at: 3, every: hours(6), count: 2 }),
      line(3, { at: 23 }),
      line(4, { at: 30 })
    ]
    expect(times(continued(request(lines), 48))).toEqual([0, 3, 9, 12, 23, 24, 36])
  })

  test('goes on without the exceptions at or after the end, with those before', () => {
    const exceptions = [
      { number: 2, lateBy: 1 },
      { number: 3, missed: true }
    ]
    const course = continued(request([line(1, { every: hours(12), count: 4, exceptions })]), 48)
    expect(times(course)).toEqual([0, 13, 24, 36])
    expect(course.administrations.some(({ missed }) => missed)).toBe(false)
  })

  test('goes on with sessions that repeat, and the person as at the end', () => {
    const larger = subjectOf(oneCompartment({ volume: 20, k: 0.1 }))
    const given = request([line(1, { every: hours(12) })], {
      sessions: [
        { at: 2, duration: 1, clearance: 5, every: hours(8) },
        { at: 4, duration: 1, clearance: 5, every: hours(4), count: 2 }
      ],
      stretches: [
        { from: 0, subject },
        { from: 24, subject: larger },
        { from: 30, subject }
      ]
    })
    const course = continued(given, 48)
    expect(course.sessions.map(({ start }) => start).sort((a, b) => a - b)).toEqual([2, 4, 8, 10, 18, 26, 34, 42])
    expect(course.segments.at(-1)?.model).toBe(larger.model)
  })

  test('an infusion that still runs at the end runs on at its rate', () => {
    const course = continued(request([line(300, { over: 30 })]), 200)
    const observed = { kind: 'observed' as const }
    expectWithin(valueAt(course.trajectory, observed, 200, 'before'), 10 * -Math.expm1(-20), { relative: 1e-14 })
    const ended = continued(request([line(300, { over: 23 })]), 200)
    expect(valueAt(ended.trajectory, observed, 200, 'before')).toBeLessThan(1e-5)
  })

  test('leaves every number before the end as it was, to the bit', () => {
    const given = request([line(100, { over: 1, every: hours(6) }), line(40, { at: 2 })])
    const outcome = courseOf(given)
    if (!outcome.ok) throw new Error('not written')
    const longer = continued(given, 100)
    for (const at of [0.5, 1, 3, 7, 23.9]) {
      const read = (course: Course): number => valueAt(course.trajectory, { kind: 'observed' }, at, 'after')
      expect(read(longer)).toBe(read(outcome.course))
    }
  })
})

test('issues are handed back instead of a course', () => {
  const outcome = courseOf(request([line(1, { route: 'elsewhere' })]))
  expect(outcome).toMatchObject({ ok: false, issues: [{ path: 'regimens[0].doses[0].route' }] })
})
