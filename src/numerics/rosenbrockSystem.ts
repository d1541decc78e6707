import type { ReadonlyVector } from './vector'

/**
 * y' = f(y), as the Rosenbrock integrator takes it. f does not depend on time: what is constant over a stretch (a forcing,
 * an input) is part of it, and what changes at a time ends the stretch.
 */
export interface RosenbrockSystem {
  readonly size: number
  /**
   * How many of the leading states may depend on one another. Every later state depends on these, on itself and on later
   * states that stand before it, and nothing else depends on it: integrals that ride along, at the cost of a row product.
   */
  readonly coupled: number
  /** Write f(y) into `out`. */
  derivativeInto(state: ReadonlyVector, out: Float64Array): void
  /** Write df_i/dy_j at `state` into `out[i * size + j]`, every entry of it. */
  jacobianInto(state: ReadonlyVector, out: Float64Array): void
}

/** What error a step may make in each state: `relative` of its value, plus an absolute part. */
export interface RosenbrockTolerance {
  /** From 1e-14 to 1e-4; what is larger is brought down to that. */
  readonly relative: number
  /** Write the absolute part for a step of this length from this state into `out`; a state with 0 needs its digits throughout. */
  absoluteInto(state: ReadonlyVector, step: number, out: Float64Array): void
}

/** Work done so far. */
export interface RosenbrockCounts {
  /** Steps taken. */
  steps: number
  /** Steps tried and thrown away, for their error, a state below zero or a matrix that could not be factored. */
  rejections: number
  factorisations: number
  derivatives: number
  jacobians: number
}
