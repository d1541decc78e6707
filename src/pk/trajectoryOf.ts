import { integrate } from './integrate'
import { isLinear } from './model'
import type { OperatorStore } from './operatorStore'
import { propagate } from './propagate'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { Trajectory } from './trajectory'

/** How a course is computed: by the exponential of a linear model, or by the integrator within its tolerance. */
export type Method = 'exact' | 'integrated'

/** Exact where every model is linear; a model with one movement that is not is integrated whole. */
export function methodFor(segments: readonly Segment[]): Method {
  return segments.every((segment, i) => segment.model === segments[i - 1]?.model || isLinear(segment.model))
    ? 'exact'
    : 'integrated'
}

/**
 * The course of any model over gapless segments, from a state before the first one's boluses, by the method for them.
 * `store` holds operators of linear models; it changes no number. Throws `RosenbrockFailure` where a segment cannot be
 * integrated.
 */
export function trajectoryOf(segments: readonly Segment[], initial: BodyState, store: OperatorStore): Trajectory {
  return methodFor(segments) === 'exact' ? propagate(segments, initial, store) : integrate(segments, initial)
}
