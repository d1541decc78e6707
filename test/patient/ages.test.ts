import { describe, expect, test } from 'vitest'
import { ageIssues, agesOf, WEEKS_PER_YEAR } from '../../src/patient/ages'
import { valueInWords } from '../../src/patient/covariateWords'
import type { Person } from '../../src/patient/person'
import { expectWithin } from '../expectWithin'

const born = (numbers: Person['numbers']): Person => ({ numbers, categories: {}, renalReplacement: 'none' })
const days = (count: number) => count / 365.25
const weeks = (count: number) => count / WEEKS_PER_YEAR

describe('the three ages of a neonate: two give the third', () => {
  test('postmenstrual = gestational + postnatal', () => {
    const ages = agesOf(born({ gestationalAge: 28, postnatalAge: weeks(3) }))
    expectWithin(ages.postmenstrualAge!.value, 31, { relative: 1e-14 })
    expect(ages.postmenstrualAge!.note?.kind).toBe('derived')
    expect(ages.gestationalAge).toEqual({ value: 28 })
  })
  test('postnatal = postmenstrual - gestational', () => {
    expectWithin(agesOf(born({ gestationalAge: 28, postmenstrualAge: 31 })).postnatalAge!.value, days(21), {
      relative: 1e-14
    })
  })
  test('gestational = postmenstrual - postnatal', () => {
    expectWithin(agesOf(born({ postnatalAge: days(21), postmenstrualAge: 31 })).gestationalAge!.value, 28, {
      relative: 1e-14
    })
  })
  test('the age in years counts as postnatal, and the other way round', () => {
    expectWithin(agesOf(born({ age: 1, gestationalAge: 40 })).postmenstrualAge!.value, 40 + 365.25 / 7, {
      relative: 1e-14
    })
    expect(agesOf(born({ postnatalAge: 0.5 })).age?.value).toBe(0.5)
  })
  test('nothing is derived from one age alone', () => {
    expect(agesOf(born({ age: 71 })).postmenstrualAge).toBeUndefined()
    expect(agesOf(born({ gestationalAge: 28 }))).toEqual({ gestationalAge: { value: 28 } })
    expect(agesOf(born({}))).toEqual({})
  })
})

describe('three ages must agree within a week', () => {
  const three = (postmenstrualAge: number) =>
    ageIssues(born({ gestationalAge: 28, postnatalAge: weeks(3), postmenstrualAge }), 'patient')
  test.each([30, 30.5, 31, 32])('28 + 3 weeks and %d', (weeks) => expect(three(weeks)).toEqual([]))
  test.each([29.9, 32.1])('28 + 3 weeks and not %d', (weeks) => {
    const issues = three(weeks)
    expect(issues.map((issue) => issue.path)).toEqual(['patient.postmenstrualAge'])
    expect(issues[0]!.message).toContain('within a week')
  })
  test('age and postnatal age are one thing', () => {
    expect(ageIssues(born({ age: 0.5, postnatalAge: 0.51 }), 'patient')).toEqual([])
    expect(ageIssues(born({ age: 0.5, postnatalAge: days(3) }), 'patient').map((issue) => issue.path)).toEqual([
      'patient.postnatalAge'
    ])
  })
  test('a postmenstrual age before the birth cannot be', () => {
    expect(ageIssues(born({ gestationalAge: 40, postmenstrualAge: 38 }), 'patient')).toHaveLength(1)
    expect(ageIssues(born({ age: 2, postmenstrualAge: 40 }), 'patient')).toHaveLength(1)
  })
})

describe('ages read as people say them', () => {
  test.each([
    [71, '71 years'],
    [2, '2 years'],
    [1.5, '18 months'],
    [0.5, '6 months'],
    [days(200), '200 days'],
    [days(3), '3 days'],
    [days(2.5), '2.5 days'],
    [0.3456, '4.15 months'],
    [0, '0 days']
  ])('%d a is %s', (years, words) => expect(valueInWords('age', years, { declared: {} })).toBe(words))
})
