import { areaToInfinity } from '../numerics/gth'
import { NumericalFailure } from '../numerics/numericalFailure'
import type { Hours, Litres, LitresPerHour, PerHour } from '../units/canonical'
import { type Disposition, restricted, unit } from './disposition'
import { observedVolume } from './model'

/** Moments of the observed concentration after a bolus into the observed compartment, and what follows from them. */
export interface DispositionMoments {
  /** Dose / area. */
  readonly clearance: LitresPerHour
  /** Area under the first moment / area. */
  readonly mrt: Hours
  /** Clearance x mrt. */
  readonly vss: Litres
  /** Clearance / slowest rate; undefined where there is no single one. */
  readonly vz: Litres | undefined
}

/**
 * Clearance, mean residence time and volumes from the moments of the disposition, without a subtraction: with A the
 * integral operator (-K)^-1, the area after 1 mg is (A e)/V and the first moment (A A e)/V at the observed compartment.
 * Undefined where drug never leaves.
 */
export function dispositionMoments(
  disposition: Disposition,
  slowest: PerHour | undefined
): DispositionMoments | undefined {
  const { model, members } = disposition
  const rates = restricted(disposition.rates, members)
  const from = members.indexOf(model.observed)
  try {
    const area = areaToInfinity(rates, unit(from, rates.size))
    const moment = areaToInfinity(rates, area)
    const clearance = observedVolume(model) / area[from]
    const mrt = moment[from] / area[from]
    return { clearance, mrt, vss: clearance * mrt, vz: slowest === undefined ? undefined : clearance / slowest }
  } catch (failure) {
    if (!(failure instanceof NumericalFailure) || failure.code !== 'no-way-out') throw failure
    return undefined
  }
}
