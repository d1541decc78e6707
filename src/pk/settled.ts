import { isLinear, type Model } from './model'
import type { BodyState } from './state'

/** A body counts as settled when no compartment is further from its steady state than this part of it. */
const SETTLED = 0.01
/** Compartments that hold less than this part of all there is of their kind count by that part. */
const LEAST = 1e-3

/**
 * Whether a body is so near a steady state that it will not leave its neighbourhood again. For models that are not linear,
 * where what is too much or too little does not go its own way.
 */
export function isSettled(model: Model, now: BodyState, steady: BodyState): boolean {
  if (isLinear(model)) throw new RangeError('what a linear model has too much is bounded exactly')
  const sum = (kind: 'drug' | 'target'): number =>
    model.compartments.reduce((all, { holds }, i) => (holds === kind ? all + steady.amounts[i] : all), 0)
  const all = { drug: sum('drug'), target: sum('target') }
  return model.compartments.every(
    ({ holds }, i) =>
      Math.abs(now.amounts[i] - steady.amounts[i]) <= SETTLED * Math.max(steady.amounts[i], LEAST * all[holds])
  )
}
