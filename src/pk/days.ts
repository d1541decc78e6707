import type { Hours, MilligramHoursPerLitre } from '../units/canonical'
import { areaBetween } from './curve'
import type { Reasons } from './reasons'
import type { Target } from './target'
import { timeShares } from './timeShares'
import { isBefore } from './times'
import type { Signal, Trajectory } from './trajectory'

/** Day n, from 24 (n - 1) to 24 n h. Everything is undefined for a day that is not complete by the end of the study. */
export interface DayExposure {
  /** From 1. */
  readonly day: number
  readonly from: Hours
  readonly to: Hours
  readonly complete: boolean
  readonly auc: MilligramHoursPerLitre | undefined
  /** Shares of the day, for the first window target. */
  readonly timeInWindow: number | undefined
  readonly timeAbove: number | undefined
  readonly timeBelow: number | undefined
  readonly why: Reasons
}

/** Why time shares are not defined. */
export const NO_WINDOW = 'no target is a window'

/** Every day that begins before the end of the trajectory; the last one may be incomplete. */
export function daysOf(trajectory: Trajectory, signal: Signal, window: Target | undefined): DayExposure[] {
  const days: DayExposure[] = []
  for (let day = 1; isBefore(24 * (day - 1), trajectory.end); day++) {
    days.push(dayExposure(trajectory, signal, window, day))
  }
  return days
}

function dayExposure(trajectory: Trajectory, signal: Signal, window: Target | undefined, day: number): DayExposure {
  const from = 24 * (day - 1)
  const to = 24 * day
  if (isBefore(trajectory.end, to)) {
    const why = 'the day is not complete by the end of the study'
    const none = { auc: undefined, timeInWindow: undefined, timeAbove: undefined, timeBelow: undefined }
    return {
      ...{ day, from, to, complete: false, ...none },
      why: { auc: why, timeInWindow: why, timeAbove: why, timeBelow: why }
    }
  }
  const auc = areaBetween(trajectory, signal, from, to)
  if (window === undefined) {
    const none = { timeInWindow: undefined, timeAbove: undefined, timeBelow: undefined }
    return {
      ...{ day, from, to, complete: true, auc, ...none },
      why: { timeInWindow: NO_WINDOW, timeAbove: NO_WINDOW, timeBelow: NO_WINDOW }
    }
  }
  return { day, from, to, complete: true, auc, ...timeShares(trajectory, window, from, to), why: {} }
}
