import type { Hours } from '../units/canonical'
import type { Course } from './course'
import { type IntervalExposure, intervalsOfCourse } from './intervals'
import type { SteadyOutcome } from './steadyPeriod'
import { steadyIntervals } from './steadyState'
import type { When } from './target'
import { isBefore, sameTime } from './times'
import type { Signal, Trajectory } from './trajectory'

/** What a target is judged on: stretches of one trajectory, and the intervals of doses in them. */
export interface Judged {
  readonly trajectory: Trajectory
  readonly stretches: readonly Stretched[]
  /** Complete ones that start in a stretch. */
  readonly intervals: readonly IntervalExposure[]
  /** These and the last, incomplete one if it starts in a stretch. */
  readonly doses: readonly IntervalExposure[]
}

/** A stretch of time that a target is judged on. */
export interface Stretched {
  readonly from: Hours
  readonly to: Hours
  /** Cut into 24 h for areas; a stretch of its own length is scaled to 24 h instead. */
  readonly inDays: boolean
}

/** What targets are judged on: a regimen's course, its steady state and the study's `now`. */
export interface Judging {
  readonly course: Course
  readonly steady: SteadyOutcome
  readonly now: Hours | undefined
}

/** The stretches that `when` picks, with the signal's own intervals; or why there are none. */
export function judgedOn(judging: Judging, when: When, signal: Signal): Judged | string {
  const { course, steady } = judging
  if (when.kind === 'steady-state') {
    if (steady.kind === 'none') return steady.why
    const intervals = steadyIntervals(steady, signal)
    const stretches = [{ from: 0, to: steady.course.end, inDays: false }]
    return { trajectory: steady.course, stretches, intervals, doses: intervals }
  }
  const all = intervalsOfCourse(course, signal)
  const stretches = stretchesOf(judging, when, all)
  if (typeof stretches === 'string') return stretches
  const doses = all.filter(({ start }) => startsIn(stretches, start))
  return { trajectory: course.trajectory, stretches, intervals: doses.filter(({ incomplete }) => !incomplete), doses }
}

/** Whether a time lies in one of these ascending stretches, which do not overlap; the end of one is not in it. */
function startsIn(stretches: readonly Stretched[], time: Hours): boolean {
  let low = 0
  let high = stretches.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (isBefore(time, stretches[middle].from)) high = middle
    else low = middle + 1
  }
  return low > 0 && isBefore(time, stretches[low - 1].to)
}

function stretchesOf(
  { course, now }: Judging,
  when: Exclude<When, { readonly kind: 'steady-state' }>,
  intervals: readonly IntervalExposure[]
): readonly Stretched[] | string {
  const { end } = course
  const complete = intervals
    .filter(({ incomplete }) => !incomplete)
    .map(({ start, end: to }) => ({ from: start, to, inDays: false }))
  switch (when.kind) {
    case 'throughout': {
      const first = intervals.at(0)
      return first === undefined ? 'no dose is given' : [{ from: first.start, to: end, inDays: true }]
    }
    case 'from-now':
      if (now === undefined) return 'the study has no now'
      return isBefore(now, end) ? [{ from: now, to: end, inDays: true }] : 'now is not before the end of the study'
    case 'every-interval':
      return complete.length > 0 ? complete : 'no interval is complete'
    case 'last-interval':
      return complete.length > 0 ? complete.slice(-1) : 'no interval is complete'
    case 'every-day': {
      const days = Math.floor(end / 24)
      const full = sameTime(24 * (days + 1), end) ? days + 1 : days
      if (full === 0) return 'no day is complete by the end of the study'
      return Array.from({ length: full }, (_, n) => ({ from: 24 * n, to: Math.min(24 * (n + 1), end), inDays: false }))
    }
    case 'day': {
      const to = 24 * when.day
      if (isBefore(end, to)) return `day ${when.day} is not complete by the end of the study`
      return [{ from: to - 24, to: Math.min(to, end), inDays: false }]
    }
  }
}
