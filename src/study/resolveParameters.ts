import type { Factor, Parameter, Term } from '../patient/drugModel'
import { isUnitOfActivity } from '../units/nearestUnit'
import { KIND_NAMES, type Kind, unitOf } from '../units/unitTable'
import type { Converter } from './converter'
import type { ModelFile, ParameterFile } from './file/modelSchema'
import type { Covariate } from './knownCovariates'
import type { ParameterUse } from './modelNames'
import { knownNames } from './nearestName'
import { below } from './path'
import { resolveFactor } from './resolveFactor'
import { open } from './soundMembers'

/** What a parameter that nothing uses may be. */
const PARAMETER_KINDS: readonly Kind[] = [
  'clearance',
  'volume',
  'rateConstant',
  'time',
  'fraction',
  'amountRate',
  'concentration',
  'association'
]

const PER_KG = /\/\(?(?:70\.?)?kg|kg-1|kg\^-1/i

export interface ParametersRequest {
  readonly file: ModelFile
  /** Where the model stands in its file; empty for a file of its own. */
  readonly path: string
  readonly uses: ReadonlyMap<string, readonly ParameterUse[]>
  readonly covariates: ReadonlyMap<string, Covariate>
  readonly convert: Converter
}

/** Every parameter of a model: its unit by what it is used as, its typical value as terms and factors. */
export function resolveParameters(request: ParametersRequest): Parameter[] {
  const { file, convert } = request
  const path = below(request.path, 'parameters')
  if (!convert.problems.isOpen(path)) return []
  const parameters: Parameter[] = []
  for (const [name, parameter] of Object.entries(file.parameters)) {
    const at = below(path, name)
    if (!convert.problems.isSound(at)) continue
    parameters.push({
      name,
      unit: parameter.unit,
      toCanonical: unitRatio(name, parameter.unit, at, request),
      typical: parameter.typical.map((term, i) => resolveTerm(term, below(below(at, 'typical'), i), request)),
      ...assumption(parameter, at, convert)
    })
    checkPositive(name, parameter, at, request)
  }
  checkNamesBesideParameters(request)
  return parameters
}

/** The kind of a parameter by its first use; undefined for one that nothing uses. */
export function kindOf(
  name: string,
  unit: string,
  uses: ReadonlyMap<string, readonly ParameterUse[]>
): Kind | undefined {
  return uses.get(name)?.at(0)?.kind ?? PARAMETER_KINDS.find((kind) => unitOf(kind, unit) !== undefined)
}

function unitRatio(
  name: string,
  unit: string,
  at: string,
  { uses, convert }: ParametersRequest
): Parameter['toCanonical'] {
  const path = below(at, 'unit')
  const first = uses.get(name)?.at(0)
  const other = uses.get(name)?.find((use) => use.kind !== first?.kind)
  if (first !== undefined && other !== undefined) {
    convert.problems.add(
      at,
      `"${name}" is used as a ${KIND_NAMES[first.kind]} (${first.path}) and as a ${KIND_NAMES[other.kind]} (${other.path})`
    )
    return { times: 1, per: 1 }
  }
  if (PER_KG.test(unit)) {
    convert.problems.add(
      path,
      `the unit of a parameter is never per kg, got "${unit}"; leave "/kg" out and use a factor "power" of the weight with reference 1 kg and exponent 1`
    )
    return { times: 1, per: 1 }
  }
  const kind = kindOf(name, unit, uses)
  if (kind === undefined) {
    const activity = isUnitOfActivity(unit) ? '; drugs measured in units of activity are not handled' : ''
    convert.problems.add(path, `"${unit}" is not a unit of any parameter that a model can have${activity}`)
    return { times: 1, per: 1 }
  }
  return convert.ratio(kind, unit, path)
}

type Assumable = { assumed?: true | undefined; because?: string | undefined }

/** A number that was not read in the source says why it stands there. */
function assumption(marked: Assumable, at: string, convert: Converter): { assumed?: { because: string } } {
  if (marked.assumed === true && marked.because === undefined) {
    convert.problems.add(
      at,
      '"assumed" needs "because": why the number stands there though it was not read in the source'
    )
  }
  if (marked.assumed === undefined && marked.because !== undefined) {
    convert.problems.add(below(at, 'because'), '"because" stands beside "assumed": true only')
  }
  return marked.assumed === true ? { assumed: { because: marked.because ?? '' } } : {}
}

function resolveTerm(term: ParameterFile['typical'][number], at: string, request: ParametersRequest): Term {
  const factors: Factor[] = []
  const reasons: string[] = []
  const own = assumption(term, at, request.convert).assumed
  if (own !== undefined) reasons.push(own.because)
  for (const [i, factor] of (term.factors ?? []).entries()) {
    const path = below(below(at, 'factors'), i)
    const resolved = resolveFactor(factor, path, request.covariates, request.convert.problems)
    if (resolved !== undefined) factors.push(resolved)
    const assumed = assumption(factor, path, request.convert).assumed
    if (assumed !== undefined) reasons.push(assumed.because)
  }
  return { value: term.value, factors, ...(reasons.length > 0 && { assumed: { because: reasons.join('; ') } }) }
}

/** What a constant of 0 or less is refused as, by the key that names the parameter. */
const POSITIVE: Readonly<Record<string, string>> = {
  volume: 'volume',
  maximumRate: 'maximum rate',
  halfSaturation: 'half-saturation',
  hill: 'Hill exponent',
  association: 'association rate',
  dissociation: 'dissociation rate'
}

/** What is 0 or less whoever the patient is and must not be; what depends on a covariate comes out with the individual. */
function checkPositive(name: string, parameter: ParameterFile, at: string, { uses, convert }: ParametersRequest): void {
  const use = uses.get(name)?.find(({ path, kind }) => kind === 'amountRate' || lastStep(path) in POSITIVE)
  if (use === undefined || parameter.typical.some((term) => (term.factors ?? []).length > 0)) return
  const sum = parameter.typical.reduce((total, term) => total + term.value, 0)
  const word = POSITIVE[lastStep(use.path)] ?? 'production rate'
  if (!(sum > 0))
    convert.problems.add(
      below(at, 'typical'),
      `the ${word} "${name}" must be greater than 0, got ${sum} ${parameter.unit}`
    )
}

function lastStep(path: string): string {
  return path.slice(path.lastIndexOf('.') + 1)
}

/** The names of parameters in `typicalUncertainty` and `correlations`. */
function checkNamesBesideParameters({ file, path, convert }: ParametersRequest): void {
  const { problems } = convert
  const uncertainty = below(path, 'typicalUncertainty')
  const stated = problems.isSound(uncertainty) ? Object.keys(file.typicalUncertainty?.relativeSe ?? {}) : []
  for (const name of stated.filter((each) => !Object.hasOwn(file.parameters, each))) {
    const known = knownNames(name, Object.keys(file.parameters))
    problems.add(below(below(uncertainty, 'relativeSe'), name), `no parameter is called "${name}"; ${known}`)
  }
  const seen = new Set<string>()
  for (const [at, { between }] of open(file.correlations, below(path, 'correlations'), problems)) {
    between.forEach((name, i) => {
      const place = below(below(at, 'between'), i)
      if (!Object.hasOwn(file.parameters, name)) {
        problems.add(place, `no parameter is called "${name}"; ${knownNames(name, Object.keys(file.parameters))}`)
      } else if (file.parameters[name]?.variability === undefined) {
        problems.add(place, `"${name}" has no variability, so that nothing can be correlated with it`)
      }
    })
    const pair = [...between].sort().join('\n')
    if (between[0] === between[1]) problems.add(below(at, 'between'), 'a correlation is between two parameters')
    if (seen.has(pair)) problems.add(below(at, 'between'), 'this pair has a correlation already')
    seen.add(pair)
  }
}
