import type { Hours, Milligrams, MilligramsPerHour, MilligramsPerLitre } from '../units/canonical'
import { type Model, observedVolume } from './model'
import { compartmentWithoutExit, neverLeaves, reachedBy } from './pathways'
import { stationaryState } from './stationary'

/** A body in balance with a level of its observed compartment. */
export interface LevelBalance {
  readonly level: MilligramsPerLitre
  /** Drug in all compartments in equilibrium with the level, bound drug included. */
  readonly amount: Milligrams
  /** Drug that leaves the body then; where it enters at this rate, the level stays. */
  readonly elimination: MilligramsPerHour
  /** ln 2 x amount / elimination: how long the level would take to halve if it went on falling as it does now. */
  readonly halfLife: Hours
}

/**
 * The balance of a body with a level [mg/L] of the observed compartment that is above 0: amounts in all other compartments
 * as they stand when nothing enters but what the model produces. In words where drug at that level never leaves. Throws
 * `NumericalFailure` 'no-convergence'.
 */
export function balanceAtLevel(model: Model, level: MilligramsPerLitre): LevelBalance | string {
  if (!(level > 0 && level < Number.POSITIVE_INFINITY))
    throw new RangeError(`a level must be above 0, got ${level} mg/L`)
  const entered = model.compartments.map((_, i) => i === model.observed)
  const stuck = compartmentWithoutExit(model.transfers, reachedBy(model, model.transfers, entered))
  if (stuck !== undefined) return neverLeaves(model, stuck)
  const nothing = model.compartments.map(() => 0)
  const held = { compartment: model.observed, amount: level * observedVolume(model) }
  const { amounts, elimination } = stationaryState(model, nothing, held)
  const amount = model.compartments.reduce((sum, { holds }, i) => (holds === 'drug' ? sum + amounts[i] : sum), 0)
  return { level, amount, elimination, halfLife: (Math.LN2 * amount) / elimination }
}
