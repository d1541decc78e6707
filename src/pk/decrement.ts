import type { Hours } from '../units/canonical'
import type { Reasons } from './reasons'
import type { Signal } from './trajectory'

/** Times for a concentration to fall after a constant-rate infusion into the observed compartment is stopped. */
export interface DecrementTimes {
  readonly signal: Signal
  /** `plasma` or whatever the observed compartment is, or the effect site's name. */
  readonly site: string
  /** Length of the infusion. */
  readonly infusion: Hours
  /** One of the regimen's own, not of the standard lengths. */
  readonly own: boolean
  /** To fall by 20, 50 and 80 %. The second is the context-sensitive half-time. */
  readonly by20: Hours | undefined
  readonly by50: Hours | undefined
  readonly by80: Hours | undefined
  readonly why: Reasons
}
