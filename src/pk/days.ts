import type { Hours, MilligramHoursPerLitre } from '../units/canonical'
import type { Reasons } from './reasons'

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
