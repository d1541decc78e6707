import { nameInWords, valueInWords } from '../../patient/covariateWords'
import type { DrugModel } from '../../patient/drugModel'
import type { CovariateName, Person } from '../../patient/person'
import { COVARIATE_KINDS, kindOfOwn } from '../../study/knownCovariates'
import type { Step } from '../../study/path'
import type { Study } from '../../study/study'
import type { Kind } from '../../units/unitTable'
import { choicesOf, type Marks } from './marks'
import { type Marked, type Prose, value } from './prose'
import { sessionsSentence } from './sessionNote'
import { polished, type Showing } from './showing'

/** Typed values are echoed with every digit, in the unit in which they are read. */
const DIGITS = 6
/** Said first, in this order, without their names. */
const SPOKEN: readonly CovariateName[] = ['weight', 'height']
const AGES: readonly CovariateName[] = ['age', 'postnatalAge', 'gestationalAge', 'postmenstrualAge']
const MAY_BE_NOTHING = ['age', 'postnatalAge', 'creatinineClearance', 'estimatedGfr', 'absoluteGfr']
const REPLACEMENTS = choicesOf([
  ['none', 'no'],
  ['intermittent', 'intermittent'],
  ['continuous', 'continuous']
])

/** The patient in a sentence, then a sentence for each change. */
export function patientNote(study: Study, showing: Showing, marks: Marks): readonly Prose[] {
  const [first, ...later] = study.people
  if (first === undefined) throw new RangeError('a study has a person from time 0 on')
  const context = { study, showing, marks }
  // A change at time 0 stands in place of the patient, whose other values go on.
  const atFirst = first.path === 'patient' ? [PATIENT] : [stepsOf(first.path), PATIENT]
  const sentences: Prose[] = [describe(first.person, atFirst, context)]
  let before = first.person
  for (const { from, person, path, typed } of later) {
    sentences.push(change({ before, person, from, at: stepsOf(path), names: Object.keys(typed) }, context))
    before = person
  }
  if (study.sessions.length > 0) sentences.push(sessionsSentence(study.sessions, showing, marks))
  return sentences
}

interface Context {
  readonly study: Study
  readonly showing: Showing
  readonly marks: Marks
}

const PATIENT: readonly Step[] = ['patient']

/** `patient.changes[2]` as steps. */
function stepsOf(path: string): readonly Step[] {
  const index = /^patient\.changes\[(\d+)\]$/.exec(path)?.[1]
  return index === undefined ? PATIENT : ['patient', 'changes', Number(index)]
}

/** ` (day 4)`. */
function dayOf(hours: number): string {
  return ` (day\u00a0${Math.floor(hours / 24) + 1})`
}

function describe(person: Person, holders: readonly (readonly Step[])[], context: Context): Prose {
  const { marks } = context
  /** The place that the value is from: the first that has it. */
  const holding = (name: string) => holders.find((holder) => marks.has([...holder, name])) ?? PATIENT
  const shown = (name: CovariateName) => numberMark(name, person, holding(name), context)
  const spoken = [shown('age'), ...SPOKEN.map(shown)].filter((mark) => mark !== undefined)
  const rest = Object.keys(person.numbers).filter((name) => name !== 'age' && !SPOKEN.includes(name))
  const ages = rest.filter((name) => AGES.includes(name))
  const others = rest.filter((name) => !AGES.includes(name))
  const prose: (string | Marked)[] = ['A ', sexMark(person, marks)]
  spoken.forEach((mark, k) => {
    prose.push(k === 0 ? ' of ' : k === spoken.length - 1 ? ' and ' : ', ', mark)
  })
  for (const name of [...ages, ...others]) prose.push(`, ${nameInWords(name)} `, shown(name) ?? '')
  for (const name of Object.keys(person.categories)) {
    prose.push(`, ${name} `, categoryMark(name, person, holding(name), context))
  }
  if (person.dosingWeight !== undefined) {
    prose.push(', dosing weight ', dosingWeightMark(person.dosingWeight, holding('dosingWeight'), context))
  }
  if (person.renalReplacement !== 'none') {
    const at = holding('renalReplacement')
    prose.push(', on ', replacementMark(at, marks, person.renalReplacement), ' renal replacement')
  }
  const [changed] = holders
  if (changed !== undefined && changed !== PATIENT) {
    prose.push(', changed at ', marks.quantity([...changed, 'at'], context.showing.typedTime(0), CHANGE_TIME))
  }
  prose.push('.')
  return prose.filter((part) => part !== '')
}

const CHANGE_TIME = { label: 'time of the change', of: 'time', sign: 'not negative' } as const

interface Change {
  readonly before: Person
  readonly person: Person
  readonly from: number
  readonly at: readonly Step[]
  /** The numbers that it names. */
  readonly names: readonly string[]
}

function change({ before, person, from, at, names }: Change, context: Context): Prose {
  const { showing, marks } = context
  const said: (string | Marked)[][] = []
  for (const name of names) {
    if (name === 'dosingWeight') continue
    const mark = numberMark(name, person, at, context)
    if (mark !== undefined) said.push([`${nameInWords(name)} `, mark])
  }
  for (const [name, category] of Object.entries(person.categories)) {
    if (before.categories[name] === category && !marks.has([...at, name])) continue
    said.push([`${name} `, categoryMark(name, person, at, context)])
  }
  if (names.includes('dosingWeight') && person.dosingWeight !== undefined) {
    said.push(['dosing weight ', dosingWeightMark(person.dosingWeight, at, context)])
  }
  if (before.renalReplacement !== person.renalReplacement || marks.has([...at, 'renalReplacement'])) {
    said.push(['renal replacement: ', replacementMark(at, marks, person.renalReplacement)])
  }
  if (said.length === 0) said.push([value('as before')])
  const shownTime = marks.quantity([...at, 'at'], showing.typedTime(from), CHANGE_TIME)
  const joined = said.flatMap((part, k) => [k === 0 ? '' : k === said.length - 1 ? ' and ' : ', ', ...part])
  return ['From ', shownTime, `${dayOf(from)} on: `, ...joined.filter((part) => part !== ''), '.']
}

/** What changes at a time, short enough to stand over a figure. */
export function changeLabel(before: Person, after: Person, drugModel: DrugModel): string {
  const changed = Object.keys(after.numbers).filter((name) => before.numbers[name] !== after.numbers[name])
  const [name] = changed
  if (name === undefined) return 'patient changes'
  const more = changed.length > 1 ? ` and ${changed.length - 1} more` : ''
  return `${nameInWords(name).replace(/^serum /, '')} ${shownValue(name, after, drugModel) ?? ''}${more}`
}

function shownValue(name: CovariateName, person: Person, drugModel: DrugModel): string | undefined {
  const number = person.numbers[name]
  return number === undefined ? undefined : polished(valueInWords(name, number, drugModel, DIGITS))
}

function numberMark(
  name: CovariateName,
  person: Person,
  holder: readonly Step[],
  { study, marks }: Context
): Marked | undefined {
  const read = shownValue(name, person, study.drugModel)
  if (read === undefined) return undefined
  const declared = Object.hasOwn(study.drugModel.declared, name) ? study.drugModel.declared[name] : undefined
  const known: Readonly<Record<string, Kind>> = COVARIATE_KINDS
  const of = declared?.kind === 'number' ? kindOfOwn(declared.unit) : known[name]
  const sign = declared !== undefined ? 'any' : MAY_BE_NOTHING.includes(name) ? 'not negative' : 'positive'
  return marks.quantity([...holder, name], read, { label: nameInWords(name), of, sign })
}

function categoryMark(name: string, person: Person, holder: readonly Step[], { study, marks }: Context): Marked {
  const declared = study.drugModel.declared[name]
  const categories = declared?.kind === 'category' ? declared.categories : []
  return marks.choice(
    [...holder, name],
    person.categories[name] ?? '',
    name,
    categories.map((category) => ({ value: category, text: category }))
  )
}

function dosingWeightMark(kilograms: number, holder: readonly Step[], { study, marks }: Context): Marked {
  const read = polished(valueInWords('weight', kilograms, study.drugModel, DIGITS))
  return marks.quantity([...holder, 'dosingWeight'], read, { label: 'dosing weight', of: 'bodyWeight' })
}

function replacementMark(holder: readonly Step[], marks: Marks, now: string): Marked {
  return marks.choice([...holder, 'renalReplacement'], now, 'renal replacement', REPLACEMENTS)
}

function sexMark(person: Person, marks: Marks): Marked {
  const years = person.numbers.age
  const child = years !== undefined && years < 18
  const [female, male, either] = child ? ['girl', 'boy', 'child'] : ['woman', 'man', 'person']
  const read = person.sex === undefined ? either : person.sex === 'female' ? female : male
  return marks.choice(['patient', 'sex'], read, 'sex', [
    { value: 'female', text: female },
    { value: 'male', text: male }
  ])
}
