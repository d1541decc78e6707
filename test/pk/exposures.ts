import { type Course, type CourseRequest, courseOf } from '../../src/pk/course'
import { exposureOf, type RegimenExposure } from '../../src/pk/exposure'
import type { DoseLine, SessionLine } from '../../src/pk/prescription'
import type { Stretch, Subject } from '../../src/pk/subject'
import type { Target } from '../../src/pk/target'

export interface CourseOptions {
  readonly start?: 'empty' | 'steady-state'
  readonly sessions?: readonly SessionLine[]
  /** The person's later stretches. */
  readonly changes?: readonly Stretch[]
}

export interface ExposureOptions extends CourseOptions {
  readonly targets?: readonly Target[]
  readonly now?: number
}

/** What a course of these lines in one person is made from. */
export function requestFor(
  subject: Subject,
  lines: readonly DoseLine[],
  until: number,
  { start = 'empty', sessions = [], changes = [] }: CourseOptions = {}
): CourseRequest {
  const stretches = [{ from: 0, subject }, ...changes]
  return { prescription: { name: 'regimen', start, lines }, stretches, sessions, until, path: 'regimens[0]' }
}

/** The course of these lines in a person who may change or have sessions; issues fail the test. */
export function changingCourse(
  subject: Subject,
  lines: readonly DoseLine[],
  until: number,
  options: CourseOptions = {}
): Course {
  const outcome = courseOf(requestFor(subject, lines, until, options))
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return outcome.course
}

/** The exposure of these lines in one person; issues fail the test. */
export function exposureFor(
  subject: Subject,
  lines: readonly DoseLine[],
  until: number,
  options: ExposureOptions = {}
): RegimenExposure {
  const { targets = [], now } = options
  const course = changingCourse(subject, lines, until, options)
  const request = requestFor(subject, lines, until, options)
  return exposureOf({ course, request, targets, ...(now !== undefined && { now }) })
}

/** A target on the total observed concentration at steady state, unless said otherwise. */
export function target(given: Partial<Target> & Pick<Target, 'kind'>): Target {
  return { when: { kind: 'steady-state' }, signal: { kind: 'observed' }, factor: 1, unit: 'mg/L', share: 1, ...given }
}

/** The number, or a failure that prints the reason why there is none. */
export function number(value: number | undefined, why: string | undefined): number {
  if (value === undefined) throw new Error(`not defined: ${why}`)
  return value
}
