import { agesOf } from './ages'
import { nameInWords, significant, valueInWords } from './covariateWords'
import type { DrugModel } from './drugModel'
import type { Individual } from './individual'
import { rolesOf } from './parameterValues'
import type { CovariateName, Person } from './person'

/** A quantity as it was typed; its unit passes through. */
export interface Typed {
  readonly value: number
  readonly unit: string
}

/** Something that is asked back, and never blocks. */
export interface Question {
  readonly path: string
  readonly text: string
  /** The same number in a neighbouring unit, where that would be plausible. */
  readonly offer?: Typed
}

/** A unit that is mistaken for others of the same kind; sizes are in the canonical unit. */
interface Neighbour {
  readonly unit: string
  readonly size: number
}

/** 1 mg/dL of creatinine = 88.4 umol/L. */
const UMOL_PER_MG_DL = 88.4

const NEIGHBOURS: Readonly<Record<string, readonly Neighbour[]>> = {
  weight: [
    { unit: 'kg', size: 1 },
    { unit: 'g', size: 1e-3 }
  ],
  height: [
    { unit: 'cm', size: 1 },
    { unit: 'm', size: 100 }
  ],
  serumCreatinine: [
    { unit: 'mg/dL', size: 1 },
    { unit: 'umol/L', size: 1 / UMOL_PER_MG_DL }
  ],
  albumin: [
    { unit: 'g/L', size: 1 },
    { unit: 'g/dL', size: 10 }
  ],
  clearance: [
    { unit: 'L/h', size: 1 },
    { unit: 'L/min', size: 60 },
    { unit: 'mL/min', size: 0.06 },
    { unit: 'mL/h', size: 1e-3 }
  ],
  volume: [
    { unit: 'L', size: 1 },
    { unit: 'mL', size: 1e-3 }
  ],
  dose: [
    { unit: 'mg', size: 1 },
    { unit: 'g', size: 1000 },
    { unit: 'ug', size: 1e-3 },
    { unit: 'ng', size: 1e-6 }
  ]
}

interface Bounds {
  readonly low: number
  readonly high: number
  readonly said: string
}

const ANYONE: Bounds = { low: 0.4, high: 300, said: '0.4 to 300 kg, where anyone is' }
const ADULT: Bounds = { low: 35, high: 200, said: '35 to 200 kg, where adults are' }
const HEIGHT: Bounds = { low: 25, high: 220, said: '25 to 220 cm' }
const CREATININE: Bounds = {
  low: 20 / UMOL_PER_MG_DL,
  high: 1500 / UMOL_PER_MG_DL,
  said: '20 to 1,500 umol/L (0.226 to 17 mg/dL)'
}
const ALBUMIN: Bounds = { low: 10, high: 55, said: '10 to 55 g/L' }
/** Blood flow through the liver of a large adult is of this size [L/h/kg]. */
const CLEARANCE_PER_KG = 90 / 70
const VOLUME_PER_KG = { low: 0.04, high: 20 }

/** Questions about one person. `typed` holds each quantity as it stands in the file; a missing one is shown in canonical units. */
export function questionPerson(
  person: Person,
  typed: Readonly<Partial<Record<CovariateName, Typed>>>,
  path: string
): readonly Question[] {
  const years = agesOf(person).age?.value
  const adult = years !== undefined && years >= 18
  const { weight } = person.numbers
  const anyone = weight !== undefined && (weight < ANYONE.low || weight > ANYONE.high)
  const checks: readonly (readonly [CovariateName, Bounds])[] = [
    ['weight', adult && !anyone ? ADULT : ANYONE],
    ['height', HEIGHT],
    ['serumCreatinine', CREATININE],
    ['albumin', ALBUMIN]
  ]
  return checks.flatMap(([name, bounds]) => {
    const value = person.numbers[name]
    if (value === undefined || inside(value, bounds)) return []
    const shown = typed[name] ?? { value, unit: NEIGHBOURS[name]?.[0]?.unit ?? '' }
    // What is offered must be right for the person, an adult's weight for an adult.
    const plausible = name === 'weight' && adult ? ADULT : bounds
    return [
      question(
        `${path}.${name}`,
        `${nameInWords(name)} ${inWords(shown)} is outside ${bounds.said}`,
        shown,
        name,
        (x) => inside(x, plausible)
      )
    ]
  })
}

/** Questions about the clearances and volumes that a model gives this person, set against body weight. */
export function questionParameters(drugModel: DrugModel, person: Person, individual: Individual): readonly Question[] {
  const roles = rolesOf(drugModel)
  const { weight } = person.numbers
  // Without a weight the bounds are those of 70 kg, and the question says so.
  const kilograms = weight ?? 70
  const body = weight === undefined ? '70 kg, as no weight is known' : valueInWords('weight', weight, drugModel)
  // Only clearances out of the body: flow between compartments may well be faster than blood through an organ.
  const outOfBody = new Set(
    drugModel.transfers.flatMap((transfer) => (transfer.kind === 'clearance' ? [transfer.clearance] : []))
  )
  return [...individual.parameters.values()].flatMap((parameter) => {
    const used = roles.get(parameter.name)
    const shown = { value: parameter.stated, unit: parameter.unit }
    const path = `model.parameters.${parameter.name}`
    if (outOfBody.has(parameter.name)) {
      const high = CLEARANCE_PER_KG * kilograms
      if (!inside(parameter.value, { low: 0, high }))
        return [
          question(
            path,
            `${parameter.label} ${inWords(shown)} is over ${significant(high, 3)} L/h for ${body} (90 L/h/70 kg)`,
            shown,
            'clearance',
            (x) => inside(x, { low: 0, high })
          )
        ]
    }
    if (used?.has('volume')) {
      const bounds = { low: VOLUME_PER_KG.low * kilograms, high: VOLUME_PER_KG.high * kilograms }
      if (!inside(parameter.value, bounds))
        return [
          question(
            path,
            `${parameter.label} ${inWords(shown)} is outside ${significant(bounds.low, 3)} to ${significant(bounds.high, 3)} L for ${body} (0.04 to 20 L/kg)`,
            shown,
            'volume',
            (x) => inside(x, bounds)
          )
        ]
    }
    return []
  })
}

/** A question about one dose [mg of the moiety] over twice the largest that was studied, where the source states that. */
export function questionDose(
  drugModel: DrugModel,
  dose: { readonly amount: number; readonly typed: Typed; readonly path: string }
): Question | undefined {
  const largest = drugModel.studied?.largestDose
  if (largest === undefined) return undefined
  const bounds = { low: 0, high: 2 * largest }
  if (inside(dose.amount, bounds)) return undefined
  const text = `the dose of ${inWords(dose.typed)} is over twice the largest single dose studied, ${significant(largest, 3)} mg`
  return question(dose.path, text, dose.typed, 'dose', (x) => x > 0 && inside(x, bounds))
}

/** The question, with the first neighbouring unit in which the same number would be plausible. */
function question(
  path: string,
  text: string,
  typed: Typed,
  kind: string,
  plausible: (canonical: number) => boolean
): Question {
  const neighbour = (NEIGHBOURS[kind] ?? []).find(
    ({ unit, size }) => unit !== typed.unit && plausible(typed.value * size)
  )
  if (neighbour === undefined) return { path, text: `${text}: is that right?` }
  const offer = { value: typed.value, unit: neighbour.unit }
  return { path, text: `${text}: did you mean ${inWords(offer)}?`, offer }
}

function inside(value: number, bounds: { readonly low: number; readonly high: number }): boolean {
  // A bound typed in another unit may come out a rounding off.
  return value >= bounds.low * (1 - 1e-9) && value <= bounds.high * (1 + 1e-9)
}

function inWords(quantity: Typed): string {
  return `${significant(quantity.value, 6)} ${quantity.unit}`
}
