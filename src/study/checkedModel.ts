import type { DrugModel } from '../patient/drugModel'
import { individual } from '../patient/individual'
import { type CourseRequest, courseOf } from '../pk/course'
import { valueAt } from '../pk/curve'
import { exposureOf } from '../pk/exposure'
import type { Issue } from '../pk/issue'
import { isLinear } from '../pk/model'
import { phasesOf } from '../pk/phases'
import type { Subject } from '../pk/subject'
import { fromCanonical } from '../units/quantity'
import type { ModelCheck } from './modelCheck'

/** What became of one of a model's own checks; numbers in the unit that the file states. */
export interface CheckedValue {
  readonly what: string
  readonly expected: number
  /** Undefined where it could not be computed, with the reason. */
  readonly got: number | undefined
  readonly unit: string
  readonly pass: boolean
  readonly from: ModelCheck['from']
  readonly why?: string
  /** Where it stands in the file: `checks[0]`. */
  readonly path: string
}

/** Run a model's own checks, each with the patient and the doses that it states. */
export function checkModel(drugModel: DrugModel, checks: readonly ModelCheck[]): readonly CheckedValue[] {
  return checks.map((check) => {
    const got = computedValue(drugModel, check)
    const shown = {
      what: check.parameter === undefined ? check.what : `${check.what} ${check.parameter}`,
      expected: fromCanonical(check.kind, check.expected, check.unit, drugModel.drug.molarMass).value,
      unit: check.unit,
      from: check.from,
      path: check.path
    }
    if (typeof got === 'string') return { ...shown, got: undefined, pass: false, why: got }
    return {
      ...shown,
      got: fromCanonical(check.kind, got, check.unit, drugModel.drug.molarMass).value,
      // Not `> tolerance` negated: a NaN must fail.
      pass: Math.abs(got - check.expected) <= check.relativeTolerance * Math.abs(check.expected)
    }
  })
}

/** What became of checks that were run before: a model that is read once is checked once. */
const FAILED = new WeakMap<readonly ModelCheck[], readonly Issue[]>()

/** The checks that fail, as issues: a model that does not reproduce its own numbers is not used. */
export function failedChecks(drugModel: DrugModel, checks: readonly ModelCheck[]): readonly Issue[] {
  const known = FAILED.get(checks)
  if (known !== undefined) return known
  const issues = checkModel(drugModel, checks)
    .filter(({ pass }) => !pass)
    .map((checked) => ({ path: checked.path, message: failureInWords(checked) }))
  FAILED.set(checks, issues)
  return issues
}

/** `the model's own check of Vss fails: expected 55.4 L, got 55.9`. */
export function failureInWords(checked: CheckedValue): string {
  const got = checked.got === undefined ? `it has none: ${checked.why ?? ''}` : `got ${checked.got}`
  return `the model's own check of ${checked.what} fails: expected ${checked.expected} ${checked.unit}, ${got}`
}

/** The value in canonical units, or why there is none. */
function computedValue(drugModel: DrugModel, check: ModelCheck): number | string {
  const outcome = individual(drugModel, check.person, `${check.path}.patient`)
  if (!outcome.ok) return outcome.issues.map(({ path, message }) => `${path}: ${message}`).join('; ')
  const { subject, parameters } = outcome.individual
  switch (check.what) {
    case 'parameter':
      return parameters.get(check.parameter ?? '')?.value ?? `there is no parameter ${check.parameter}`
    case 'terminal half-life':
      return ofDisposition(subject, 'terminalHalfLife')
    case 'Vss':
      return ofDisposition(subject, 'vss')
    case 'mean residence time':
      return ofDisposition(subject, 'mrt')
    case 'average at steady state':
      return atSteadyState(subject, check, 'average')
    case 'AUC24 at steady state':
      return atSteadyState(subject, check, 'auc24')
    case 'concentration at time':
      return concentrationAt(subject, check)
  }
}

function ofDisposition(subject: Subject, name: 'terminalHalfLife' | 'vss' | 'mrt'): number | string {
  if (!isLinear(subject.model)) return 'the model is not linear'
  const phases = phasesOf({ model: subject.model, from: 0, to: 1, until: 1, periods: [], infusions: [] })
  return phases[name] ?? phases.why[name] ?? 'it is not defined'
}

function atSteadyState(subject: Subject, check: ModelCheck, name: 'average' | 'auc24'): number | string {
  // One dose of each line is enough: the steady state is that of what repeats.
  const until = Math.max(...check.lines.map((line) => line.at)) + 1
  const request = requestOf(subject, check, until)
  const outcome = courseOf(request)
  if (!outcome.ok) return outcome.issues.map(({ message }) => message).join('; ')
  const steady = exposureOf({ course: outcome.course, request, targets: [] }).steadyState
  return steady[name] ?? steady.why[name] ?? 'it is not defined'
}

function concentrationAt(subject: Subject, check: ModelCheck): number | string {
  const at = check.at ?? 0
  const outcome = courseOf(requestOf(subject, check, at > 0 ? at : 1))
  if (!outcome.ok) return outcome.issues.map(({ message }) => message).join('; ')
  return valueAt(outcome.course.trajectory, { kind: 'observed' }, at, 'before')
}

function requestOf(subject: Subject, check: ModelCheck, until: number): CourseRequest {
  return {
    prescription: { name: check.path, start: 'empty', lines: check.lines },
    stretches: [{ from: 0, subject }],
    sessions: [],
    until,
    path: check.path
  }
}
