import type { ReadonlyVector } from '../numerics/vector'
import type { Hours } from '../units/canonical'
import type { Model } from './model'

/** A stretch in which nothing is switched on or off: boluses land at its start, inputs stay constant. */
export interface Segment {
  readonly start: Hours
  readonly duration: Hours
  /** The individual's model over this stretch; it sits here so that changing organs and sessions are exact. */
  readonly model: Model
  /** Added to each compartment at `start` [mg]. */
  readonly boluses: ReadonlyVector
  /** Zero-order input to each compartment [mg/h]. */
  readonly inputs: ReadonlyVector
}
