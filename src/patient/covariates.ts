import { agesOf, isAgeName } from './ages'
import { adjustedWeightOf, bodyMassIndexOf, idealWeightOf, leanWeightOf, surfaceAreaOf } from './bodyEstimates'
import { nameInWords, valueInWords } from './covariateWords'
import type { DrugModel } from './drugModel'
import { type Estimate, type NotComputed, type Note, notComputed } from './estimate'
import type { ComputedCovariate, CovariateName, Person } from './person'
import { absoluteGfrFrom, creatinineClearanceOf, gfrEquationInWords, indexedGfrOf } from './renalEstimates'
import { isWeightDescriptor, weightInWords } from './weightDescriptor'

/** One covariate of one person, with how it was obtained. */
export interface Covariate {
  readonly kind: 'known'
  readonly name: CovariateName
  /** Canonical number, or a category. */
  readonly value: number | string
  readonly obtained: Obtained
  readonly notes: readonly Note[]
}

export type Obtained =
  | { readonly kind: 'typed' }
  /** A computed covariate that was given directly; `instead` is what the model's equation gives, where it gives anything. */
  | { readonly kind: 'given'; readonly instead?: number }
  | { readonly kind: 'computed'; readonly by: string }
  /** One age that follows from two others. */
  | { readonly kind: 'derived'; readonly from: string }

const COMPUTED: Readonly<Record<ComputedCovariate, true>> = {
  bodyMassIndex: true,
  bodySurfaceArea: true,
  idealWeight: true,
  adjustedWeight: true,
  leanWeight: true,
  creatinineClearance: true,
  estimatedGfr: true,
  absoluteGfr: true
}

export function isComputedCovariate(name: CovariateName): name is ComputedCovariate {
  return Object.hasOwn(COMPUTED, name)
}

/** A covariate as this model takes it: typed, given directly (which wins), or computed by the equation that it names. */
export function covariateOf(name: CovariateName, person: Person, drugModel: DrugModel): Covariate | NotComputed {
  if (name === 'sex') return known(name, person.sex)
  if (isComputedCovariate(name)) return givenOrComputed(name, person, drugModel)
  if (isAgeName(name)) {
    const age = agesOf(person)[name]
    if (age?.note === undefined) return known(name, age?.value)
    return {
      kind: 'known',
      name,
      value: age.value,
      obtained: { kind: 'derived', from: age.note.text },
      notes: [age.note]
    }
  }
  const declared = Object.hasOwn(drugModel.declared, name) ? drugModel.declared[name] : undefined
  if (declared?.kind === 'category')
    return known(name, Object.hasOwn(person.categories, name) ? person.categories[name] : undefined)
  return known(name, Object.hasOwn(person.numbers, name) ? person.numbers[name] : undefined)
}

/** What the equation of the model gives for a computed covariate, whatever was given directly in its place. */
export function computedCovariate(name: ComputedCovariate, person: Person, drugModel: DrugModel): Estimate {
  const choices = drugModel.covariates
  switch (name) {
    case 'bodyMassIndex':
      return bodyMassIndexOf(person)
    case 'bodySurfaceArea':
      return surfaceAreaOf(choices.bodySurfaceArea?.equation ?? 'mosteller', person)
    case 'idealWeight':
      return idealWeightOf(person)
    case 'adjustedWeight':
      return adjustedWeightOf(person)
    case 'leanWeight':
      return leanWeightOf(choices.leanWeight?.equation ?? 'janmahasatian', person)
    case 'creatinineClearance': {
      const choice = choices.creatinineClearance
      if (choice === undefined) return notComputed('the model names no equation for it')
      if (!isWeightDescriptor(choice.weight)) return notComputed(`the model names an unknown weight, ${choice.weight}`)
      return creatinineClearanceOf(person, {
        ...choice,
        weight: choice.weight,
        lean: choices.leanWeight?.equation ?? 'janmahasatian'
      })
    }
    case 'estimatedGfr': {
      const choice = choices.estimatedGfr
      if (choice === undefined) return notComputed('the model names no equation for it')
      return indexedGfrOf(choice.equation, person, choice)
    }
    case 'absoluteGfr':
      return absoluteGfrFrom(
        givenFirst('estimatedGfr', person, drugModel),
        givenFirst('bodySurfaceArea', person, drugModel)
      )
  }
}

/** How the model computes a covariate, in words: `Cockcroft-Gault with actual weight`. */
export function equationInWords(name: ComputedCovariate, drugModel: DrugModel): string {
  const choices = drugModel.covariates
  switch (name) {
    case 'bodyMassIndex':
      return 'weight / height squared'
    case 'bodySurfaceArea':
      return { mosteller: 'Mosteller', 'du-bois': 'Du Bois', haycock: 'Haycock' }[
        choices.bodySurfaceArea?.equation ?? 'mosteller'
      ]
    case 'idealWeight':
      return 'Devine'
    case 'adjustedWeight':
      return 'ideal + 0.4 (actual - ideal)'
    case 'leanWeight':
      return { janmahasatian: 'Janmahasatian', james: 'James' }[choices.leanWeight?.equation ?? 'janmahasatian']
    case 'creatinineClearance': {
      const weight = choices.creatinineClearance?.weight
      if (weight === undefined) return 'no equation named'
      return `Cockcroft-Gault with ${isWeightDescriptor(weight) ? weightInWords(weight) : weight}`
    }
    case 'estimatedGfr':
      return choices.estimatedGfr === undefined
        ? 'no equation named'
        : gfrEquationInWords(choices.estimatedGfr.equation)
    case 'absoluteGfr':
      return `${equationInWords('estimatedGfr', drugModel)}, x body surface area (${equationInWords('bodySurfaceArea', drugModel)}) / 1.73 m2`
  }
}

function givenOrComputed(name: ComputedCovariate, person: Person, drugModel: DrugModel): Covariate | NotComputed {
  const estimate = computedCovariate(name, person, drugModel)
  const given = person.numbers[name]
  if (given === undefined) {
    if (estimate.kind === 'not computed') return estimate
    const obtained: Obtained = { kind: 'computed', by: equationInWords(name, drugModel) }
    return { kind: 'known', name, value: estimate.value, obtained, notes: estimate.notes }
  }
  const notes: Note[] = []
  if (estimate.kind === 'computed') {
    const show = (value: number) => valueInWords(name, value, drugModel)
    notes.push({
      kind: 'instead',
      text: `${nameInWords(name)} ${show(given)} was given directly and is used; ${equationInWords(name, drugModel)} would give ${show(estimate.value)}`
    })
  }
  const ceiling = ceilingOf(name, drugModel)
  if (ceiling !== undefined && given > ceiling) {
    notes.push({
      kind: 'guard',
      text: `${nameInWords(name)} ${valueInWords(name, given, drugModel)} was given directly and is above ${valueInWords(name, ceiling, drugModel)}, at which this model holds a computed one; it is used as given`
    })
  }
  const obtained: Obtained =
    estimate.kind === 'computed' ? { kind: 'given', instead: estimate.value } : { kind: 'given' }
  return { kind: 'known', name, value: given, obtained, notes }
}

/** A computed covariate as an estimate, the given value first. */
export function givenFirst(name: ComputedCovariate, person: Person, drugModel: DrugModel): Estimate {
  const given = person.numbers[name]
  return given === undefined
    ? computedCovariate(name, person, drugModel)
    : { kind: 'computed', value: given, notes: [] }
}

function ceilingOf(name: ComputedCovariate, drugModel: DrugModel): number | undefined {
  if (name === 'creatinineClearance') return drugModel.covariates.creatinineClearance?.atMost
  if (name === 'estimatedGfr') return drugModel.covariates.estimatedGfr?.atMost
  return undefined
}

function known(name: CovariateName, value: number | string | undefined): Covariate | NotComputed {
  if (value === undefined) return notComputed(`needs ${nameInWords(name)}`, [name])
  return { kind: 'known', name, value, obtained: { kind: 'typed' }, notes: [] }
}
