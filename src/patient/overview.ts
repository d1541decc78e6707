import type { WeightDescriptor } from '../pk/subject'
import {
  adjustedWeightOf,
  bodyMassIndexOf,
  idealWeightOf,
  leanWeightOf,
  type SurfaceEquation,
  surfaceAreaOf
} from './bodyEstimates'
import { computedCovariate, givenFirst } from './covariates'
import { nameInWords } from './covariateWords'
import type { DrugModel } from './drugModel'
import type { Estimate } from './estimate'
import { usesOf } from './needs'
import type { ComputedCovariate, CovariateName, Person } from './person'
import {
  absoluteGfrFrom,
  creatinineClearanceOf,
  GFR_EQUATIONS,
  gfrEquationInWords,
  indexedGfrOf,
  maturedGfrOf
} from './renalEstimates'
import { WEIGHT_DESCRIPTORS, weightBy, weightInWords } from './weightDescriptor'

/** One line of a comparison: a weight, a surface area or a renal estimate, and who in the model reads it. */
export interface OverviewRow {
  readonly label: string
  /** The covariate that this is a value of; it fixes the unit. */
  readonly covariate: CovariateName
  readonly estimate: Estimate
  /** Parameters, or covariates computed from it in turn, that the model takes from this very row; empty: not used. */
  readonly usedBy: readonly string[]
}

/** Every descriptor side by side, the rows that the model uses marked. Indexed and absolute rates are lists of their own. */
export interface Overview {
  readonly weights: readonly OverviewRow[]
  readonly bodyMassIndex: readonly OverviewRow[]
  readonly surfaceAreas: readonly OverviewRow[]
  /** Cockcroft-Gault with each weight: flows. */
  readonly creatinineClearances: readonly OverviewRow[]
  /** Per 1.73 m2. */
  readonly indexedRates: readonly OverviewRow[]
  /** Of this body: flows. */
  readonly absoluteRates: readonly OverviewRow[]
}

const SURFACE_EQUATIONS: Readonly<Record<SurfaceEquation, string>> = {
  mosteller: 'Mosteller',
  'du-bois': 'Du Bois',
  haycock: 'Haycock',
  'gehan-george': 'Gehan and George'
}

/**
 * All weights, surface areas and renal estimates of a person, also those that the model does not use and those that cannot
 * be computed, with the reason. The model's own row carries its floor and ceiling; the others are the plain equations.
 */
export function overview(person: Person, drugModel: DrugModel): Overview {
  const reading = readers(person, drugModel)
  return {
    weights: weightRows(person, drugModel, reading),
    bodyMassIndex: [
      ...givenRow('bodyMassIndex', person, reading),
      row('body mass index', 'bodyMassIndex', bodyMassIndexOf(person), reading('bodyMassIndex', 'computed'))
    ],
    surfaceAreas: [
      ...givenRow('bodySurfaceArea', person, reading),
      ...(Object.keys(SURFACE_EQUATIONS) as SurfaceEquation[]).map((equation) => {
        const chosen = equation === (drugModel.covariates.bodySurfaceArea?.equation ?? 'mosteller')
        const label = `body surface area (${SURFACE_EQUATIONS[equation]})`
        const users = chosen ? reading('bodySurfaceArea', 'computed') : []
        return row(label, 'bodySurfaceArea', surfaceAreaOf(equation, person), users)
      })
    ],
    creatinineClearances: clearanceRows(person, drugModel, reading),
    ...filtrationRows(person, drugModel, reading)
  }
}

/** Who reads a covariate, where the person's value has that standing; nobody reads the other. */
type Reading = (name: CovariateName, standing: 'given' | 'computed') => readonly string[]

function readers(person: Person, drugModel: DrugModel): Reading {
  const uses = usesOf(drugModel)
  const through = (name: CovariateName, by: ComputedCovariate): string[] =>
    feeds(name, by, drugModel) && person.numbers[by] === undefined && users(by).length > 0 ? [nameInWords(by)] : []
  const users = (name: CovariateName): string[] => [
    ...(uses.get(name) ?? []),
    ...(['creatinineClearance', 'absoluteGfr', 'adjustedWeight'] as const)
      .filter((by) => by !== name)
      .flatMap((by) => through(name, by))
  ]
  return (name, standing) => ((person.numbers[name] === undefined) === (standing === 'computed') ? users(name) : [])
}

/** Whether the model computes `by` from the row of `name` itself. */
function feeds(name: CovariateName, by: ComputedCovariate, drugModel: DrugModel): boolean {
  switch (by) {
    case 'absoluteGfr':
      return name === 'estimatedGfr' || name === 'bodySurfaceArea'
    case 'adjustedWeight':
      return name === 'idealWeight'
    default:
      return by === 'creatinineClearance' && name === covariateOfWord(drugModel.covariates.creatinineClearance?.weight)
  }
}

/** The covariate whose row a weight word names, where it names just one. */
function covariateOfWord(word: string | undefined): CovariateName | undefined {
  switch (word) {
    case 'ideal':
      return 'idealWeight'
    case 'adjusted':
      return 'adjustedWeight'
    case 'lean':
      return 'leanWeight'
    default:
      return undefined
  }
}

function weightRows(person: Person, drugModel: DrugModel, reading: Reading): readonly OverviewRow[] {
  const chosenLean = drugModel.covariates.leanWeight?.equation ?? 'janmahasatian'
  const byClearance = (word: WeightDescriptor): readonly string[] => {
    const used = drugModel.covariates.creatinineClearance?.weight === word
    return used && reading('creatinineClearance', 'computed').length > 0 ? [nameInWords('creatinineClearance')] : []
  }
  const ofChoice = (word: WeightDescriptor) =>
    row(weightInWords(word), 'weight', weightBy(word, person, chosenLean), byClearance(word))
  return [
    row('actual weight', 'weight', weightBy('actual', person), [
      ...(usesOf(drugModel).get('weight') ?? []),
      ...byClearance('actual')
    ]),
    ...givenRow('idealWeight', person, reading),
    row('ideal weight (Devine)', 'idealWeight', idealWeightOf(person), reading('idealWeight', 'computed')),
    ...givenRow('adjustedWeight', person, reading),
    row('adjusted weight', 'adjustedWeight', adjustedWeightOf(person), reading('adjustedWeight', 'computed')),
    ...givenRow('leanWeight', person, reading),
    ...(['janmahasatian', 'james'] as const).map((equation) => {
      const label = equation === 'james' ? 'lean weight (James)' : 'lean weight (Janmahasatian)'
      const users = equation === chosenLean ? reading('leanWeight', 'computed') : []
      return row(label, 'leanWeight', leanWeightOf(equation, person), users)
    }),
    ofChoice('actualIfBelowIdeal'),
    ofChoice('adjustedAbove120PercentIdeal')
  ]
}

function clearanceRows(person: Person, drugModel: DrugModel, reading: Reading): readonly OverviewRow[] {
  const chosen = drugModel.covariates.creatinineClearance?.weight
  const lean = drugModel.covariates.leanWeight?.equation ?? 'janmahasatian'
  return [
    ...givenRow('creatinineClearance', person, reading),
    ...WEIGHT_DESCRIPTORS.map((weight) => {
      const label = `Cockcroft-Gault, ${weightInWords(weight)}`
      if (weight !== chosen)
        return row(label, 'creatinineClearance', creatinineClearanceOf(person, { weight, lean }), [])
      const estimate = computedCovariate('creatinineClearance', person, drugModel)
      return row(label, 'creatinineClearance', estimate, reading('creatinineClearance', 'computed'))
    })
  ]
}

function filtrationRows(
  person: Person,
  drugModel: DrugModel,
  reading: Reading
): Pick<Overview, 'indexedRates' | 'absoluteRates'> {
  const surfaceArea = givenFirst('bodySurfaceArea', person, drugModel)
  const chosen = drugModel.covariates.estimatedGfr?.equation
  const rates = GFR_EQUATIONS.map((equation) => ({
    equation,
    name: gfrEquationInWords(equation),
    indexed: equation === chosen ? computedCovariate('estimatedGfr', person, drugModel) : indexedGfrOf(equation, person)
  }))
  // An indexed rate given directly is what the model de-indexes, so that none of the equations' rows is.
  const fromEquation = person.numbers.estimatedGfr === undefined
  const givenIndexed = givenRow('estimatedGfr', person, reading)
  return {
    indexedRates: [
      ...givenIndexed,
      ...rates.map(({ equation, name, indexed }) =>
        row(name, 'estimatedGfr', indexed, equation === chosen ? reading('estimatedGfr', 'computed') : [])
      )
    ],
    absoluteRates: [
      ...givenRow('absoluteGfr', person, reading),
      ...givenIndexed.map(({ estimate }) => {
        const absolute = absoluteGfrFrom(estimate, surfaceArea)
        return row(
          'estimated GFR given directly, x BSA / 1.73 m2',
          'absoluteGfr',
          absolute,
          reading('absoluteGfr', 'computed')
        )
      }),
      ...rates.map(({ equation, name, indexed }) => {
        const users = equation === chosen && fromEquation ? reading('absoluteGfr', 'computed') : []
        return row(`${name}, x BSA / 1.73 m2`, 'absoluteGfr', absoluteGfrFrom(indexed, surfaceArea), users)
      }),
      row('expected at this size and maturation (Rhodin)', 'absoluteGfr', maturedGfrOf(person), [])
    ]
  }
}

function givenRow(name: ComputedCovariate, person: Person, reading: Reading): readonly OverviewRow[] {
  const value = person.numbers[name]
  if (value === undefined) return []
  const label = `${nameInWords(name)}, given directly`
  return [row(label, name, { kind: 'computed', value, notes: [] }, reading(name, 'given'))]
}

function row(label: string, covariate: CovariateName, estimate: Estimate, usedBy: readonly string[]): OverviewRow {
  return { label, covariate, estimate, usedBy }
}
