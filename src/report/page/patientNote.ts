import { nameInWords, unitInWords, valueInWords } from '../../patient/covariateWords'
import type { DrugModel } from '../../patient/drugModel'
import type { CovariateName, Person } from '../../patient/person'
import type { PersonStretch, Study } from '../../study/study'
import type { Quantity } from '../../units/quantity'
import { multipleOf } from '../../units/spacing'
import { brief, typed, withUnit } from './number'
import { type Prose, value } from './prose'
import { listed, polished, type Showing } from './showing'

/** Typed values are echoed with every digit, in the unit in which they are read. */
const DIGITS = 6
/** Said first, in this order, without their names. */
const SPOKEN: readonly CovariateName[] = ['weight', 'height']
const AGES: readonly CovariateName[] = ['age', 'postnatalAge', 'gestationalAge', 'postmenstrualAge']

/** What was typed for a covariate in one stretch, where that is known. */
export type TypedValues = (path: string, name: string) => Quantity | undefined

/**
 * The patient in a sentence, then a sentence for each change. A value that was typed in another unit than the one it is
 * read in is shown in both, so that a slip in the unit is seen.
 */
export function patientNote(study: Study, showing: Showing, typedValues: TypedValues): readonly Prose[] {
  const [first, ...later] = study.people
  if (first === undefined) throw new RangeError('a study has a person from time 0 on')
  let before = first.person
  const sentences: Prose[] = [describe(first, study.drugModel, typedValues)]
  for (const stretch of later) {
    sentences.push(change(before, stretch, study, showing, typedValues))
    before = stretch.person
  }
  if (study.sessions.length > 0) {
    const sessions = study.sessions.map((session) => {
      const every = session.every === undefined ? '' : ` every ${showing.typedTime(multipleOf(session.every, 1))}`
      const times = session.count === undefined ? '' : `, ${session.count} times`
      const clearance = withUnit(brief(session.clearance), 'L/h')
      return `${showing.typedTime(session.duration)} from ${showing.typedTime(session.at)} on${every}${times}, adding a clearance of ${clearance}`
    })
    sentences.push(['Dialysis: ', value(listed(sessions)), '.'])
  }
  return sentences
}

/** `from 72 h (day 4)`. */
export function since(hours: number, showing: Showing): string {
  return `${showing.typedTime(hours)} (day\u00a0${Math.floor(hours / 24) + 1})`
}

function describe({ person, path }: PersonStretch, drugModel: DrugModel, typedValues: TypedValues): Prose {
  const shown = (name: CovariateName) => echoed(name, person, drugModel, typedValues(path, name))
  const age = shown('age')
  const spoken = [age, ...SPOKEN.map(shown)].filter((text) => text !== undefined)
  const rest = Object.keys(person.numbers).filter((name) => name !== 'age' && !SPOKEN.includes(name))
  const ages = rest.filter((name) => AGES.includes(name))
  const others = rest.filter((name) => !AGES.includes(name))
  const prose: (string | ReturnType<typeof value>)[] = [`A ${who(person)}`]
  spoken.forEach((text, k) => {
    prose.push(k === 0 ? ' of ' : k === spoken.length - 1 ? ' and ' : ', ', value(text))
  })
  for (const name of [...ages, ...others]) prose.push(`, ${nameInWords(name)} `, value(shown(name) ?? ''))
  for (const [name, category] of Object.entries(person.categories)) prose.push(`, ${name} `, value(category))
  if (person.dosingWeight !== undefined) {
    prose.push(', dosing weight ', value(polished(valueInWords('weight', person.dosingWeight, drugModel, DIGITS))))
  }
  if (person.renalReplacement !== 'none') prose.push(`, on ${person.renalReplacement} renal replacement`)
  prose.push('.')
  return prose
}

function change(
  before: Person,
  { from, person: after, path }: PersonStretch,
  study: Study,
  showing: Showing,
  typedValues: TypedValues
): Prose {
  const { drugModel } = study
  const names = new Set([...Object.keys(before.numbers), ...Object.keys(after.numbers)])
  const changes: string[] = []
  for (const name of names) {
    if (before.numbers[name] === after.numbers[name]) continue
    const now = echoed(name, after, drugModel, typedValues(path, name))
    changes.push(now === undefined ? `${nameInWords(name)} no longer known` : `${nameInWords(name)} ${now}`)
  }
  for (const [name, category] of Object.entries(after.categories)) {
    if (before.categories[name] !== category) changes.push(`${name} ${category}`)
  }
  if (before.dosingWeight !== after.dosingWeight && after.dosingWeight !== undefined) {
    changes.push(`dosing weight ${polished(valueInWords('weight', after.dosingWeight, drugModel, DIGITS))}`)
  }
  if (before.renalReplacement !== after.renalReplacement) changes.push(`renal replacement: ${after.renalReplacement}`)
  return [
    'From ',
    value(since(from, showing)),
    ' on: ',
    value(listed(changes.length === 0 ? ['as before'] : changes)),
    '.'
  ]
}

/** What changes at a time, short enough to stand over a figure. */
export function changeLabel(before: Person, after: Person, drugModel: DrugModel): string {
  const changed = Object.keys(after.numbers).filter((name) => before.numbers[name] !== after.numbers[name])
  const [name] = changed
  if (name === undefined) return 'patient changes'
  const more = changed.length > 1 ? ` and ${changed.length - 1} more` : ''
  return `${nameInWords(name).replace(/^serum /, '')} ${shownValue(name, after, drugModel) ?? ''}${more}`
}

function echoed(
  name: CovariateName,
  person: Person,
  drugModel: DrugModel,
  quantity: Quantity | undefined
): string | undefined {
  const shown = shownValue(name, person, drugModel)
  if (shown === undefined || quantity === undefined) return shown
  const unit = polished(unitInWords(quantity.unit))
  if (unit === '' || shown.endsWith(`\u00a0${unit}`)) return shown
  return `${shown} (typed: ${typed(quantity.value)}\u00a0${unit})`
}

function shownValue(name: CovariateName, person: Person, drugModel: DrugModel): string | undefined {
  const number = person.numbers[name]
  return number === undefined ? undefined : polished(valueInWords(name, number, drugModel, DIGITS))
}

function who(person: Person): string {
  const years = person.numbers.age
  const child = years !== undefined && years < 18
  if (person.sex === undefined) return child ? 'child' : 'person'
  if (person.sex === 'female') return child ? 'girl' : 'woman'
  return child ? 'boy' : 'man'
}
