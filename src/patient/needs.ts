import type { Issue } from '../pk/issue'
import { type Covariate, covariateOf, equationInWords, isComputedCovariate } from './covariates'
import { nameInWords } from './covariateWords'
import type { DrugModel } from './drugModel'
import type { ComputedCovariate, CovariateName, Person } from './person'

/** Which parameters read each covariate, in the order of the file. */
export function usesOf(drugModel: DrugModel): ReadonlyMap<CovariateName, readonly string[]> {
  const uses = new Map<CovariateName, string[]>()
  for (const parameter of drugModel.parameters)
    for (const term of parameter.typical)
      for (const { covariate } of term.factors) {
        const names = uses.get(covariate) ?? []
        if (!names.includes(parameter.name)) names.push(parameter.name)
        uses.set(covariate, names)
      }
  return uses
}

/**
 * The covariates from which a computed one follows in this model, directly or through others. A covariate given directly no
 * longer depends on them. Where the model names no equation, whatever any equation would take.
 */
export function inputsOf(name: ComputedCovariate, drugModel: Pick<DrugModel, 'covariates'>): readonly CovariateName[] {
  switch (name) {
    case 'bodyMassIndex':
    case 'bodySurfaceArea':
      return ['weight', 'height']
    case 'idealWeight':
      return ['sex', 'height']
    case 'adjustedWeight':
      return ['sex', 'weight', 'height', 'idealWeight']
    case 'leanWeight':
      return ['sex', 'weight', 'height']
    case 'creatinineClearance':
      return [
        'sex',
        'age',
        'postnatalAge',
        'serumCreatinine',
        ...weightInputs(drugModel.covariates.creatinineClearance?.weight)
      ]
    case 'estimatedGfr':
      switch (drugModel.covariates.estimatedGfr?.equation) {
        case undefined:
          return ['sex', 'age', 'postnatalAge', 'height', 'serumCreatinine', 'cystatinC']
        case 'bedside-schwartz':
          return ['age', 'postnatalAge', 'height', 'serumCreatinine']
        case 'ckd-epi-2021-creatinine-cystatin':
          return ['sex', 'age', 'postnatalAge', 'serumCreatinine', 'cystatinC']
        case 'ckd-epi-2012-cystatin':
          return ['sex', 'age', 'postnatalAge', 'cystatinC']
        default:
          return ['sex', 'age', 'postnatalAge', 'serumCreatinine']
      }
    case 'absoluteGfr':
      return [
        ...new Set<CovariateName>([
          'estimatedGfr',
          ...inputsOf('estimatedGfr', drugModel),
          'bodySurfaceArea',
          'weight',
          'height'
        ])
      ]
  }
}

/** Renal covariates that this model would compute for this person: what forbids dialysis sessions and asks for a stable creatinine. */
export function computedRenal(person: Person, drugModel: DrugModel): readonly ComputedCovariate[] {
  const uses = usesOf(drugModel)
  const used: ComputedCovariate[] = []
  if (uses.has('creatinineClearance') && person.numbers.creatinineClearance === undefined)
    used.push('creatinineClearance')
  const throughAbsolute = uses.has('absoluteGfr') && person.numbers.absoluteGfr === undefined
  if ((uses.has('estimatedGfr') || throughAbsolute) && person.numbers.estimatedGfr === undefined)
    used.push('estimatedGfr')
  return used
}

/** Every covariate that the model reads, or an issue for each thing that is missing, which says who needs it. */
export function covariatesFor(
  drugModel: DrugModel,
  person: Person,
  path: string
): { readonly covariates: ReadonlyMap<CovariateName, Covariate>; readonly issues: readonly Issue[] } {
  const covariates = new Map<CovariateName, Covariate>()
  const issues: Issue[] = []
  const missing = new Map<CovariateName, string[]>()
  for (const [name, parameters] of usesOf(drugModel)) {
    const found = covariateOf(name, person, drugModel)
    if (found.kind === 'known') {
      const unknown = unknownCategory(found, drugModel)
      if (unknown === undefined) covariates.set(name, found)
      else issues.push({ path: `${path}.${name}`, message: unknown })
      continue
    }
    const computes = isComputedCovariate(name)
    if (found.missing.length === 0) {
      const how = computes ? `; give it directly as ${name}` : ''
      issues.push({
        path: `${path}.${name}`,
        message: `${nameInWords(name)}, which ${listed(parameters)} ${needs(parameters)}, is missing: ${found.reason}${how}`
      })
    }
    for (const input of found.missing) {
      const who = computes
        ? `the ${nameInWords(name)} of ${listed(parameters)} (${equationInWords(name, drugModel)}) needs`
        : `${listed(parameters)} ${needs(parameters)}`
      const orGive = computes ? ` it, unless ${name} is given directly` : ' it'
      missing.set(input, [...(missing.get(input) ?? []), `${who}${orGive}`])
    }
  }
  for (const [name, who] of missing)
    issues.push({
      path: `${path}.${name}`,
      message: `${nameInWords(name)} is missing: ${who.join('; ')}${alternatives(name)}${asked(name, drugModel)}`
    })
  return { covariates, issues }
}

/** Two of the three ages of a neonate give the third. */
function alternatives(name: CovariateName): string {
  if (name === 'postmenstrualAge') return '; gestational and postnatal age together give it'
  if (name === 'gestationalAge') return '; postmenstrual and postnatal age together give it'
  if (name === 'postnatalAge') return '; gestational and postmenstrual age together give it'
  return ''
}

/** The model's own question for a covariate that it declares, or its categories. */
function asked(name: CovariateName, drugModel: DrugModel): string {
  const declared = Object.hasOwn(drugModel.declared, name) ? drugModel.declared[name] : undefined
  if (declared === undefined) return ''
  const question = declared.asks === undefined ? '' : ` (${declared.asks})`
  return declared.kind === 'category' ? `${question}; one of ${declared.categories.join(', ')}` : question
}

/** A category that some factor has no number for, refused with those that it has; nothing is put in its place. */
function unknownCategory(covariate: Covariate, drugModel: DrugModel): string | undefined {
  for (const parameter of drugModel.parameters)
    for (const term of parameter.typical)
      for (const factor of term.factors) {
        if (factor.covariate !== covariate.name || factor.kind !== 'category') continue
        if (typeof covariate.value === 'string' && Object.hasOwn(factor.values, covariate.value)) continue
        const known = Object.keys(factor.values).join(', ')
        return `${parameter.name} has no value for ${nameInWords(covariate.name)} "${covariate.value}"; known are ${known}`
      }
  return undefined
}

function weightInputs(word: string | undefined): readonly CovariateName[] {
  switch (word) {
    case undefined:
      return ['weight', 'height', 'idealWeight', 'adjustedWeight', 'leanWeight']
    case 'actual':
      return ['weight']
    case 'ideal':
      return ['height', 'idealWeight']
    case 'lean':
      return ['weight', 'height', 'leanWeight']
    case 'adjusted':
    case 'adjustedAbove120PercentIdeal':
      return ['weight', 'height', 'idealWeight', 'adjustedWeight']
    default:
      return ['weight', 'height', 'idealWeight']
  }
}

function listed(parameters: readonly string[]): string {
  return parameters.join(', ')
}

function needs(parameters: readonly string[]): string {
  return parameters.length === 1 ? 'needs' : 'need'
}
