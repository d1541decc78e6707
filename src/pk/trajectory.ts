import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramHoursPerLitre, Milligrams, MilligramsPerLitre } from '../units/canonical'
import type { Segment } from './segment'
import type { BodyState } from './state'

/** A concentration that can be followed: the observed one, an effect site's or an observation's, by index in the model. */
export type Signal =
  | { readonly kind: 'observed' }
  | { readonly kind: 'effect-site'; readonly index: number }
  | { readonly kind: 'observation'; readonly index: number }

/** The course of one regimen through time: gapless pieces from 0 to `end`, one a segment. */
export interface Trajectory {
  readonly end: Hours
  /** At time 0, before anything given at that time. */
  readonly initial: BodyState
  readonly pieces: readonly Piece[]
}

/**
 * The course over one segment. Offsets are hours since the segment's start, from 0 (its boluses given) to its
 * duration (the next segment's boluses not yet given). Every value is computed from the start of the segment, so that
 * asking for one changes no other. Exact for linear models; the integrator's dense output elsewhere.
 */
export interface Piece {
  readonly segment: Segment
  /** Ascending offsets from 0 to the duration, dense enough that a signal turns at most once between two. */
  readonly probes: ReadonlyVector
  /** Write the amount in every compartment [mg] into `out`. */
  amountsInto(offset: Hours, out: Float64Array): void
  concentration(signal: Signal, offset: Hours): MilligramsPerLitre
  /** Time derivative of the concentration [mg/L/h]. */
  slope(signal: Signal, offset: Hours): number
  /** Area under the signal since the segment's start. */
  area(signal: Signal, offset: Hours): MilligramHoursPerLitre
  /** Area under the signal between two offsets, with the digits of that area and not of the whole. */
  areaBetween(signal: Signal, from: Hours, to: Hours): MilligramHoursPerLitre
  /** Amount that left the body since the segment's start. */
  eliminated(offset: Hours): Milligrams
}
