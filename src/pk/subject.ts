import type { Hours, Kilograms, SquareMetres } from '../units/canonical'
import type { Model } from './model'

/** The words by which a per-kilogram dose names its weight. */
export type WeightDescriptor =
  | 'actual'
  | 'ideal'
  | 'adjusted'
  | 'lean'
  | 'actualIfBelowIdeal'
  | 'adjustedAbove120PercentIdeal'

/** One way in: where the drug lands, in which parts, how much of it and how late. */
export interface Route {
  readonly name: string
  /** Whether a dose on it is an infusion unless it says otherwise. */
  readonly input: 'infusion' | 'bolus'
  readonly bioavailability: number
  readonly lag: Hours
  /** Fractions sum to 1; a part with `over` is released at a constant rate after its lag. */
  readonly parts: readonly RoutePart[]
}

export interface RoutePart {
  readonly into: number
  readonly fraction: number
  /** Beside the route's own lag. */
  readonly lag: Hours
  readonly over?: Hours
}

/** What a regimen needs to know of a person over one stretch of time. */
export interface Subject {
  readonly model: Model
  readonly routes: readonly Route[]
  /** Each weight by which a dose may be reckoned and that could be computed. */
  readonly weights: Readonly<Partial<Record<WeightDescriptor, Kilograms>>>
  /** The weight for per-kilogram doses that name none, where one was given. */
  readonly dosingWeight?: Kilograms
  readonly surfaceArea?: SquareMetres
}

/** A subject from `from` on, until the next stretch. The first starts at 0. */
export interface Stretch {
  readonly from: Hours
  readonly subject: Subject
}
