import { courseOf } from '../../src/pk/course'
import { exposureOf, type RegimenExposure } from '../../src/pk/exposure'
import type { DoseLine, SessionLine } from '../../src/pk/prescription'
import type { Stretch, Subject } from '../../src/pk/subject'
import type { Target } from '../../src/pk/target'

export interface ExposureOptions {
  readonly start?: 'empty' | 'steady-state'
  readonly targets?: readonly Target[]
  readonly sessions?: readonly SessionLine[]
  /** The person's later stretches. */
  readonly changes?: readonly Stretch[]
  readonly now?: number
}

/** The exposure of these lines in one person; issues fail the test. */
export function exposureFor(
  subject: Subject,
  lines: readonly DoseLine[],
  until: number,
  { start = 'empty', targets = [], sessions = [], changes = [], now }: ExposureOptions = {}
): RegimenExposure {
  const stretches = [{ from: 0, subject }, ...changes]
  const request = { prescription: { name: 'regimen', start, lines }, stretches, sessions, until, path: 'regimens[0]' }
  const outcome = courseOf(request)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return exposureOf({ course: outcome.course, request, targets, ...(now !== undefined && { now }) })
}

/** A target on the total observed concentration at steady state, unless said otherwise. */
export function target(given: Partial<Target> & Pick<Target, 'kind'>): Target {
  return { when: { kind: 'steady-state' }, signal: { kind: 'observed' }, factor: 1, unit: 'mg/L', share: 1, ...given }
}
