import { describe, expect, test } from 'vitest'
import type { DrugModel } from '../../src/patient/drugModel'
import { individual } from '../../src/patient/individual'
import type { CovariateName, Person } from '../../src/patient/person'
import { questionDose, questionParameters, questionPerson, type Typed } from '../../src/patient/plausibility'
import { parameter, pw101, withNumbers, woman } from './pw101'

function ask(name: CovariateName, canonical: number, typed?: Typed, person: Person = woman) {
  const changed = withNumbers(person, { [name]: canonical })
  return questionPerson(changed, typed === undefined ? {} : { [name]: typed }, 'patient')
}

const child = withNumbers(woman, { age: 6, weight: 20, height: 115 })

describe('implausible entries are questioned in the unit typed, with the neighbouring unit offered', () => {
  test('nothing is asked of a plausible person', () => {
    expect(questionPerson(woman, {}, 'patient')).toEqual([])
    expect(questionPerson(child, {}, 'patient')).toEqual([])
  })

  test('a newborn of 3500 kg', () => {
    const newborn = withNumbers(woman, { age: 0, height: 50 })
    expect(ask('weight', 3500, { value: 3500, unit: 'kg' }, newborn)).toEqual([
      {
        path: 'patient.weight',
        text: 'weight 3500 kg is outside 0.4 to 300 kg, where anyone is: did you mean 3500 g?',
        offer: { value: 3500, unit: 'g' }
      }
    ])
  })

  test.each([
    ['weight', 0.058, { value: 58, unit: 'g' }, { value: 58, unit: 'kg' }],
    ['height', 1.62, { value: 1.62, unit: 'cm' }, { value: 1.62, unit: 'm' }],
    ['height', 16200, { value: 162, unit: 'm' }, { value: 162, unit: 'cm' }],
    ['serumCreatinine', 141, { value: 141, unit: 'mg/dL' }, { value: 141, unit: 'umol/L' }],
    ['serumCreatinine', 1.6 / 88.4, { value: 1.6, unit: 'umol/L' }, { value: 1.6, unit: 'mg/dL' }],
    ['albumin', 3.5, { value: 3.5, unit: 'g/L' }, { value: 3.5, unit: 'g/dL' }],
    ['albumin', 350, { value: 35, unit: 'g/dL' }, { value: 35, unit: 'g/L' }]
  ] as const)('%s %d', (name, canonical, typed, offer) => {
    const questions = ask(name, canonical, typed)
    expect(questions.map((question) => question.offer)).toEqual([offer])
    expect(questions[0]!.text).toContain(`${typed.value} ${typed.unit}`)
  })

  test('bounds as stated, for an adult and for anyone', () => {
    const asked = (name: CovariateName, canonical: number, person = woman) =>
      ask(name, canonical, undefined, person).length
    for (const [name, low, high] of [
      ['weight', 35, 200],
      ['height', 25, 220],
      ['serumCreatinine', 20 / 88.4, 1500 / 88.4],
      ['albumin', 10, 55]
    ] as const) {
      expect([asked(name, low), asked(name, high)]).toEqual([0, 0])
      expect([asked(name, low * 0.999), asked(name, high * 1.001)]).toEqual([1, 1])
    }
    expect([asked('weight', 0.4, child), asked('weight', 300, child)]).toEqual([0, 0])
    expect([asked('weight', 0.399, child), asked('weight', 301, child)]).toEqual([1, 1])
  })

  test('where no neighbouring unit would be plausible none is offered', () => {
    expect(ask('weight', 250, { value: 250, unit: 'kg' })).toEqual([
      { path: 'patient.weight', text: 'weight 250 kg is outside 35 to 200 kg, where adults are: is that right?' }
    ])
  })
})

describe('parameters against body weight', () => {
  function questions(name: string, stated: number, unit: string, canonical: { times: number; per: number }) {
    const model: DrugModel = {
      ...pw101,
      parameters: pw101.parameters.map((each) =>
        each.name === name
          ? { ...parameter(name, unit, [{ value: stated, factors: [] }]), toCanonical: canonical }
          : each
      )
    }
    const result = individual(model, woman, 'patient')
    if (!result.ok) throw new Error('issues')
    return questionParameters(model, woman, result.individual)
  }
  const one = { times: 1, per: 1 }

  test('nothing is asked of the invented drug', () => {
    expect(questions('Q', 9, 'L/h', one)).toEqual([])
    expect(questions('Q', 900, 'L/h', one)).toEqual([])
  })
  test('a clearance over 90 L/h/70 kg', () => {
    expect(questions('CL', 74, 'L/h', one)).toEqual([])
    expect(questions('CL', 76, 'L/h', one)).toEqual([
      {
        path: 'model.parameters.CL',
        text: 'CL 76 L/h is over 74.6 L/h for 58 kg (90 L/h/70 kg): did you mean 76 mL/min?',
        offer: { value: 76, unit: 'mL/min' }
      }
    ])
  })
  test('a volume outside 0.04 to 20 L/kg', () => {
    expect(questions('V1', 0.0174, 'mL', { times: 1, per: 1000 }).map(({ offer }) => offer)).toEqual([undefined])
    expect(questions('V1', 17.4, 'mL', { times: 1, per: 1000 }).map(({ offer }) => offer)).toEqual([
      { value: 17.4, unit: 'L' }
    ])
    expect(questions('V1', 17400, 'L', one).map(({ offer }) => offer)).toEqual([{ value: 17400, unit: 'mL' }])
  })
})

describe('a single dose over twice the largest studied', () => {
  const model: DrugModel = { ...pw101, studied: { description: 'invented', ranges: [], largestDose: 1000 } }
  const dose = (amount: number, typed: Typed) =>
    questionDose(model, { amount, typed, path: 'regimens[0].doses[0].amount' })

  test('is questioned, with the unit that would do', () => {
    expect(dose(2000, { value: 2, unit: 'g' })).toBeUndefined()
    expect(dose(750_000, { value: 750, unit: 'g' })).toEqual({
      path: 'regimens[0].doses[0].amount',
      text: 'the dose of 750 g is over twice the largest single dose studied, 1000 mg: did you mean 750 mg?',
      offer: { value: 750, unit: 'mg' }
    })
  })
  test('is not, where the source states no largest dose', () => {
    expect(questionDose(pw101, { amount: 1e9, typed: { value: 1e9, unit: 'mg' }, path: '' })).toBeUndefined()
  })
})
