import type { ReadonlyVector } from '../numerics/vector'
import { isLinear, type Model } from './model'

/** No amount may be further from its steady state than this part of the margin: levels and areas follow the amounts closely. */
const WELL_WITHIN = 0.5
/** A margin below this would ask for digits that a course looked at for its time does not have. */
const LEAST_MARGIN = 1e-4
/** Compartments that hold less than this part of all there is of their kind count by that part. */
const LEAST = 1e-3

/**
 * Whether a body is so near a steady state that no later level is further from it than `margin`, relative. For models that
 * are not linear, where what is too much or too little does not go its own way: a rule, and no bound.
 */
export function isSettled(model: Model, now: ReadonlyVector, steady: ReadonlyVector, margin: number): boolean {
  if (isLinear(model)) throw new RangeError('what a linear model has too much is bounded exactly')
  const part = WELL_WITHIN * Math.max(LEAST_MARGIN, margin)
  const sum = (kind: 'drug' | 'target'): number =>
    model.compartments.reduce((all, { holds }, i) => (holds === kind ? all + steady[i] : all), 0)
  const all = { drug: sum('drug'), target: sum('target') }
  return model.compartments.every(
    ({ holds }, i) => Math.abs(now[i] - steady[i]) <= part * Math.max(steady[i], LEAST * all[holds])
  )
}
