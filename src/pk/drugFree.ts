import { NumericalFailure } from '../numerics/numericalFailure'
import type { Model } from './model'
import { compartmentWithoutExit, neverLeaves, reachedBy } from './pathways'
import { type BodyState, emptyState } from './state'
import { stationaryState } from './stationary'

/**
 * A body that has had no drug: empty but for what the model produces by itself, which is at its steady state. Effect sites
 * are at the concentration of their source. Throws `NumericalFailure` 'no-way-out' where what is produced never leaves.
 */
export function drugFreeState(model: Model): BodyState {
  if (!model.transfers.some(({ kind }) => kind === 'production')) return emptyState(model)
  const nothing = model.compartments.map(() => 0)
  const reached = reachedBy(
    model,
    model.transfers,
    model.compartments.map(() => false)
  )
  const stuck = compartmentWithoutExit(model.transfers, reached)
  if (stuck !== undefined) throw new NumericalFailure('no-way-out', neverLeaves(model, stuck), stuck)
  const { amounts } = stationaryState(model, nothing)
  return {
    amounts,
    effectSites: model.effectSites.map(
      ({ source }) => amounts[source] / (model.compartments[source].volume ?? Number.NaN)
    )
  }
}
