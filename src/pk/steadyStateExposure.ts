import type { Hours, MilligramHoursPerLitre, MilligramsPerLitre } from '../units/canonical'
import type { IntervalExposure } from './intervals'
import type { Reasons } from './reasons'
import type { Trajectory } from './trajectory'

/** Numbers of a steady state; a value that is not defined is undefined, with the reason under its name in `why`. */
export interface SteadyStateValues {
  /** The time after which all that repeats recurs together; undefined for an endless infusion alone. */
  readonly period: Hours | undefined
  /** Over one period. */
  readonly auc: MilligramHoursPerLitre | undefined
  /** auc x 24 h / period; 24 h x the level under an endless infusion. */
  readonly auc24: MilligramHoursPerLitre | undefined
  readonly peak: MilligramsPerLitre | undefined
  /** After the start of the period. */
  readonly peakTime: Hours | undefined
  /** The lowest trough of the period, where it has several. */
  readonly trough: MilligramsPerLitre | undefined
  readonly minimum: MilligramsPerLitre | undefined
  readonly average: MilligramsPerLitre | undefined
  /** (peak - minimum) / average: CDISC C85581, there in per cent. */
  readonly fluctuation: number | undefined
  /** (peak - minimum) / minimum: CDISC C161416. */
  readonly swing: number | undefined
  /** Area of one period over the area of the first period from an empty body. */
  readonly accumulationRatio: number | undefined
  /** The same of peaks, and of the levels at the end of the period. */
  readonly peakRatio: number | undefined
  readonly troughRatio: number | undefined
  readonly effectiveHalfLife: Hours | undefined
  readonly operationalHalfLife: Hours | undefined
  /** Elapsed time from which on the area of every period stays within 10 % of the steady state. */
  readonly reached90: Hours | undefined
  /** The same of the lowest trough of every period. */
  readonly reached90ByTrough: Hours | undefined
  /** After a change of dose: elapsed time from which on 90 % of the change of the area is made. */
  readonly reached90OfChange: Hours | undefined
  /** Under an endless infusion alone: elapsed time from which on the level stays within 10 % of the constant one. */
  readonly reached90ByLevel: Hours | undefined
  /** Shares of one period, for the first window target. */
  readonly timeInWindow: number | undefined
  readonly timeAbove: number | undefined
  readonly timeBelow: number | undefined
}

/**
 * What the doses and sessions that repeat at the end lead to, with the person as at the end: "if nothing changed any more".
 */
export interface SteadyStateExposure extends SteadyStateValues {
  /** Positions of the dose lines that repeat at the end. */
  readonly lines: readonly number[]
  /**
   * One period, from time 0 of its own, at the first dose of the repeating lines; 24 h of the constant level under an
   * endless infusion alone.
   */
  readonly course: Trajectory | undefined
  /** Elapsed time at which a period starts. */
  readonly origin: Hours | undefined
  /** The intervals of the period, in its own time. */
  readonly intervals: readonly IntervalExposure[]
  readonly why: Reasons
}
