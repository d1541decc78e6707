import type { CovariateUnit, DeclaredCovariate } from '../patient/drugModel'
import type { ComputedCovariate, TypedCovariate } from '../patient/person'
import { type Quantity, ratioOf } from '../units/quantity'
import { applyInverse, quotient } from '../units/ratio'
import { KINDS, type Kind, unitOf, unitsOf } from '../units/unitTable'
import type { Problems } from './problems'
import { unitProblem } from './unitProblem'

/** The kind that each of the program's own numeric covariates is of. */
export const COVARIATE_KINDS: Readonly<Record<Exclude<TypedCovariate, 'sex'> | ComputedCovariate, Kind>> = {
  age: 'age',
  postnatalAge: 'age',
  gestationalAge: 'ageInWeeks',
  postmenstrualAge: 'ageInWeeks',
  weight: 'bodyWeight',
  height: 'height',
  serumCreatinine: 'creatinine',
  cystatinC: 'cystatin',
  albumin: 'albumin',
  bodyMassIndex: 'bodyMassIndex',
  bodySurfaceArea: 'surfaceArea',
  idealWeight: 'bodyWeight',
  adjustedWeight: 'bodyWeight',
  leanWeight: 'bodyWeight',
  creatinineClearance: 'filtration',
  estimatedGfr: 'indexedFiltration',
  absoluteGfr: 'filtration'
}

/** Computed covariates, each of which may be given directly. */
export const COMPUTED = [
  'bodyMassIndex',
  'bodySurfaceArea',
  'idealWeight',
  'adjustedWeight',
  'leanWeight',
  'creatinineClearance',
  'estimatedGfr',
  'absoluteGfr'
] as const satisfies readonly ComputedCovariate[]

/** What a covariate's values are. `own`: in the unit that the model declares, which is also the one that the core uses. */
export type Covariate =
  | { readonly sort: 'number'; readonly kind: Kind }
  | { readonly sort: 'own'; readonly unit: string }
  | { readonly sort: 'category'; readonly categories: readonly string[] }

/** Kinds whose conversions hold for any covariate; creatinine's between mass and moles holds for creatinine alone. */
const FREE_KINDS = KINDS.filter(
  (kind) => !['creatinine', 'dose', 'doseRate', 'ageInWeeks', 'hours', 'number', 'association'].includes(kind)
)

/** Every covariate that a model may name: the program's own and those that it declares. */
export function knownCovariates(declared: Readonly<Record<string, DeclaredCovariate>>): Map<string, Covariate> {
  const known = new Map<string, Covariate>([['sex', { sort: 'category', categories: ['female', 'male'] }]])
  for (const [name, kind] of Object.entries(COVARIATE_KINDS)) known.set(name, { sort: 'number', kind })
  for (const [name, own] of Object.entries(declared)) {
    known.set(
      name,
      own.kind === 'number' ? { sort: 'own', unit: own.unit } : { sort: 'category', categories: own.categories }
    )
  }
  return known
}

/**
 * How a canonical value of the covariate is written in a unit: value = canonical x times / per.
 * A unit that does not fit is a problem at `path`, and undefined.
 */
export function covariateUnit(
  covariate: Exclude<Covariate, { sort: 'category' }>,
  unit: string,
  path: string,
  problems: Problems
): CovariateUnit | undefined {
  if (covariate.sort === 'number') {
    const problem = unitProblem(unit, covariate.kind)
    if (problem !== undefined) {
      problems.add(path, problem)
      return undefined
    }
    const { times, per } = ratioOf(covariate.kind, unit)
    return { unit, times: per, per: times }
  }
  if (unit === covariate.unit) return { unit, times: 1, per: 1 }
  for (const kind of FREE_KINDS) {
    const own = unitOf(kind, covariate.unit)
    const typed = unitOf(kind, unit)
    if (own !== undefined && typed !== undefined && own.moles === typed.moles) {
      const { times, per } = quotient(own.ratio, typed.ratio)
      return { unit, times, per }
    }
  }
  problems.add(
    path,
    `"${unit}" does not convert to "${covariate.unit}", in which the model states this covariate; use "${covariate.unit}"`
  )
  return undefined
}

/** A covariate's value in its canonical unit; NaN after a problem. */
export function covariateValue(
  covariate: Exclude<Covariate, { sort: 'category' }>,
  quantity: Quantity,
  path: string,
  problems: Problems
): number {
  const unit = covariateUnit(covariate, quantity.unit, path, problems)
  return unit === undefined ? Number.NaN : applyInverse(unit, quantity.value)
}

/** The widest kind whose units a model's own covariate may be typed in; undefined where there is only its own unit. */
export function kindOfOwn(unit: string): Kind | undefined {
  const kinds = FREE_KINDS.filter((kind) => unitOf(kind, unit) !== undefined)
  return kinds.toSorted((a, b) => unitsOf(b).length - unitsOf(a).length)[0]
}
