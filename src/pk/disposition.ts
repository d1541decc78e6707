import { blocksOf } from '../numerics/block'
import { impulseResponse, type ResponseTerm } from '../numerics/impulseResponse'
import { type Rates, reachedFrom } from '../numerics/rates'
import { linearForm } from './linearRates'
import { type Model, observedVolume } from './model'

/**
 * A linear model as its disposition and what stands before it. The disposition are the compartments that exchange drug
 * with the observed one, itself included; drug that leaves them does not come back.
 */
export interface Disposition {
  readonly model: Model
  readonly rates: Rates
  /** Compartments of the disposition, ascending. */
  readonly members: readonly number[]
  /** Groups of compartments, each exchanging drug within itself, from which drug gets to the disposition. */
  readonly before: readonly (readonly number[])[]
  /** After a bolus of 1 mg into the observed compartment [/L], fastest first. */
  readonly terms: readonly ResponseTerm[]
}

/** The disposition of a linear model (`RangeError` for another), with the exponentials after a bolus. */
export function dispositionOf(model: Model): Disposition {
  const { rates } = linearForm(model)
  const { observed } = model
  const groups = blocksOf(rates).map((block) => block.members)
  const members = groups.find((group) => group.includes(observed)) ?? [observed]
  const before = groups.filter((group) => group !== members && reachedFrom(rates, unit(group[0], rates.size))[observed])
  return { model, rates, members, before, terms: responseTo(model, rates, observed) }
}

/** The exponentials of the observed concentration after a bolus of 1 mg into a compartment. */
export function responseTo(model: Model, rates: Rates, compartment: number): readonly ResponseTerm[] {
  const reading = unit(model.observed, rates.size).map((weight) => weight / observedVolume(model))
  return impulseResponse(rates, reading, compartment)
}

/** Some compartments alone, as rates in their order: whatever leaves them is out of the body. */
export function restricted(rates: Rates, members: readonly number[]): Rates {
  const inside = new Set(members)
  const between = members.flatMap((i) => members.map((j) => rates.between[i * rates.size + j]))
  const out = members.map((j) => {
    let sum = rates.out[j]
    for (let i = 0; i < rates.size; i++) if (!inside.has(i)) sum += rates.between[i * rates.size + j]
    return sum
  })
  return { size: members.length, between, out }
}

/** 1 at one place and 0 elsewhere. */
export function unit(place: number, size: number): number[] {
  return Array.from({ length: size }, (_, i) => (i === place ? 1 : 0))
}
