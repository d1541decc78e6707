import { agesOf } from './ages'
import * as body from './bodySize'
import { significant } from './covariateWords'
import type { CovariateChoices } from './drugModel'
import { allOf, computed, type Estimate, type Note, notComputed } from './estimate'
import type { Person } from './person'

export type LeanEquation = NonNullable<CovariateChoices['leanWeight']>['equation']
export type SurfaceEquation = NonNullable<CovariateChoices['bodySurfaceArea']>['equation'] | 'gehan-george'

/** Where James's parabola is within this share of its turning point, it is said. */
const NEAR_TURNING_POINT = 0.1
/** Age from which the weight equations for adults hold [a]. */
const ADULT_YEARS = 18

/** Body mass index [kg/m2] from the typed weight and height. */
export function bodyMassIndexOf(person: Person): Estimate {
  const { weight, height } = person.numbers
  const inputs = allOf({ weight, height })
  return inputs.kind === 'not computed' ? inputs : computed(body.bodyMassIndex(inputs.values))
}

/** Body surface area [m2] by a named equation from the typed weight and height. */
export function surfaceAreaOf(equation: SurfaceEquation, person: Person): Estimate {
  const { weight, height } = person.numbers
  const inputs = allOf({ weight, height })
  if (inputs.kind === 'not computed') return inputs
  switch (equation) {
    case 'mosteller':
      return computed(body.mosteller(inputs.values))
    case 'du-bois':
      return computed(body.duBois(inputs.values))
    case 'haycock':
      return computed(body.haycock(inputs.values))
    case 'gehan-george':
      return computed(body.gehanGeorge(inputs.values))
  }
}

/** Ideal weight [kg] by Devine. Below 152.4 cm it is extrapolated, and below 18 years it is an adult's: both are said. */
export function idealWeightOf(person: Person): Estimate {
  const inputs = allOf({ sex: person.sex, height: person.numbers.height })
  if (inputs.kind === 'not computed') return inputs
  const notes: Note[] = []
  // 60 inches typed in another unit may come out a rounding below.
  if (inputs.values.height < body.DEVINE_LOWEST_HEIGHT * (1 - 1e-9)) {
    notes.push({
      kind: 'edge',
      text: `ideal weight (Devine) is extrapolated below 152.4 cm, to ${significant(inputs.values.height, 4)} cm`
    })
  }
  notes.push(...adultEquation('ideal weight (Devine)', person))
  return computed(body.devine(inputs.values), notes)
}

/** Adjusted weight [kg]; the ideal weight that was given directly stands for the computed one. */
export function adjustedWeightOf(person: Person): Estimate {
  const ideal = directly(person, 'idealWeight') ?? idealWeightOf(person)
  const inputs = allOf({ weight: person.numbers.weight })
  if (inputs.kind === 'not computed') {
    if (ideal.kind === 'computed') return inputs
    return notComputed(`${inputs.reason}, and ideal weight ${ideal.reason}`, [...inputs.missing, ...ideal.missing])
  }
  if (ideal.kind === 'not computed') return notComputed(`ideal weight is not computed: ${ideal.reason}`, ideal.missing)
  const { weight } = inputs.values
  const notes = [...ideal.notes]
  if (weight < ideal.value)
    notes.push({ kind: 'derived', text: 'adjusted weight is the actual weight, which is below the ideal weight' })
  return computed(body.adjustedWeight({ actual: weight, ideal: ideal.value }), notes)
}

/** Lean weight [kg]. James is refused above its turning point, and said to be near it within 10 % below. */
export function leanWeightOf(equation: LeanEquation, person: Person): Estimate {
  const { weight, height } = person.numbers
  const inputs = allOf({ sex: person.sex, weight, height })
  if (inputs.kind === 'not computed') return inputs
  if (equation === 'janmahasatian')
    return computed(body.janmahasatian(inputs.values), adultEquation('lean weight (Janmahasatian)', person))

  const turning = body.jamesTurningPoint(inputs.values)
  const at = `its turning point of ${significant(turning, 3)} kg at ${significant(inputs.values.height, 4)} cm`
  if (inputs.values.weight > turning)
    return notComputed(`James's equation falls with weight above ${at}; use Janmahasatian or give the lean weight`)
  const notes = adultEquation('lean weight (James)', person)
  if (inputs.values.weight > turning * (1 - NEAR_TURNING_POINT))
    notes.push({ kind: 'edge', text: `lean weight (James) is near ${at}, above which it would fall` })
  return computed(body.james(inputs.values), notes)
}

/** A computed covariate that was given directly, as an estimate without notes. */
export function directly(person: Person, name: 'idealWeight' | 'adjustedWeight' | 'leanWeight'): Estimate | undefined {
  const value = person.numbers[name]
  return value === undefined ? undefined : computed(value)
}

function adultEquation(what: string, person: Person): Note[] {
  const years = agesOf(person).age?.value
  if (years === undefined || years >= ADULT_YEARS * (1 - 1e-9)) return []
  return [{ kind: 'edge', text: `${what} is an equation for adults, used under 18 years` }]
}
