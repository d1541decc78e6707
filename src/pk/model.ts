import type {
  Litres,
  LitresPerMilligramPerHour,
  MilligramsPerHour,
  MilligramsPerLitre,
  PerHour
} from '../units/canonical'

/** A place where drug can be. Its position in `Model.compartments` is its index in every state vector. */
export interface Compartment {
  readonly name: string
  /** Volume of distribution, where a concentration is read [L]. */
  readonly volume?: Litres
  /** The table column that this compartment's amount is added to; stages of one transit share theirs. */
  readonly column: string
  /** What the amount is of. A binding target holds no drug and has no amount column. */
  readonly holds: 'drug' | 'target'
}

/** Where a transfer ends: a compartment's index, or out of the body. */
export type Destination = number | 'eliminated'

/** A movement between compartments, or out of the body. Exchange, clearance and transit are written out as first-order arrows. */
export type Transfer = FirstOrder | Saturable | Binding | Production

export interface FirstOrder {
  readonly kind: 'first-order'
  readonly from: number
  readonly to: Destination
  readonly rate: PerHour
}

/** maximumRate C^hill / (halfSaturation^hill + C^hill), C the concentration in `from`. */
export interface Saturable {
  readonly kind: 'saturable'
  readonly from: number
  readonly to: Destination
  readonly maximumRate: MilligramsPerHour
  readonly halfSaturation: MilligramsPerLitre
  readonly hill: number
}

/** Drug and target to complex and back; all three in drug-equivalent mass in the drug compartment's volume. */
export interface Binding {
  readonly kind: 'binding'
  readonly drug: number
  readonly target: number
  readonly complex: number
  readonly association: LitresPerMilligramPerHour
  readonly dissociation: PerHour
  readonly approximation: 'none' | 'quasi-steady-state'
}

/** Zero-order formation, of a binding target. */
export interface Production {
  readonly kind: 'production'
  readonly into: number
  readonly rate: MilligramsPerHour
}

/** dCe/dt = rate (C - Ce), C the concentration in `source`; moves no drug and is no state of the body. */
export interface EffectSite {
  readonly name: string
  readonly source: number
  readonly rate: PerHour
}

/** A concentration read over several compartments that share one volume: the sum of their amounts / volume. */
export interface Observation {
  readonly name: string
  readonly of: readonly number[]
  readonly volume: Litres
}

/** A compartment model with one individual's numbers in it. Immutable; rebuilt when a parameter changes. */
export interface Model {
  readonly compartments: readonly Compartment[]
  readonly transfers: readonly Transfer[]
  readonly effectSites: readonly EffectSite[]
  /** Index of the compartment whose concentration is reported; it has a volume. */
  readonly observed: number
  /** Further concentrations, each a table column. */
  readonly observations: readonly Observation[]
}

/** Volume of the observed compartment [L]. Throws `RangeError` for a model without one, which is a mistake of ours. */
export function observedVolume(model: Model): Litres {
  const volume = model.compartments[model.observed]?.volume
  if (volume === undefined) throw new RangeError(`observed compartment ${model.observed} has no volume`)
  return volume
}

/** Whether every movement is first order, so that the model is propagated exactly. */
export function isLinear(model: Model): boolean {
  return model.transfers.every((transfer) => transfer.kind === 'first-order')
}
