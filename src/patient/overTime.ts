import type { Hours } from '../units/canonical'
import { type AgeName, agesOf } from './ages'
import { nameInWords, significant, valueInWords } from './covariateWords'
import type { DrugModel } from './drugModel'
import type { Finding } from './findings'
import { computedRenal, inputsOf, usesOf } from './needs'
import type { Person } from './person'

/** A person from one time on, until the next entry. */
export interface PersonFrom {
  readonly from: Hours
  readonly person: Person
}

/** KDIGO 2012 clinical practice guideline for acute kidney injury, Kidney Int Suppl 2:1 (volume and page from memory). */
const RISE = { mgPerDl: 0.3, within: 48, ratio: 1.5, ratioWithin: 168 }
/** Rounding that still counts as reached, relative. */
const REACHED = 1e-9
/** Growth of an age over the study from which a caution is due. */
const GROWTH = 0.05
const HOURS_PER_YEAR = 365.25 * 24
const HOURS_PER_WEEK = 168

/** What is found only by looking along the whole study: unstable creatinine, ages that grow while they stand still here. */
export function findingsOverTime(
  drugModel: DrugModel,
  people: readonly PersonFrom[],
  until: Hours
): readonly Finding[] {
  return [...unstableCreatinine(drugModel, people), ...growingAges(drugModel, people, until)]
}

/**
 * Creatinine is unstable where a value is at least 0.3 mg/dL above the lowest in force at any moment of the 48 h before it,
 * or 1.5 times the lowest of the 7 d before it, or has fallen by as much. A value is in force until the next replaces it.
 */
export function unstableCreatinine(drugModel: DrugModel, people: readonly PersonFrom[]): readonly Finding[] {
  const values: { readonly from: Hours; readonly value: number }[] = []
  for (const { from, person } of people) {
    const value = person.numbers.serumCreatinine
    // A stretch that changes something else keeps the creatinine in force, and is no second finding.
    if (value !== undefined && value !== values.at(-1)?.value) values.push({ from, value })
  }
  const findings: Finding[] = []
  values.forEach(({ from, value }, position) => {
    const before = (hours: Hours) =>
      values.slice(0, position).filter((_, earlier) => {
        // In force up to, not including, the start of the one after it.
        const end = values[earlier + 1]?.from ?? from
        return end - (from - hours) > 1e-12 * Math.max(1, Math.abs(from))
      })
    const change = largestChange(value, before(RISE.within), before(RISE.ratioWithin))
    if (change === undefined) return
    const through = computedThrough(drugModel, people, from)
    findings.push({
      kind: 'unstable creatinine',
      severity: 'caution',
      covariate: 'serumCreatinine',
      text: `serum creatinine is unstable at ${significant(from, 4)} h: ${change}; ${
        through === undefined
          ? 'no clearance of this model is computed from it'
          : `the ${through} computed from it assumes a stable value`
      }`
    })
  })
  return findings
}

interface InForce {
  readonly value: number
}

function largestChange(value: number, twoDays: readonly InForce[], week: readonly InForce[]): string | undefined {
  const show = (creatinine: number) => significant(creatinine, 3)
  const reached = (change: number, limit: number) => change >= limit * (1 - REACHED)
  const lowest = (earlier: readonly InForce[]) => Math.min(...earlier.map((each) => each.value))
  const highest = (earlier: readonly InForce[]) => Math.max(...earlier.map((each) => each.value))
  if (twoDays.length > 0) {
    if (reached(value - lowest(twoDays), RISE.mgPerDl))
      return `from ${show(lowest(twoDays))} to ${show(value)} mg/dL within 48 h, a rise of at least 0.3`
    if (reached(highest(twoDays) - value, RISE.mgPerDl))
      return `from ${show(highest(twoDays))} to ${show(value)} mg/dL within 48 h, a fall of at least 0.3`
  }
  if (week.length > 0) {
    if (reached(value, RISE.ratio * lowest(week)))
      return `from ${show(lowest(week))} to ${show(value)} mg/dL within 7 d, at least 1.5 times`
    if (reached(highest(week), RISE.ratio * value))
      return `from ${show(highest(week))} to ${show(value)} mg/dL within 7 d, a fall to two thirds or less`
  }
  return undefined
}

/** The covariate that this model computes from creatinine for the person at that time, in words. */
function computedThrough(drugModel: DrugModel, people: readonly PersonFrom[], from: Hours): string | undefined {
  const person = people.find((stretch) => stretch.from === from)?.person
  if (person === undefined) return undefined
  const through = computedRenal(person, drugModel).find((name) => inputsOf(name, drugModel).includes('serumCreatinine'))
  if (through !== undefined) return nameInWords(through)
  return usesOf(drugModel).has('serumCreatinine') ? 'value' : undefined
}

/** Ages are those at the start of a stretch and do not advance by themselves; a caution where one grows by over 5 %. */
export function growingAges(drugModel: DrugModel, people: readonly PersonFrom[], until: Hours): readonly Finding[] {
  const uses = usesOf(drugModel)
  const names = (['age', 'postnatalAge', 'postmenstrualAge'] as const).filter(
    (name) => uses.has(name) || people.some(({ person }) => person.numbers[name] !== undefined)
  )
  return names.flatMap((name) => growth(name, drugModel, people, until))
}

function growth(
  name: Exclude<AgeName, 'gestationalAge'>,
  drugModel: DrugModel,
  people: readonly PersonFrom[],
  until: Hours
): readonly Finding[] {
  const perUnit = name === 'postmenstrualAge' ? HOURS_PER_WEEK : HOURS_PER_YEAR
  const findings: Finding[] = []
  for (let i = 0; i < people.length; ) {
    const start = people[i]!
    const age = agesOf(start.person)[name]?.value
    let next = i + 1
    while (next < people.length && agesOf(people[next]!.person)[name]?.value === age) next++
    const end = Math.min(people[next]?.from ?? until, until)
    const grows = age === undefined ? 0 : (end - start.from) / perUnit
    if (age !== undefined && grows > GROWTH * age * (1 + REACHED)) {
      const by = age === 0 ? 'from birth on' : `by ${significant((100 * grows) / age, 2)} %`
      findings.push({
        kind: 'growing age',
        severity: 'caution',
        covariate: name,
        text: `${nameInWords(name)} ${valueInWords(name, age, drugModel)} grows ${by} between ${significant(start.from, 4)} and ${significant(end, 4)} h and is held at its start: write a change where it matters`
      })
    }
    i = next
  }
  return findings
}
