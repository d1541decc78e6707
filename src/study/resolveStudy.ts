import { tooManyRows } from '../pk/profileTimes'
import { multipleOf } from '../units/spacing'
import { Converter, present } from './converter'
import type { RegimenFile } from './file/doseSchema'
import type { StudyFile } from './file/studySchema'
import { contentHash } from './hash'
import type { ModelCheck } from './modelCheck'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'
import { checkNames, type DoseContext, resolveDose } from './resolveDoses'
import type { ResolvedModel } from './resolveModel'
import { resolvePatient } from './resolvePatient'
import { resolveTarget, type TargetContext } from './resolveTargets'
import { open } from './soundMembers'
import type { Sampling, Study, StudyRegimen } from './study'

/**
 * A study file, its shape already compared, in canonical units. Whatever does not depend on the model is checked even
 * where the model could not be read. Undefined where anything is wrong.
 */
export function resolveStudy(
  file: StudyFile,
  modelRead: ResolvedModel | undefined,
  modelChecks: readonly ModelCheck[],
  problems: Problems
): Study | undefined {
  const model = modelRead?.isSound === true ? modelRead : undefined
  const convert =
    model === undefined ? new LenientConverter(problems) : new Converter(problems, model.convert.molarMass)
  const sound = <K extends keyof StudyFile & string>(key: K) => (problems.isSound(key) ? file[key] : undefined)
  const samplingFile = sound('sampling')
  const sampling = samplingFile && resolveSampling(samplingFile, convert)
  const regimens = resolveRegimens(file, model, convert)
  const micFile = sound('mic')
  const mic = micFile && convert.number('concentration', micFile, 'mic')
  const nowFile = sound('now')
  const now = nowFile && convert.number('time', nowFile, 'now')
  if (now !== undefined && sampling !== undefined && now > sampling.until) {
    problems.add('now', 'now is after sampling.until, where the study ends')
  }
  const context: TargetContext = {
    convert,
    drugModel: model?.drugModel,
    mic: Object.hasOwn(file, 'mic') && mic === undefined ? Number.NaN : mic,
    hasNow: Object.hasOwn(file, 'now')
  }
  const targets = [...open(file.targets, 'targets', problems)].map(([at, target]) => resolveTarget(target, at, context))
  const patient =
    model !== undefined && problems.isOpen('patient')
      ? resolvePatient(file.patient, 'patient', model, convert)
      : undefined
  checkBlocks(file, model, convert)
  const display = {
    time: 'h',
    concentration: 'mg/L',
    amount: 'mg',
    unbound: false,
    ...definedIn(sound('display') ?? {})
  }
  checkDisplay(display, model, convert)
  if (problems.issues.length > 0 || model === undefined || patient === undefined || sampling === undefined)
    return undefined
  return {
    title: file.title ?? model.drugModel.title,
    drugModel: model.drugModel,
    modelChecks,
    ...patient,
    regimens,
    targets,
    ...present('mic', mic),
    ...present('now', now),
    sampling,
    ...present('clock', file.clock),
    display,
    acceptAssumed: file.acceptAssumed === true,
    hash: contentHash(file)
  }
}

/** Without a model there is no telling whether a molar mass would be known; moles then pass unconverted. */
class LenientConverter extends Converter {
  constructor(problems: Problems) {
    super(problems, 1)
  }
}

function definedIn<T extends object>(object: T): { [K in keyof T]: Exclude<T[K], undefined> } {
  return object as { [K in keyof T]: Exclude<T[K], undefined> }
}

function resolveSampling(sampling: StudyFile['sampling'], convert: Converter): Sampling {
  const until = convert.number('time', sampling.until, 'sampling.until')
  const also = (sampling.also ?? []).map((time, i) => {
    const at = below('sampling.also', i)
    const hours = convert.number('time', time, at)
    if (hours > until) convert.problems.add(at, 'this time is after sampling.until, where the study ends')
    return hours
  })
  const resolved = { until, every: convert.spacing(sampling.every, 'sampling.every'), also }
  const tooMany = tooManyRows(resolved, until)
  if (tooMany !== undefined) convert.problems.add(tooMany.path, tooMany.message)
  return resolved
}

function resolveRegimens(file: StudyFile, model: ResolvedModel | undefined, convert: Converter): StudyRegimen[] {
  const { problems } = convert
  const context: DoseContext = { convert, routes: model?.drugModel.routes, products: model?.drugModel.drug.products }
  const regimens: StudyRegimen[] = []
  const names = new Set<string>()
  if (!problems.isOpen('regimens')) return regimens
  for (const [i, regimen] of file.regimens.entries()) {
    const path = below('regimens', i)
    if (!problems.isOpen(path)) continue
    const namePath = below(path, 'name')
    if (problems.isOpen(namePath)) {
      if (names.has(regimen.name))
        problems.add(namePath, `there is another regimen "${regimen.name}"; names are unique`)
      names.add(regimen.name)
    }
    regimens.push(resolveRegimen(regimen, path, context))
  }
  return regimens
}

function resolveRegimen(regimen: RegimenFile, path: string, context: DoseContext): StudyRegimen {
  const { problems } = context.convert
  const doses = below(path, 'doses')
  if (problems.isOpen(doses)) {
    regimen.doses.forEach((dose, i) => {
      if (!problems.isSound(below(doses, i))) checkNames(dose, below(doses, i), context)
    })
  }
  const sound = [...open(regimen.doses, doses, problems)]
  const lines = sound.map(([at, dose]) => resolveDose(dose, at, context))
  const start = regimen.start ?? 'empty'
  if (start === 'steady-state' && problems.isSound(doses)) {
    const repeats = lines.some((line) => line.every !== undefined && line.at < multipleOf(line.every, 1))
    if (!repeats) {
      problems.add(
        below(path, 'start'),
        'a start in steady state needs a dose with "every" that begins before one such interval has passed'
      )
    }
  }
  return { name: regimen.name, start, lines, reasons: sound.map(([, dose]) => dose.reason) }
}

function checkDisplay(
  display: { concentration: string; amount: string; unbound: boolean },
  model: ResolvedModel | undefined,
  convert: Converter
): void {
  convert.ratio('concentration', display.concentration, 'display.concentration')
  convert.ratio('amount', display.amount, 'display.amount')
  if (display.unbound && model !== undefined && model.drugModel.drug.fractionUnbound === undefined) {
    convert.problems.add(
      'display.unbound',
      "unbound concentrations need the drug's free fraction; the model states no drug.fractionUnbound"
    )
  }
}

/** Names and units in the parts that later steps read: measured levels, candidate regimens. */
function checkBlocks(file: StudyFile, model: ResolvedModel | undefined, convert: Converter): void {
  const { problems } = convert
  const regimens = problems.isSound('regimens') ? file.regimens.map(({ name }) => name) : undefined
  for (const [at, level] of open(file.levels, 'levels', problems)) {
    convert.number('concentration', level.value, below(at, 'value'))
    if (regimens !== undefined && !regimens.includes(level.regimen)) {
      problems.add(
        below(at, 'regimen'),
        `no regimen is called "${level.regimen}"; ${knownNames(level.regimen, regimens)}`
      )
    }
  }
  if (model === undefined || file.plan === undefined || !problems.isSound('plan')) return
  const routes = model.drugModel.routes.map(({ name }) => name)
  file.plan.routes?.forEach((route, i) => {
    if (!routes.includes(route)) {
      problems.add(below('plan.routes', i), `the model has no route "${route}"; ${knownNames(route, routes)}`)
    }
  })
}
