import type { DrugModel } from '../patient/drugModel'
import type { Kind } from '../units/unitTable'
import { Converter, present } from './converter'
import type { ModelFile, RangeFile } from './file/modelSchema'
import { type Covariate, knownCovariates } from './knownCovariates'
import { below } from './path'
import type { Problems } from './problems'
import { covariateChoices, declaredCovariates, resolveRange } from './resolveCovariates'
import { molarMass, resolveDrug, UNREAD_DRUG } from './resolveDrug'
import { kindOf, resolveParameters } from './resolveParameters'
import { resolveStructure } from './resolveStructure'
import { open } from './soundMembers'

/** A model read as far as it could be; complete where its file has no problem. */
export interface ResolvedModel {
  readonly drugModel: DrugModel
  readonly covariates: ReadonlyMap<string, Covariate>
  readonly convert: Converter
  /** What each parameter is, by its use. */
  readonly kindOfParameter: (name: string) => Kind | undefined
  /** Whether all of the file has its shape, so that a name that is not in it is nowhere. */
  readonly isSound: boolean
}

/** Computed covariates that a model uses only after it has said by which equation. */
const NEEDING_EQUATION = {
  creatinineClearance: 'creatinineClearance',
  estimatedGfr: 'estimatedGfr',
  absoluteGfr: 'estimatedGfr'
} as const

/** A model file, its shape already compared, in names that exist and canonical units. Every problem goes to `problems`. */
export function resolveModel(file: ModelFile, path: string, problems: Problems): ResolvedModel {
  const at = (key: string) => below(path, key)
  const sound = <K extends keyof ModelFile & string>(key: K) => (problems.isSound(at(key)) ? file[key] : undefined)
  const drugFile = sound('drug')
  const convert = new Converter(problems, molarMass(drugFile))
  const declared = problems.isOpen(at('covariates')) ? declaredCovariates(file, path, problems) : {}
  const covariates = knownCovariates(declared)
  const structure = resolveStructure(file, path, problems)
  const parameters = resolveParameters({ file, path, uses: structure.uses, covariates, convert })
  const choices = covariateChoices(file, path, convert)
  const ranges = (list: readonly RangeFile[] | undefined, where: string) =>
    [...open(list, where, problems)].map(([place, range]) => resolveRange(range, place, covariates, problems))
  const studied = problems.isOpen(at('studied')) ? file.studied : undefined
  const source = sound('source')
  if (source?.kind === 'published' && file.studied === undefined) {
    problems.add(at('studied'), 'a published model says whom it was built on: "studied" with a description is missing')
  }
  const valid = ranges(file.valid, at('valid'))
  checkEquations({ covariates: choices, parameters, valid }, path, problems)
  const { uses, ...parts } = structure
  const drugModel: DrugModel = {
    id: file.id,
    title: file.title,
    drug: drugFile === undefined ? UNREAD_DRUG : resolveDrug(drugFile, at('drug'), convert),
    apparent: file.apparent === true,
    source: {
      kind: source?.kind ?? 'user',
      citation: source?.citation ?? '',
      cautions: source?.cautions ?? [],
      ...present('doi', source?.doi),
      ...present('read', source?.read)
    },
    ...(studied !== undefined && {
      studied: {
        description: studied.description,
        ranges: ranges(studied.ranges, below(at('studied'), 'ranges')),
        ...present('subjects', studied.subjects)
      }
    }),
    covariates: choices,
    declared,
    parameters,
    valid,
    ...parts
  }
  const units = new Map(parameters.map(({ name, unit }) => [name, unit]))
  return {
    drugModel,
    covariates,
    convert,
    isSound: problems.isSound(path),
    kindOfParameter: (name) => kindOf(name, units.get(name) ?? '', uses)
  }
}

/** The covariates that the model's numbers depend on: those of its factors and of its validity. */
export function covariatesUsed(model: Pick<DrugModel, 'parameters' | 'valid'>): Set<string> {
  const factors = model.parameters.flatMap(({ typical }) => typical.flatMap((term) => term.factors))
  return new Set([...model.valid, ...factors].map(({ covariate }) => covariate))
}

/** A renal covariate that can be computed in several ways needs its equation stated where the model uses it. */
function checkEquations(
  model: Pick<DrugModel, 'parameters' | 'valid' | 'covariates'>,
  path: string,
  problems: Problems
): void {
  const where = below(path, 'covariates')
  const used = covariatesUsed(model)
  for (const [name, key] of Object.entries(NEEDING_EQUATION)) {
    if (!used.has(name) || model.covariates[key] !== undefined || !problems.isSound(below(where, key))) continue
    const words = key === 'creatinineClearance' ? 'its equation and its weight' : 'its equation'
    problems.add(where, `the model uses ${name}; state ${words} under "${key}"`)
  }
}
