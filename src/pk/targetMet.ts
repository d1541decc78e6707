import type { Hours } from '../units/canonical'
import type { Target } from './target'

/** Whether a regimen meets one target, judged on every stretch that its `when` picks. */
export interface TargetResult {
  /** Position in the study's targets. */
  readonly index: number
  readonly target: Target
  /** Undefined where it cannot be evaluated. */
  readonly met: boolean | undefined
  /** The worst value over the stretches, in the target's unit: a share of time for window, time-above and time-below. */
  readonly value: number | undefined
  readonly unit: string
  /** Elapsed start of the stretch or interval that the worst value is from; in the period's own time for steady state. */
  readonly worstFrom: Hours | undefined
  /** Values compared. */
  readonly count: number
  /** Why it cannot be evaluated. */
  readonly why?: string
}
