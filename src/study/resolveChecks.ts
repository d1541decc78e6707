import type { Kind } from '../units/unitTable'
import { present } from './converter'
import type { CheckFile, ModelFile } from './file/modelSchema'
import type { ModelCheck } from './modelCheck'
import { knownNames, nearestName } from './nearestName'
import { below } from './path'
import { type DoseContext, resolveDose } from './resolveDoses'
import type { ResolvedModel } from './resolveModel'
import { NOBODY, resolvePerson } from './resolvePerson'
import { open } from './soundMembers'

/** What can be checked, apart from parameters, and what kind of number it is. */
const KIND_OF: Readonly<Record<Exclude<ModelCheck['what'], 'parameter'>, Kind>> = {
  'terminal half-life': 'time',
  Vss: 'volume',
  'mean residence time': 'time',
  'average at steady state': 'concentration',
  'AUC24 at steady state': 'area',
  'concentration at time': 'concentration'
}

const WITH_DOSES: readonly string[] = ['average at steady state', 'AUC24 at steady state', 'concentration at time']

/** A model's own checks in canonical units. */
export function resolveChecks(file: ModelFile, path: string, model: ResolvedModel): ModelCheck[] {
  const { convert, drugModel } = model
  const checks: ModelCheck[] = []
  const doses: DoseContext = { convert, routes: drugModel.routes, products: drugModel.drug.products }
  for (const [at, check] of open(file.checks, below(path, 'checks'), convert.problems)) {
    const asked = resolveWhat(check, at, model)
    if (asked === undefined) continue
    checkDosesAsked(check, asked.what, at, model)
    const context = { covariates: model.covariates, choices: drugModel.covariates, problems: convert.problems }
    checks.push({
      ...asked,
      person: resolvePerson(check.patient ?? {}, below(at, 'patient'), NOBODY, context),
      lines: (check.doses ?? []).map((dose, i) => resolveDose(dose, below(below(at, 'doses'), i), doses)),
      ...present('at', check.at && convert.number('time', check.at, below(at, 'at'))),
      expected: convert.number(asked.kind, check.expected, below(at, 'expected')),
      unit: check.expected.unit,
      relativeTolerance: check.relativeTolerance,
      from: check.from,
      path: at
    })
  }
  return checks
}

function resolveWhat(
  check: CheckFile,
  at: string,
  model: ResolvedModel
): Pick<ModelCheck, 'what' | 'parameter' | 'kind'> | undefined {
  const { problems } = model.convert
  const known = Object.keys(KIND_OF) as (keyof typeof KIND_OF)[]
  const what = known.find((candidate) => candidate === check.what)
  if (what !== undefined) return { what, kind: KIND_OF[what] }
  const name = /^parameter (.+)$/.exec(check.what)?.[1]
  if (name === undefined) {
    const nearest = nearestName(check.what, [...known, 'parameter NAME'])
    const listed = known.map((candidate) => `"${candidate}"`).join(', ')
    problems.add(
      below(at, 'what'),
      `"${check.what}" cannot be checked; the nearest is "${nearest}", of ${listed}, "parameter NAME"`
    )
    return undefined
  }
  const names = model.drugModel.parameters.map((parameter) => parameter.name)
  const kind = names.includes(name) ? model.kindOfParameter(name) : undefined
  if (kind === undefined) {
    problems.add(below(at, 'what'), `no parameter is called "${name}"; ${knownNames(name, names)}`)
    return undefined
  }
  return { what: 'parameter', parameter: name, kind }
}

function checkDosesAsked(check: CheckFile, what: ModelCheck['what'], at: string, { convert }: ResolvedModel): void {
  const { problems } = convert
  const needsDoses = WITH_DOSES.includes(what)
  if (needsDoses && check.doses === undefined) problems.add(below(at, 'doses'), `a check of "${what}" needs "doses"`)
  if (!needsDoses && check.doses !== undefined) problems.add(below(at, 'doses'), `a check of "${what}" has no doses`)
  const needsTime = what === 'concentration at time'
  if (needsTime && check.at === undefined) problems.add(below(at, 'at'), `a check of "${what}" needs "at"`)
  if (!needsTime && check.at !== undefined) problems.add(below(at, 'at'), `a check of "${what}" has no time`)
  const repeats = check.doses?.some((dose) => dose.every !== undefined && dose.count === undefined)
  if (needsDoses && !needsTime && check.doses !== undefined && repeats !== true) {
    problems.add(below(at, 'doses'), `a steady state needs a dose that repeats: "every" without "count"`)
  }
}
