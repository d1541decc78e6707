import type { Hours, MilligramHoursPerLitre, MilligramsPerLitre } from '../units/canonical'
import type { Administration } from './dose'
import type { Reasons } from './reasons'

/** From just after the start of a dose to the start of the next dose actually given. Doses that start together are one. */
export interface IntervalExposure {
  readonly start: Hours
  readonly end: Hours
  /** The last interval: it runs to the end of the study, and its peak and area are those up to there. */
  readonly incomplete: boolean
  /** Given at its start. */
  readonly administrations: readonly Administration[]
  readonly auc: MilligramHoursPerLitre
  readonly peak: MilligramsPerLitre
  /** Elapsed time of the peak. */
  readonly peakTime: Hours
  readonly minimum: MilligramsPerLitre
  readonly minimumTime: Hours
  readonly average: MilligramsPerLitre
  /** Just before the next dose. */
  readonly trough: MilligramsPerLitre | undefined
  readonly why: Reasons
}
