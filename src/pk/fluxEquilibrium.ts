import type { ReadonlyVector } from '../numerics/vector'
import type { Milligrams } from '../units/canonical'
import { volumeOf } from './linearRates'
import type { Binding, Model } from './model'

/**
 * Binding in its quasi-steady-state approximation [Gibiansky et al. 2008, J. Pharmacokinet. Pharmacodyn. 35:573, from
 * memory]: free drug x free target / volume = Kss x complex at all times, Kss = (dissociation + first-order rates out of the
 * complex) / association. What is integrated at the places of drug and target are their totals, free plus bound; the place
 * of the complex stays empty.
 */
export interface Equilibrium {
  readonly drug: number
  readonly target: number
  readonly complex: number
  /** Kss x volume [mg]. */
  readonly constant: Milligrams
}

/** Every binding that is approximated. Throws `RangeError` where two share a compartment: each would need the other's answer. */
export function equilibriaOf(model: Model): Equilibrium[] {
  const taken = new Set<number>()
  return model.transfers.flatMap((transfer) => {
    if (transfer.kind !== 'binding' || transfer.approximation !== 'quasi-steady-state') return []
    for (const place of [transfer.drug, transfer.target, transfer.complex]) {
      if (taken.has(place)) {
        throw new RangeError(`compartment "${model.compartments[place].name}" takes part in two approximated bindings`)
      }
      taken.add(place)
    }
    return [equilibriumOf(model, transfer)]
  })
}

function equilibriumOf(model: Model, binding: Binding): Equilibrium {
  const { drug, target, complex, association, dissociation } = binding
  let leaving = dissociation
  for (const transfer of model.transfers) {
    if (transfer.kind === 'first-order' && transfer.from === complex) leaving += transfer.rate
  }
  return { drug, target, complex, constant: (leaving / association) * volumeOf(model, drug) }
}

/**
 * Amount of complex from total drug and total target: the smaller root of (drug - x)(target - x) = constant x, as a
 * quotient without a difference. A total a little below zero counts along the tangent at zero.
 */
export function bound(drug: Milligrams, target: Milligrams, constant: Milligrams): Milligrams {
  if (drug <= 0) return (drug * Math.max(target, 0)) / (constant + Math.max(target, 0))
  if (target <= 0) return (target * drug) / (constant + drug)
  const sum = drug + target + constant
  // sum^2 - 4 drug target, as a sum of what cannot be negative.
  const root = Math.sqrt((drug - target) * (drug - target) + constant * (constant + 2 * (drug + target)))
  return (2 * drug * target) / (sum + root)
}

/** Free amount of the one total that has `own`, `other` being the partner's: without the cancellation of own - bound. */
export function free(own: Milligrams, other: Milligrams, constant: Milligrams): Milligrams {
  if (own <= 0 || other <= 0) return own - bound(own, other, constant)
  const excess = own - other - constant
  const root = Math.sqrt((own - other) * (own - other) + constant * (constant + 2 * (own + other)))
  return excess >= 0 ? 0.5 * (excess + root) : (2 * constant * own) / (root - excess)
}

/**
 * Turn a Jacobian by the amounts into one by the totals, at free amounts x, in place: columns by the chain rule, the rows of
 * drug and target each with that of the complex added, which itself becomes nothing.
 */
export function chainTotals(equilibrium: Equilibrium, x: ReadonlyVector, size: number, jacobian: Float64Array): void {
  const { drug, target, complex, constant } = equilibrium
  const sum = constant + x[drug] + x[target]
  const byDrug = x[target] / sum
  const byTarget = x[drug] / sum
  for (let row = 0; row < size * size; row += size) {
    const ofDrug = jacobian[row + drug]
    const ofTarget = jacobian[row + target]
    const ofComplex = jacobian[row + complex]
    jacobian[row + drug] = ofDrug * (1 - byDrug) + (ofComplex - ofTarget) * byDrug
    jacobian[row + target] = ofTarget * (1 - byTarget) + (ofComplex - ofDrug) * byTarget
    jacobian[row + complex] = 0
  }
  for (let j = 0; j < size; j++) {
    jacobian[drug * size + j] += jacobian[complex * size + j]
    jacobian[target * size + j] += jacobian[complex * size + j]
    jacobian[complex * size + j] = 0
  }
}
