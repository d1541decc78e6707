import type { Issue } from '../pk/issue'
import { valueInWords } from './covariateWords'
import type { Note } from './estimate'
import type { Person } from './person'

/** 1 a = 365.25 d. */
export const WEEKS_PER_YEAR = 365.25 / 7

export type AgeName = 'age' | 'gestationalAge' | 'postnatalAge' | 'postmenstrualAge'

export function isAgeName(name: string): name is AgeName {
  return name === 'age' || name === 'gestationalAge' || name === 'postnatalAge' || name === 'postmenstrualAge'
}

/** An age in its canonical unit, with how it followed from the others where it was not typed. */
export interface Age {
  readonly value: number
  readonly note?: Note
}

/**
 * Every age that was typed or follows from what was typed. Postmenstrual = gestational + postnatal: two give the third.
 * `age` and `postnatalAge` are both the time since birth, so that one gives the other.
 */
export function agesOf(person: Person): Readonly<Partial<Record<AgeName, Age>>> {
  const { age, gestationalAge, postnatalAge, postmenstrualAge } = person.numbers
  const ages: Partial<Record<AgeName, Age>> = {}
  if (age !== undefined) ages.age = { value: age }
  if (gestationalAge !== undefined) ages.gestationalAge = { value: gestationalAge }
  if (postnatalAge !== undefined) ages.postnatalAge = { value: postnatalAge }
  if (postmenstrualAge !== undefined) ages.postmenstrualAge = { value: postmenstrualAge }

  if (ages.postnatalAge === undefined && ages.age !== undefined)
    ages.postnatalAge = derived(ages.age.value, 'postnatal age is the age')
  if (ages.postnatalAge === undefined && gestationalAge !== undefined && postmenstrualAge !== undefined)
    // Rounded weeks may cross at birth; the check below refuses more than a week of it.
    ages.postnatalAge = derived(
      Math.max(0, postmenstrualAge - gestationalAge) / WEEKS_PER_YEAR,
      'postnatal age = postmenstrual - gestational age'
    )
  if (ages.age === undefined && ages.postnatalAge !== undefined)
    ages.age = derived(ages.postnatalAge.value, 'age is the postnatal age')
  const sinceBirth = ages.postnatalAge?.value
  if (ages.postmenstrualAge === undefined && gestationalAge !== undefined && sinceBirth !== undefined)
    ages.postmenstrualAge = derived(
      gestationalAge + sinceBirth * WEEKS_PER_YEAR,
      'postmenstrual age = gestational + postnatal age'
    )
  if (ages.gestationalAge === undefined && postmenstrualAge !== undefined && sinceBirth !== undefined) {
    const weeks = postmenstrualAge - sinceBirth * WEEKS_PER_YEAR
    // A guess of nobody: an age that cannot be is left out here and reported by `ageIssues`.
    if (weeks > 0) ages.gestationalAge = derived(weeks, 'gestational age = postmenstrual - postnatal age')
  }
  return ages
}

/** Ages that contradict one another by more than a week; each an issue that names the numbers. */
export function ageIssues(person: Person, path: string): readonly Issue[] {
  const { age, gestationalAge, postnatalAge, postmenstrualAge } = person.numbers
  const issues: Issue[] = []
  const say = (name: AgeName, value: number) => valueInWords(name, value, { declared: {} }, 4)
  if (age !== undefined && postnatalAge !== undefined && moreThanAWeek((age - postnatalAge) * WEEKS_PER_YEAR)) {
    issues.push({
      path: `${path}.postnatalAge`,
      message: `age ${say('age', age)} and postnatal age ${say('postnatalAge', postnatalAge)} are both the time since birth and differ by more than a week; give one, or make them agree`
    })
    return issues
  }
  const sinceBirth = postnatalAge ?? age
  if (postmenstrualAge === undefined) return issues
  if (gestationalAge !== undefined && sinceBirth !== undefined) {
    const sum = gestationalAge + sinceBirth * WEEKS_PER_YEAR
    if (moreThanAWeek(postmenstrualAge - sum))
      issues.push({
        path: `${path}.postmenstrualAge`,
        message: `postmenstrual age ${say('postmenstrualAge', postmenstrualAge)} must be gestational + postnatal age, which is ${say('postmenstrualAge', sum)}, within a week`
      })
  } else if (gestationalAge !== undefined && moreThanAWeek(Math.max(0, gestationalAge - postmenstrualAge))) {
    issues.push({
      path: `${path}.postmenstrualAge`,
      message: `postmenstrual age ${say('postmenstrualAge', postmenstrualAge)} is before the birth at ${say('gestationalAge', gestationalAge)}`
    })
  } else if (sinceBirth !== undefined && postmenstrualAge - sinceBirth * WEEKS_PER_YEAR <= 0) {
    issues.push({
      path: `${path}.postmenstrualAge`,
      message: `postmenstrual age ${say('postmenstrualAge', postmenstrualAge)} is less than the time since birth, ${say('postnatalAge', sinceBirth)}`
    })
  }
  return issues
}

function derived(value: number, text: string): Age {
  return { value, note: { kind: 'derived', text } }
}

function moreThanAWeek(weeks: number): boolean {
  return Math.abs(weeks) > 1 + 1e-9
}
