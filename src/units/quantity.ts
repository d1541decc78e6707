import { apply, applyInverse, type Ratio } from './ratio'
import { type Kind, type Unit, unitOf, unitsOf } from './unitTable'

/** A number with its unit, as files and screens carry it. Arithmetic on it does not compile. */
export interface Quantity {
  readonly value: number
  readonly unit: string
}

/**
 * The exact ratio from a unit to the canonical one of its kind.
 * Throws `RangeError` for a unit outside the kind, or in moles where no molar mass [g/mol] is given: callers have asked
 * `unitOf` first.
 */
export function ratioOf(kind: Kind, code: string, molarMass?: number): Ratio {
  const unit = unitOf(kind, code)
  if (unit === undefined) throw new RangeError(`"${code}" is not a unit of the kind ${kind}`)
  return molarRatio(unit, molarMass)
}

/** The value in the canonical unit of its kind; for kinds of dose, of the amount without its kg or m2. */
export function toCanonical(kind: Kind, quantity: Quantity, molarMass?: number): number {
  return apply(ratioOf(kind, quantity.unit, molarMass), quantity.value)
}

/** A canonical number as a quantity in one of the kind's units. */
export function fromCanonical(kind: Kind, value: number, unit: string, molarMass?: number): Quantity {
  return { value: applyInverse(ratioOf(kind, unit, molarMass), value), unit }
}

/** The number that a quantity has in another unit of its kind. */
export function convert(kind: Kind, quantity: Quantity, to: string, molarMass?: number): number {
  if (quantity.unit === to) return quantity.value
  return applyInverse(ratioOf(kind, to, molarMass), toCanonical(kind, quantity, molarMass))
}

/** Code of the unit that the core computes in. */
export function canonicalUnit(kind: Kind): string {
  const first = unitsOf(kind).at(0)
  if (first === undefined) throw new RangeError(`the kind ${kind} has no unit`)
  return first.code
}

function molarRatio(unit: Unit, molarMass: number | undefined): Ratio {
  if (unit.moles === 0) return unit.ratio
  if (molarMass === undefined) throw new RangeError(`"${unit.code}" needs a molar mass`)
  const { times, per } = unit.ratio
  return unit.moles === 1 ? { times: times * molarMass, per } : { times, per: per * molarMass }
}
