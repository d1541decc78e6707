import type { Person } from '../patient/person'
import type { SessionLine } from '../pk/prescription'
import type { Quantity } from '../units/quantity'
import { type Converter, present } from './converter'
import type { ChangeFile, PatientFile } from './file/patientSchema'
import { COMPUTED } from './knownCovariates'
import { below } from './path'
import { covariatesUsed, type ResolvedModel } from './resolveModel'
import { inputsOfComputed, NOBODY, type PersonContext, resolvePerson } from './resolvePerson'
import { open } from './soundMembers'
import type { PersonStretch } from './study'

export interface ResolvedPatient {
  readonly people: readonly PersonStretch[]
  readonly sessions: readonly SessionLine[]
}

/** The patient over each stretch of time, and the dialysis sessions. */
export function resolvePatient(
  file: PatientFile,
  path: string,
  model: ResolvedModel,
  convert: Converter
): ResolvedPatient {
  const { problems } = convert
  const context: PersonContext = { covariates: model.covariates, choices: model.drugModel.covariates, problems }
  const { changes, sessions: sessionsFile, ...person } = file
  const first = resolvePerson(person, path, NOBODY, context)
  const people: PersonStretch[] = [{ from: 0, person: first, path, typed: quantitiesOf(person) }]
  const dated = [...open(changes, below(path, 'changes'), problems)].map(([at, change]) => ({
    at,
    change,
    from: convert.number('time', change.at, below(at, 'at'))
  }))
  const given = new Set(COMPUTED.filter((name) => Object.hasOwn(first.numbers, name)))
  dated.sort((a, b) => a.from - b.from)
  dated.forEach(({ at, change, from }, i) => {
    if (dated[i - 1]?.from === from)
      problems.add(below(at, 'at'), 'there is another change at this time; put both in one')
    if (Object.keys(change).length === 1) problems.add(at, 'a change names at least one value besides "at"')
    checkGivenDirectly(change, at, given, context)
    const { at: _, ...values } = change
    const before: Person = people.at(-1)?.person ?? first
    const changed = { from, person: resolvePerson(values, at, before, context), path: at, typed: quantitiesOf(values) }
    // A change at 0 is in force from the start: there is no stretch before it.
    if (from === 0) people[0] = changed
    else people.push(changed)
  })
  const sessions = [...open(sessionsFile, below(path, 'sessions'), problems)].map(([at, session]): SessionLine => {
    if (session.count !== undefined && session.every === undefined) {
      problems.add(below(at, 'count'), '"count" needs "every": how far apart the sessions are')
    }
    return {
      at: convert.number('time', session.at, below(at, 'at')),
      duration: convert.number('time', session.for, below(at, 'for')),
      clearance: convert.number('clearance', session.clearance, below(at, 'clearance')),
      ...present('every', session.every && convert.spacing(session.every, below(at, 'every'))),
      ...present('count', session.count)
    }
  })
  if (sessions.length > 0) checkSessions(people, path, model, convert)
  return { people, sessions }
}

/** Those members that are a number with a unit. */
function quantitiesOf(values: object): Record<string, Quantity> {
  const isQuantity = (value: unknown): value is Quantity =>
    typeof value === 'object' && value !== null && 'value' in value && 'unit' in value
  return Object.fromEntries(Object.entries(values).filter((entry): entry is [string, Quantity] => isQuantity(entry[1])))
}

/** A covariate given directly would silently keep its value while what it is computed from changes. */
function checkGivenDirectly(change: ChangeFile, at: string, given: Set<string>, context: PersonContext): void {
  for (const name of COMPUTED) {
    const isGiven = Object.hasOwn(change, name)
    if (given.has(name) && !isGiven) {
      for (const input of inputsOfComputed(name, context.choices)) {
        if (!Object.hasOwn(change, input)) continue
        context.problems.add(
          below(at, input),
          `${input} changes, but ${name}, which depends on it, was given directly and would keep its value; give ${name} in this change too, or not at all`
        )
      }
    }
    if (isGiven) given.add(name)
  }
}

const RENAL = ['creatinineClearance', 'estimatedGfr', 'absoluteGfr'] as const

/** A patient on dialysis has no clearance that a formula could give; without saying so, sessions must not meet one. */
function checkSessions(
  people: readonly PersonStretch[],
  path: string,
  { drugModel }: ResolvedModel,
  { problems }: Converter
): void {
  const used = covariatesUsed(drugModel)
  for (const { person } of people) {
    if (person.renalReplacement !== 'none') continue
    const given = (name: string) => Object.hasOwn(person.numbers, name)
    for (const name of RENAL) {
      if (!used.has(name) || given(name) || (name === 'absoluteGfr' && given('estimatedGfr'))) continue
      problems.add(
        below(path, 'sessions'),
        `with sessions, "renalReplacement" must be "intermittent" or "continuous", and ${name}, which the model would compute, be given directly`
      )
    }
  }
}
