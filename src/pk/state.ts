import type { ReadonlyVector } from '../numerics/vector'
import type { Model } from './model'

/** What is in a body at one time. */
export interface BodyState {
  /** In every compartment, in the order of the model [mg]. */
  readonly amounts: ReadonlyVector
  /** Concentration at every effect site, in the order of the model [mg/L]. */
  readonly effectSites: ReadonlyVector
}

/** A body without drug. */
export function emptyState(model: Model): BodyState {
  return { amounts: zeros(model.compartments.length), effectSites: zeros(model.effectSites.length) }
}

/** Both states together; what linear models allow. */
export function sumOfStates(a: BodyState, b: BodyState): BodyState {
  return {
    amounts: Array.from(a.amounts, (amount, i) => amount + b.amounts[i]),
    effectSites: Array.from(a.effectSites, (level, i) => level + b.effectSites[i])
  }
}

function zeros(length: number): ReadonlyVector {
  return new Array<number>(length).fill(0)
}
