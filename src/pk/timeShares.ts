import type { Hours } from '../units/canonical'
import { timeAbove, timeBelow } from './curve'
import type { Target } from './target'
import type { Trajectory } from './trajectory'

/** Shares of a stretch of time; they sum to 1. */
export interface TimeShares {
  readonly timeInWindow: number
  readonly timeAbove: number
  readonly timeBelow: number
}

/** A limit of a target as a level of the signal itself: total concentration [mg/L]. */
export function levelOf(target: Target, limit: number): number {
  return limit / target.factor
}

/** Shares of the time from `from` to `to` inside, above and below a window; a value at a limit is inside. */
export function timeShares(trajectory: Trajectory, window: Target, from: Hours, to: Hours): TimeShares {
  const { signal, low, high } = window
  const length = to - from
  const above = high === undefined ? 0 : timeAbove(trajectory, signal, levelOf(window, high), from, to) / length
  const below = low === undefined ? 0 : timeBelow(trajectory, signal, levelOf(window, low), from, to) / length
  return { timeInWindow: Math.max(0, 1 - (above + below)), timeAbove: above, timeBelow: below }
}
