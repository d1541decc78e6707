import type { WeightDescriptor } from '../pk/subject'
import { agesOf } from './ages'
import { bodyMassIndexOf, type LeanEquation } from './bodyEstimates'
import { significant } from './covariateWords'
import type { GfrEquation, Guard } from './drugModel'
import { allOf, computed, type Estimate, type NotComputed, type Note, notComputed } from './estimate'
import type { Person } from './person'
import * as renal from './renalFunction'
import { maturedFiltration } from './renalMaturation'
import { weightBy, weightInWords } from './weightDescriptor'

/** Rounding that still counts as reaching an age limit. */
const REACHED = 1 - 1e-9
/** Creatinine so low that little muscle, not a fast kidney, is the likelier cause: 40 umol/L [mg/dL]. */
const LOW_CREATININE = 40 / 88.4

const GFR_NAMES: Readonly<Record<GfrEquation, string>> = {
  'ckd-epi-2021-creatinine': 'CKD-EPI 2021 creatinine',
  'ckd-epi-2021-creatinine-cystatin': 'CKD-EPI 2021 creatinine and cystatin C',
  'ckd-epi-2012-cystatin': 'CKD-EPI 2012 cystatin C',
  mdrd: 'MDRD',
  'bedside-schwartz': 'bedside Schwartz'
}

/** Every equation for an indexed filtration rate, in the order in which they are shown. */
export const GFR_EQUATIONS = Object.keys(GFR_NAMES) as readonly GfrEquation[]

export function gfrEquationInWords(equation: GfrEquation): string {
  return GFR_NAMES[equation]
}

/** Cockcroft-Gault [L/h] with the weight that a word names, the model's floor and ceiling applied and said. */
export function creatinineClearanceOf(
  person: Person,
  choice: { readonly weight: WeightDescriptor; readonly lean?: LeanEquation } & Guard
): Estimate {
  const refused = refusal(person)
  if (refused !== undefined) return refused
  const weight = weightBy(choice.weight, person, choice.lean)
  const age = agesOf(person).age?.value
  const { serumCreatinine } = person.numbers
  const inputs = allOf({ sex: person.sex, age, serumCreatinine })
  if (inputs.kind === 'not computed' || weight.kind === 'not computed') {
    const failed: NotComputed[] = []
    if (inputs.kind === 'not computed') failed.push(inputs)
    if (weight.kind === 'not computed') failed.push(named(weight, weightInWords(choice.weight)))
    return notComputed(failed.map((each) => each.reason).join('; '), [
      ...new Set(failed.flatMap((each) => each.missing))
    ])
  }
  const tooYoung = fromAdulthood('Cockcroft-Gault', inputs.values.age)
  if (tooYoung !== undefined) return tooYoung
  const floor = raised(inputs.values.serumCreatinine, choice.creatinineAtLeast)
  const flow = renal.cockcroftGault({
    sex: inputs.values.sex,
    ageYears: inputs.values.age,
    weight: weight.value,
    serumCreatinineMgPerDl: floor.creatinine
  })
  const notes = [...weight.notes, ...floor.notes, ...lowCreatinine(inputs.values.serumCreatinine)]
  if (inputs.values.age > 92)
    notes.push({ kind: 'edge', text: 'Cockcroft-Gault was derived in people of 18 to 92 years (from memory)' })
  notes.push(...weightMatters(person))
  return held(computed(renal.litresPerHour(flow), notes), choice.atMost, (value) =>
    inMlPerMin((value * 50) / 3, 'mL/min')
  )
}

/** A filtration rate indexed to 1.73 m2 [mL/min/1.73 m2], within the ages for which the equation was made. */
export function indexedGfrOf(equation: GfrEquation, person: Person, guard: Guard = {}): Estimate {
  const refused = refusal(person)
  if (refused !== undefined) return refused
  const { height, serumCreatinine, cystatinC } = person.numbers
  const age = agesOf(person).age?.value
  const name = GFR_NAMES[equation]
  const { sex } = person
  const limit = (years: number) => fromAdulthood(name, years)
  const capped = (filtration: renal.IndexedFiltration, notes: readonly Note[]) =>
    held(computed(filtration.mlPerMinPer173, notes), guard.atMost, (value) => inMlPerMin(value, 'mL/min/1.73 m2'))

  switch (equation) {
    case 'ckd-epi-2021-creatinine':
    case 'mdrd': {
      const inputs = allOf({ sex, age, serumCreatinine })
      if (inputs.kind === 'not computed') return inputs
      const floor = raised(inputs.values.serumCreatinine, guard.creatinineAtLeast)
      const who = { sex: inputs.values.sex, ageYears: inputs.values.age, serumCreatinineMgPerDl: floor.creatinine }
      const notes = [...floor.notes, ...lowCreatinine(inputs.values.serumCreatinine)]
      return (
        limit(who.ageYears) ?? capped(equation === 'mdrd' ? renal.mdrd(who) : renal.ckdEpi2021Creatinine(who), notes)
      )
    }
    case 'ckd-epi-2021-creatinine-cystatin': {
      const inputs = allOf({ sex, age, serumCreatinine, cystatinC })
      if (inputs.kind === 'not computed') return inputs
      const floor = raised(inputs.values.serumCreatinine, guard.creatinineAtLeast)
      const who = {
        sex: inputs.values.sex,
        ageYears: inputs.values.age,
        serumCreatinineMgPerDl: floor.creatinine,
        cystatinCMgPerL: inputs.values.cystatinC
      }
      return limit(who.ageYears) ?? capped(renal.ckdEpi2021CreatinineCystatin(who), floor.notes)
    }
    case 'ckd-epi-2012-cystatin': {
      const inputs = allOf({ sex, age, cystatinC })
      if (inputs.kind === 'not computed') return inputs
      const who = { sex: inputs.values.sex, ageYears: inputs.values.age, cystatinCMgPerL: inputs.values.cystatinC }
      return limit(who.ageYears) ?? capped(renal.ckdEpi2012Cystatin(who), [])
    }
    case 'bedside-schwartz': {
      const inputs = allOf({ age, height, serumCreatinine })
      if (inputs.kind === 'not computed') return inputs
      const years = inputs.values.age
      if (years < 1 * REACHED) return notComputed('under 1 year no equation holds: renal maturation only')
      if (years >= 18 * REACHED) return notComputed('bedside Schwartz holds from 1 to under 18 years')
      const floor = raised(inputs.values.serumCreatinine, guard.creatinineAtLeast)
      const notes = [...floor.notes]
      if (years < 2 || years > 16)
        notes.push({
          kind: 'edge',
          text: 'bedside Schwartz was derived in children of 1 to 16 years (from memory); this age is at its edge'
        })
      return capped(
        renal.bedsideSchwartz({ height: inputs.values.height, serumCreatinineMgPerDl: floor.creatinine }),
        notes
      )
    }
  }
}

/** Filtration expected of healthy kidneys at this size and postmenstrual age [L/h]; no creatinine enters it. */
export function maturedGfrOf(person: Person): Estimate {
  const refused = refusal(person)
  if (refused !== undefined) return refused
  const postmenstrualAge = agesOf(person).postmenstrualAge
  const inputs = allOf({ postmenstrualAge: postmenstrualAge?.value, weight: person.numbers.weight })
  if (inputs.kind === 'not computed') return inputs
  const flow = maturedFiltration({
    weight: inputs.values.weight,
    postmenstrualAgeWeeks: inputs.values.postmenstrualAge
  })
  return computed(renal.litresPerHour(flow), postmenstrualAge?.note === undefined ? [] : [postmenstrualAge.note])
}

/** Absolute filtration rate [L/h] from an indexed one and the surface of this body. */
export function absoluteGfrFrom(indexed: Estimate, surfaceArea: Estimate): Estimate {
  if (indexed.kind === 'not computed' || surfaceArea.kind === 'not computed') {
    const failed: NotComputed[] = []
    if (indexed.kind === 'not computed') failed.push(indexed)
    if (surfaceArea.kind === 'not computed') failed.push(named(surfaceArea, 'body surface area'))
    return notComputed(failed.map((each) => each.reason).join('; '), [
      ...new Set(failed.flatMap((each) => each.missing))
    ])
  }
  const flow = renal.absoluteFrom({ kind: 'indexed', mlPerMinPer173: indexed.value }, surfaceArea.value)
  // An indexed rate given as 0 is no kidney at all, and stays 0.
  return { kind: 'computed', value: renal.litresPerHour(flow), notes: [...indexed.notes, ...surfaceArea.notes] }
}

/** With renal replacement no creatinine or cystatin equation describes the kidneys. */
function refusal(person: Person): NotComputed | undefined {
  if (person.renalReplacement === 'none') return undefined
  return notComputed(
    `not computed under ${person.renalReplacement} renal replacement: the residual clearance is given directly`
  )
}

function fromAdulthood(equation: string, years: number): NotComputed | undefined {
  if (years >= 18 * REACHED) return undefined
  return notComputed(
    years < 1 * REACHED
      ? `${equation} holds from 18 years; under 1 year renal maturation only`
      : `${equation} holds from 18 years`
  )
}

function raised(creatinine: number, floor: number | undefined): { creatinine: number; notes: Note[] } {
  if (floor === undefined || creatinine >= floor) return { creatinine, notes: [] }
  return {
    creatinine: floor,
    notes: [
      {
        kind: 'guard',
        text: `serum creatinine ${significant(creatinine, 3)} mg/dL is raised to ${significant(floor, 3)} mg/dL, the floor of this model`
      }
    ]
  }
}

function held(estimate: Estimate, ceiling: number | undefined, show: (value: number) => string): Estimate {
  if (estimate.kind === 'not computed' || ceiling === undefined || estimate.value <= ceiling) return estimate
  const text = `the computed ${show(estimate.value)} is held at ${show(ceiling)}, the ceiling of this model`
  return { ...estimate, value: ceiling, notes: [...estimate.notes, { kind: 'guard', text }] }
}

function lowCreatinine(creatinine: number): Note[] {
  if (creatinine >= LOW_CREATININE * REACHED) return []
  return [
    {
      kind: 'edge',
      text: 'serum creatinine below 40 umol/L (0.452 mg/dL): with little muscle a creatinine equation overestimates'
    }
  ]
}

function weightMatters(person: Person): Note[] {
  const index = bodyMassIndexOf(person)
  if (index.kind === 'not computed' || (index.value >= 18 && index.value <= 30)) return []
  return [
    {
      kind: 'edge',
      text: `at a body mass index of ${significant(index.value, 3)} kg/m2 Cockcroft-Gault depends strongly on which weight is used`
    }
  ]
}

function named(estimate: NotComputed, what: string): NotComputed {
  return notComputed(`${what} ${estimate.reason}`, estimate.missing)
}

function inMlPerMin(value: number, unit: string): string {
  return `${significant(value, 3)} ${unit}`
}
