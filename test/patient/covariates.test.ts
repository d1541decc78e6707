import { describe, expect, test } from 'vitest'
import { covariateOf } from '../../src/patient/covariates'
import type { DrugModel } from '../../src/patient/drugModel'
import { individual } from '../../src/patient/individual'
import { inputsOf } from '../../src/patient/needs'
import type { ComputedCovariate, CovariateName, Person } from '../../src/patient/person'
import { expectWithin } from '../expectWithin'
import { kg, parameter, pw101, withNumbers, woman } from './pw101'

function known(name: CovariateName, person: Person, drugModel: DrugModel) {
  const covariate = covariateOf(name, person, drugModel)
  if (covariate.kind === 'not computed') throw new Error(covariate.reason)
  return covariate
}

const choosing = (covariates: DrugModel['covariates']): DrugModel => ({ ...pw101, covariates })

describe('how a covariate was obtained', () => {
  test('typed, computed or derived', () => {
    expect(known('weight', woman, pw101).obtained).toEqual({ kind: 'typed' })
    expect(known('sex', woman, pw101).value).toBe('female')
    expect(known('bodySurfaceArea', woman, pw101).obtained).toEqual({ kind: 'computed', by: 'Mosteller' })
    const neonate = withNumbers(woman, { age: undefined, gestationalAge: 30, postnatalAge: 7 / 365.25 })
    expect(known('postmenstrualAge', neonate, pw101)).toMatchObject({
      value: 31,
      obtained: { kind: 'derived', from: 'postmenstrual age = gestational + postnatal age' }
    })
  })

  test('a value given directly wins over the computed one, and both are said', () => {
    const person = withNumbers(woman, { creatinineClearance: 2.4 })
    const clearance = known('creatinineClearance', person, pw101)
    expect(clearance.value).toBe(2.4)
    expect(clearance.obtained.kind).toBe('given')
    expect(clearance.notes).toEqual([
      {
        kind: 'instead',
        text: 'creatinine clearance 40 mL/min was given directly and is used; Cockcroft-Gault with actual weight would give 29.5 mL/min'
      }
    ])
  })

  test('a value given directly is not held at the ceiling of the model, and that is said', () => {
    const model = choosing({ creatinineClearance: { equation: 'cockcroft-gault', weight: 'actual', atMost: 7.2 } })
    const clearance = known('creatinineClearance', withNumbers(woman, { creatinineClearance: 9 }), model)
    expect(clearance.value).toBe(9)
    expect(clearance.notes.map((note) => note.kind)).toEqual(['instead', 'guard'])
  })

  test('the equation is the one that the model names', () => {
    const model = choosing({
      estimatedGfr: { equation: 'mdrd' },
      bodySurfaceArea: { equation: 'du-bois' },
      leanWeight: { equation: 'james' }
    })
    // James and Du Bois by their published coefficients; MDRD Levey 2006.
    expectWithin(Number(known('leanWeight', woman, model).value), 1.07 * 58 - 148 * (58 / 162) ** 2, {
      relative: 1e-12
    })
    const area = 0.007184 * 58 ** 0.425 * 162 ** 0.725
    expectWithin(Number(known('bodySurfaceArea', woman, model).value), area, { relative: 1e-12 })
    const indexed = 175 * 1.6 ** -1.154 * 71 ** -0.203 * 0.742
    expectWithin(Number(known('estimatedGfr', woman, model).value), indexed, { relative: 1e-12 })
    expectWithin(Number(known('absoluteGfr', woman, model).value), (indexed * area * 0.06) / 1.73, { relative: 1e-12 })
    expect(covariateOf('creatinineClearance', woman, model)).toMatchObject({
      kind: 'not computed',
      reason: 'the model names no equation for it'
    })
  })

  test('an absolute rate follows from an indexed one given directly, also under renal replacement', () => {
    const person: Person = { ...withNumbers(woman, { estimatedGfr: 10 }), renalReplacement: 'intermittent' }
    const absolute = known('absoluteGfr', person, pw101)
    expectWithin(Number(absolute.value), (10 * Math.sqrt((58 * 162) / 3600) * 0.06) / 1.73, { relative: 1e-12 })
  })
})

describe('a model with covariates of its own', () => {
  const model: DrugModel = {
    ...pw101,
    declared: {
      sepsis: { kind: 'category', categories: ['yes', 'no'], asks: 'does the patient have sepsis?' },
      daysAfterInjury: { kind: 'number', unit: 'd' }
    },
    parameters: pw101.parameters.map((each) =>
      each.name === 'V1'
        ? parameter('V1', 'L', [
            { value: 25, factors: [{ kind: 'category', covariate: 'sepsis', values: { yes: 1.6, no: 1 } }] }
          ])
        : each
    )
  }
  const made = (person: Person) => individual(model, person, 'patient')

  test('takes the category that is typed', () => {
    const result = made({ ...woman, categories: { sepsis: 'yes' } })
    expect(result.ok && result.individual.parameters.get('V1')!.value).toBe(40)
  })

  test('asks for one that is missing, and puts none in its place', () => {
    expect(made(woman)).toEqual({
      ok: false,
      issues: [
        {
          path: 'patient.sepsis',
          message: 'sepsis is missing: V1 needs it (does the patient have sepsis?); one of yes, no'
        }
      ]
    })
  })

  test('refuses an unknown one', () => {
    expect(made({ ...woman, categories: { sepsis: 'unknown' } })).toEqual({
      ok: false,
      issues: [{ path: 'patient.sepsis', message: 'V1 has no value for sepsis "unknown"; known are yes, no' }]
    })
  })
})

describe('inputs of a computed covariate', () => {
  // The law behind "a change to an input of a covariate that was given directly": whatever changes the value is an input.
  const everything: Person = withNumbers(woman, { cystatinC: 1.1, albumin: 35 })
  const models: readonly (readonly [ComputedCovariate, DrugModel['covariates']])[] = [
    ['bodyMassIndex', {}],
    ['bodySurfaceArea', {}],
    ['idealWeight', {}],
    ['adjustedWeight', {}],
    ['leanWeight', {}],
    ...(['actual', 'ideal', 'adjusted', 'lean', 'actualIfBelowIdeal', 'adjustedAbove120PercentIdeal'] as const).map(
      (weight) => ['creatinineClearance', { creatinineClearance: { equation: 'cockcroft-gault', weight } }] as const
    ),
    ...(
      ['ckd-epi-2021-creatinine', 'ckd-epi-2021-creatinine-cystatin', 'ckd-epi-2012-cystatin', 'mdrd'] as const
    ).flatMap((equation) => [
      ['estimatedGfr', { estimatedGfr: { equation } }] as const,
      ['absoluteGfr', { estimatedGfr: { equation } }] as const
    ])
  ]
  test.each(models)('%s, %j: changing a number that is no input changes nothing', (name, covariates) => {
    const model = choosing(covariates)
    const inputs = inputsOf(name, model)
    const value = (person: Person) => Number(known(name, person, model).value)
    for (const input of ['age', 'weight', 'height', 'serumCreatinine', 'cystatinC', 'albumin']) {
      const changed = withNumbers(everything, { [input]: everything.numbers[input]! * 1.3 })
      if (!inputs.includes(input)) expect(value(changed), input).toBe(value(everything))
    }
    for (const input of inputs) {
      if (everything.numbers[input] === undefined) continue
      const changes = [0.5, 1.3, 2].map((times) =>
        covariateOf(name, withNumbers(everything, { [input]: everything.numbers[input]! * times }), model)
      )
      // Some factor moves the value: a weight word may look at the actual weight only beyond the ideal one.
      const moved = changes.some((each) => each.kind === 'not computed' || each.value !== value(everything))
      expect(moved, `${name} and ${input}`).toBe(true)
    }
  })
})

test('a weight power per kg is the plain product', () => {
  const model: DrugModel = {
    ...pw101,
    parameters: pw101.parameters.map((each) =>
      each.name === 'V2'
        ? parameter('V2', 'L', [
            { value: 0.6, factors: [{ kind: 'power', covariate: 'weight', in: kg, reference: 1, exponent: 1 }] }
          ])
        : each
    )
  }
  const result = individual(model, woman, 'patient')
  expect(result.ok && result.individual.parameters.get('V2')!.value).toBe(0.6 * 58)
})
