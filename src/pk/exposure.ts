import type { Hours, MilligramHoursPerLitre } from '../units/canonical'
import type { DayExposure } from './days'
import type { IntervalExposure } from './intervals'
import type { Reasons } from './reasons'
import type { SteadyStateExposure } from './steadyStateExposure'
import type { TargetResult } from './targetMet'

/** Every exposure of one regimen in one individual, in canonical units. Times are elapsed. */
export interface RegimenExposure {
  readonly intervals: readonly IntervalExposure[]
  readonly days: readonly DayExposure[]
  readonly steadyState: SteadyStateExposure
  /** Shares of the time from the first dose to the end, for the first window target. */
  readonly timeInWindow: number | undefined
  readonly timeAbove: number | undefined
  readonly timeBelow: number | undefined
  /** First upward crossing of the first window's low limit. */
  readonly timeToReach: Hours | undefined
  /** Last downward crossing of it after the last dose. */
  readonly timeToLeave: Hours | undefined
  readonly highestRunningAuc24: RunningAuc24 | undefined
  /** About the study's `now`. */
  readonly aucLast24: MilligramHoursPerLitre | undefined
  readonly aucNext24: MilligramHoursPerLitre | undefined
  readonly targets: readonly TargetResult[]
  readonly why: Reasons
}

/** The largest area over any 24 h of the study. */
export interface RunningAuc24 {
  readonly auc: MilligramHoursPerLitre
  readonly from: Hours
}
