import type { Hours, MilligramHoursPerLitre } from '../units/canonical'
import type { Course, CourseRequest } from './course'
import { areaBetween, crossings, valueAt } from './curve'
import { type DayExposure, daysOf, NO_WINDOW } from './days'
import { type IntervalExposure, intervalsOfCourse, startsOf } from './intervals'
import { OperatorStore } from './operatorStore'
import { type NumberOrReason, numbersOf, type Reasons, reasonsOf } from './reasons'
import { highestRunningAuc24, type RunningAuc24 } from './runningAuc'
import { steadyPeriodOf } from './steadyPeriod'
import { steadyStateExposure } from './steadyState'
import type { SteadyStateExposure } from './steadyStateExposure'
import type { Target } from './target'
import { type TargetResult, targetResult } from './targetMet'
import { levelOf, timeShares } from './timeShares'
import { isBefore } from './times'
import type { Signal } from './trajectory'

/** Numbers of a whole regimen that may be undefined; times are elapsed. */
interface RegimenValues {
  /** Shares of the time from the first dose to the end, for the first window target. */
  readonly timeInWindow: number | undefined
  readonly timeAbove: number | undefined
  readonly timeBelow: number | undefined
  /** First upward crossing of the first window's low limit. */
  readonly timeToReach: Hours | undefined
  /** Last downward crossing of it after the last dose. */
  readonly timeToLeave: Hours | undefined
  /** About the study's `now`. */
  readonly aucLast24: MilligramHoursPerLitre | undefined
  readonly aucNext24: MilligramHoursPerLitre | undefined
}

/** Every exposure of one regimen in one individual, in canonical units. Times are elapsed. */
export interface RegimenExposure extends RegimenValues {
  readonly intervals: readonly IntervalExposure[]
  readonly days: readonly DayExposure[]
  readonly steadyState: SteadyStateExposure
  readonly highestRunningAuc24: RunningAuc24 | undefined
  readonly targets: readonly TargetResult[]
  readonly why: Reasons
}

export interface ExposureRequest {
  readonly course: Course
  /** What the course was made from. */
  readonly request: CourseRequest
  readonly targets: readonly Target[]
  /** Doses before it are history. */
  readonly now?: Hours
}

const OBSERVED: Signal = { kind: 'observed' }

/**
 * Every exposure of one regimen: by interval, by day, at steady state, over the whole course, and each target met or not.
 * Values are exact: turning points and crossings by root search, areas from the operators. What is not defined is
 * undefined, with its reason under its name in `why` of its group.
 */
export function exposureOf({ course, request, targets, now }: ExposureRequest): RegimenExposure {
  const shared = { ...request, store: request.store ?? new OperatorStore() }
  const { trajectory } = course
  const window = targets.find(({ kind }) => kind === 'window')
  const steady = steadyPeriodOf(course, shared)
  const values: Readonly<Record<keyof RegimenValues, NumberOrReason>> = {
    ...windowValues(course, window),
    ...aboutNow(course, now)
  }
  const highest = highestRunningAuc24(trajectory, OBSERVED)
  return {
    intervals: intervalsOfCourse(course, OBSERVED),
    days: daysOf(trajectory, OBSERVED, window),
    steadyState: steadyStateExposure(steady, course, shared, window),
    ...numbersOf(values),
    highestRunningAuc24: highest,
    targets: targets.map((target, index) => targetResult({ course, steady, now }, target, index)),
    why: {
      ...reasonsOf(values),
      ...(highest === undefined && { highestRunningAuc24: 'the study is shorter than 24 h' })
    }
  }
}

type WindowValues = Readonly<
  Record<'timeInWindow' | 'timeAbove' | 'timeBelow' | 'timeToReach' | 'timeToLeave', NumberOrReason>
>

function windowValues(course: Course, window: Target | undefined): WindowValues {
  const starts = startsOf(course.administrations)
  const first = starts.at(0)?.at
  const last = starts.at(-1)?.at
  if (window === undefined) return noWindowValues(NO_WINDOW)
  if (first === undefined || last === undefined) return noWindowValues('no dose is given')
  const { trajectory, end } = course
  const { signal, low } = window
  const shares = timeShares(trajectory, window, first, end)
  if (low === undefined) {
    return { ...shares, timeToReach: 'the window has no low limit', timeToLeave: 'the window has no low limit' }
  }
  const level = levelOf(window, low)
  const upwards = crossings(trajectory, signal, level, 0, end).find(({ direction }) => direction === 'up')
  const downwards = crossings(trajectory, signal, level, last, end).findLast(({ direction }) => direction === 'down')
  const above = valueAt(trajectory, signal, 0, 'before') >= level
  return {
    ...shares,
    timeToReach:
      upwards?.time ??
      (above ? 'the level is above the low limit from the start' : 'the level never reaches the low limit'),
    timeToLeave: downwards?.time ?? 'the level does not fall below the low limit after the last dose'
  }
}

function noWindowValues(why: string): WindowValues {
  return { timeInWindow: why, timeAbove: why, timeBelow: why, timeToReach: why, timeToLeave: why }
}

function aboutNow(course: Course, now: Hours | undefined): Record<'aucLast24' | 'aucNext24', NumberOrReason> {
  if (now === undefined) return { aucLast24: 'the study has no now', aucNext24: 'the study has no now' }
  const { trajectory, end } = course
  const area = (from: Hours, to: Hours): number =>
    areaBetween(trajectory, OBSERVED, Math.max(0, from), Math.min(to, end))
  return {
    aucLast24:
      isBefore(now, 24) || isBefore(end, now) ? 'the 24 h before now do not lie in the study' : area(now - 24, now),
    aucNext24: isBefore(end, now + 24) ? 'the 24 h after now do not lie in the study' : area(now, now + 24)
  }
}
