import type { WeightDescriptor } from '../pk/subject'
import { adjustedWeightOf, directly, idealWeightOf, type LeanEquation, leanWeightOf } from './bodyEstimates'
import { allOf, type Computed, computed, type Estimate, notComputed } from './estimate'
import type { Person } from './person'

/** Every word by which a weight is named, in the order in which they are shown. */
export const WEIGHT_DESCRIPTORS: readonly WeightDescriptor[] = [
  'actual',
  'ideal',
  'adjusted',
  'lean',
  'actualIfBelowIdeal',
  'adjustedAbove120PercentIdeal'
]

const NAMES: Readonly<Record<WeightDescriptor, string>> = {
  actual: 'actual weight',
  ideal: 'ideal weight',
  adjusted: 'adjusted weight',
  lean: 'lean weight',
  actualIfBelowIdeal: 'actual weight if below ideal, else ideal',
  adjustedAbove120PercentIdeal: 'actual below ideal, ideal up to 120 % of it, adjusted above'
}

export function weightInWords(word: WeightDescriptor): string {
  return NAMES[word]
}

/** Whether a word is one of the weight descriptors. */
export function isWeightDescriptor(word: string): word is WeightDescriptor {
  return Object.hasOwn(NAMES, word)
}

/** The weight [kg] that a word names. Ideal, adjusted and lean weights given directly stand for the computed ones. */
export function weightBy(word: WeightDescriptor, person: Person, lean: LeanEquation = 'janmahasatian'): Estimate {
  switch (word) {
    case 'actual':
      return actualWeight(person)
    case 'ideal':
      return directly(person, 'idealWeight') ?? idealWeightOf(person)
    case 'adjusted':
      return directly(person, 'adjustedWeight') ?? adjustedWeightOf(person)
    case 'lean':
      return directly(person, 'leanWeight') ?? leanWeightOf(lean, person)
    case 'actualIfBelowIdeal':
      return ofTwo(person, (actual, ideal) => (actual.value <= ideal.value ? actual : ideal))
    case 'adjustedAbove120PercentIdeal':
      return ofTwo(person, (actual, ideal) => {
        if (actual.value <= ideal.value) return actual
        // 120 % itself still takes the ideal weight, also where 1.2 x ideal rounds down.
        return actual.value <= 1.2 * ideal.value * (1 + 1e-12) ? ideal : weightBy('adjusted', person)
      })
  }
}

function actualWeight(person: Person): Estimate {
  const inputs = allOf({ weight: person.numbers.weight })
  return inputs.kind === 'not computed' ? inputs : computed(inputs.values.weight)
}

/** A choice between actual and ideal weight; both must be known for it. */
function ofTwo(person: Person, choose: (actual: Computed, ideal: Computed) => Estimate): Estimate {
  const actual = weightBy('actual', person)
  const ideal = weightBy('ideal', person)
  const failed = [actual, ideal].filter((estimate) => estimate.kind === 'not computed')
  if (actual.kind === 'computed' && ideal.kind === 'computed') {
    const chosen = choose(actual, ideal)
    // The choice itself rests on the ideal weight, so that what is said of it holds for every outcome.
    return chosen.kind === 'computed' && chosen === actual ? { ...chosen, notes: ideal.notes } : chosen
  }
  return notComputed(
    failed.map((estimate) => estimate.reason).join(' and '),
    failed.flatMap((estimate) => estimate.missing)
  )
}
