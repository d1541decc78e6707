import type { CovariateChoices } from '../patient/drugModel'
import type { ComputedCovariate, Person } from '../patient/person'
import type { Quantity } from '../units/quantity'
import { present } from './converter'
import type { PersonFile } from './file/patientSchema'
import { type Covariate, covariateValue } from './knownCovariates'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'
import { quantityProblem } from './unitProblem'

/** What a person's values are read with. */
export interface PersonContext {
  readonly covariates: ReadonlyMap<string, Covariate>
  readonly choices: CovariateChoices
  readonly problems: Problems
}

/** For doses per kg; no covariate. */
const DOSING_WEIGHT = { sort: 'number', kind: 'bodyWeight' } as const

/** A person from a file, over what was known before (an empty person, or the one before a change). */
export function resolvePerson(file: Partial<PersonFile>, path: string, before: Person, context: PersonContext): Person {
  const { problems } = context
  const numbers: Record<string, number | undefined> = { ...before.numbers }
  const categories: Record<string, string> = { ...before.categories }
  let dosingWeight = before.dosingWeight
  for (const [name, raw] of Object.entries(file)) {
    const at = below(path, name)
    if (raw === undefined || !problems.isSound(at)) continue
    if (name === 'dosingWeight') dosingWeight = covariateValue(DOSING_WEIGHT, raw as Quantity, at, problems)
    const covariate = context.covariates.get(name)
    if (covariate === undefined || name === 'sex') continue
    if (covariate.sort === 'category') {
      const category = ownCategory(raw, name, covariate.categories, at, problems)
      if (category !== undefined) categories[name] = category
      continue
    }
    const asked = { sign: 'any', exampleUnits: covariate.sort === 'own' ? [covariate.unit] : [] } as const
    const problem = covariate.sort === 'own' ? quantityProblem(raw, name, asked) : undefined
    if (problem !== undefined) problems.add(at, problem)
    else numbers[name] = covariateValue(covariate, raw as Quantity, at, problems)
  }
  const sex = problems.isOpen(below(path, 'sex')) ? (file.sex ?? before.sex) : before.sex
  const replacement = problems.isOpen(below(path, 'renalReplacement')) ? file.renalReplacement : undefined
  return {
    ...present('sex', sex),
    numbers: numbers as Person['numbers'],
    categories,
    ...present('dosingWeight', dosingWeight),
    renalReplacement: replacement ?? before.renalReplacement
  }
}

export const NOBODY: Person = { numbers: {}, categories: {}, renalReplacement: 'none' }

function ownCategory(
  raw: unknown,
  name: string,
  categories: readonly string[],
  at: string,
  problems: Problems
): string | undefined {
  if (typeof raw === 'string' && categories.includes(raw)) return raw
  const typed = typeof raw === 'string' ? raw : ''
  problems.add(at, `${name} must be one of its categories; ${knownNames(typed, categories)}`)
  return undefined
}

/** The covariates that each computed one is computed from, by the model's own choice of equation where it has one. */
export function inputsOfComputed(name: ComputedCovariate, choices: CovariateChoices): readonly string[] {
  switch (name) {
    case 'bodyMassIndex':
    case 'bodySurfaceArea':
    case 'leanWeight':
      return ['weight', 'height']
    case 'adjustedWeight':
      return ['weight', 'height', 'idealWeight']
    case 'idealWeight':
      return ['height']
    case 'creatinineClearance': {
      const words = choices.creatinineClearance?.weight
      const size =
        words === 'actual'
          ? ['weight']
          : words === 'ideal'
            ? ['height', 'idealWeight']
            : ['weight', 'height', 'idealWeight', 'adjustedWeight', 'leanWeight']
      return ['serumCreatinine', 'age', ...size]
    }
    case 'estimatedGfr':
      return gfrInputs(choices)
    case 'absoluteGfr':
      return [...gfrInputs(choices), 'estimatedGfr', 'bodySurfaceArea', 'weight', 'height']
  }
}

function gfrInputs(choices: CovariateChoices): readonly string[] {
  switch (choices.estimatedGfr?.equation) {
    case 'bedside-schwartz':
      return ['serumCreatinine', 'height']
    case 'ckd-epi-2021-creatinine':
    case 'mdrd':
      return ['serumCreatinine', 'age']
    case 'ckd-epi-2012-cystatin':
      return ['cystatinC', 'age']
    default:
      return ['serumCreatinine', 'cystatinC', 'age']
  }
}
