import { type Quantity, ratioOf, toCanonical } from '../units/quantity'
import { ONE, type Ratio } from '../units/ratio'
import type { Spacing } from '../units/spacing'
import { type Kind, unitOf } from '../units/unitTable'
import type { Problems } from './problems'
import { unitProblem } from './unitProblem'

/**
 * Turns the quantities of one file into canonical numbers. What cannot be converted is a problem and comes back as NaN,
 * which no comparison takes for a value; nothing is built from a file with a problem.
 */
export class Converter {
  readonly problems: Problems
  /** Of the drug [g/mol], where the model states it. */
  readonly molarMass: number | undefined

  constructor(problems: Problems, molarMass: number | undefined) {
    this.problems = problems
    this.molarMass = molarMass
  }

  number(kind: Kind, quantity: Quantity, path: string): number {
    return this.#isConvertible(kind, quantity.unit, path) ? toCanonical(kind, quantity, this.molarMass) : Number.NaN
  }

  ratio(kind: Kind, unit: string, path: string): Ratio {
    return this.#isConvertible(kind, unit, path) ? ratioOf(kind, unit, this.molarMass) : ONE
  }

  /** A distance between repeats, kept in the unit typed. */
  spacing(quantity: Quantity, path: string): Spacing {
    return { value: quantity.value, ...this.ratio('time', quantity.unit, path) }
  }

  #isConvertible(kind: Kind, code: string, path: string): boolean {
    const unit = unitOf(kind, code)
    if (unit === undefined) {
      this.problems.add(path, unitProblem(code, kind) ?? `unknown unit "${code}"`)
      return false
    }
    if (unit.moles !== 0 && this.molarMass === undefined) {
      this.problems.add(
        path,
        `"${code}" counts moles and the model states no molar mass; give drug.molarMass in the model, or a mass`
      )
      return false
    }
    return true
  }
}

/** An optional value as a property that is there or not; nothing is ever stored as undefined. */
export function present<K extends string, V>(key: K, value: V | undefined): { readonly [P in K]?: V } {
  return value === undefined ? {} : ({ [key]: value } as { readonly [P in K]?: V })
}
