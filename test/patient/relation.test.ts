import { describe, expect, test } from 'vitest'
import type { Covariate } from '../../src/patient/covariates'
import type { Factor, Term } from '../../src/patient/drugModel'
import { equation } from '../../src/patient/equation'
import { factorValue, toCanonical, typicalValue } from '../../src/patient/relation'
import { expectWithin } from '../expectWithin'
import { kg, mlPerMin, pw101 } from './pw101'

const known = (values: Readonly<Record<string, number | string>>) =>
  new Map(
    Object.entries(values).map(([name, value]): [string, Covariate] => [
      name,
      { kind: 'known', name, value, obtained: { kind: 'typed' }, notes: [] }
    ])
  )

const years = { unit: 'a', times: 1, per: 1 }
const weeks = { unit: 'wk', times: 1, per: 1 }

const power: Factor = { kind: 'power', covariate: 'weight', in: kg, reference: 70, exponent: 0.75 }
const linear: Factor = { kind: 'linear', covariate: 'age', in: years, reference: 40, slope: -0.01 }
const exponential: Factor = { kind: 'exponential', covariate: 'age', in: years, reference: 40, rate: 0.02 }
const maturation: Factor = { kind: 'maturation', covariate: 'postmenstrualAge', in: weeks, half: 47.7, exponent: 3.4 }
const category: Factor = { kind: 'category', covariate: 'sex', values: { female: 0.8, male: 1 } }
const step: Factor = { kind: 'step', covariate: 'age', in: years, at: 18, below: 0.5, from: 1 }

describe('allometry', () => {
  // Anderson BJ, Holford NHG 2008 Annu Rev Pharmacol Toxicol 48:303; recomputed with independent code.
  test.each([
    [3.5, 0.105737126344],
    [10, 0.232368080243],
    [20, 0.390794971391],
    [35, 0.594603557501],
    [100, 1.30670174176]
  ])('(%d kg / 70 kg)^0.75', (weight, expected) => {
    expectWithin(factorValue(power, known({ weight })), expected, { absolute: 1e-11 })
  })

  test('the half-life scale at 35 kg', () => {
    expectWithin(factorValue({ ...power, exponent: 0.25 }, known({ weight: 35 })), 0.840896415254, { absolute: 1e-11 })
  })
})

describe('every kind of factor', () => {
  test('linear: 1 + slope (x - reference)', () => {
    expectWithin(factorValue(linear, known({ age: 65 })), 0.75, { relative: 1e-15 })
  })
  test('exponential: e^(rate (x - reference))', () => {
    // e^0.5.
    expectWithin(factorValue(exponential, known({ age: 65 })), 1.6487212707001282, { relative: 1e-15 })
  })
  test('maturation: half at its half, 0 at 0, 1 at a very large age', () => {
    expectWithin(factorValue(maturation, known({ postmenstrualAge: 47.7 })), 0.5, { relative: 1e-15 })
    // Rhodin MM et al 2009 Pediatr Nephrol 24:67, recomputed with independent code.
    expectWithin(factorValue(maturation, known({ postmenstrualAge: 40 })), 0.354669410711, { relative: 1e-9 })
    expect(factorValue(maturation, known({ postmenstrualAge: 0 }))).toBe(0)
    expect(factorValue({ ...maturation, exponent: 200 }, known({ postmenstrualAge: 1e6 }))).toBe(1)
  })
  test('category: the number of the category; an unknown one throws', () => {
    expect(factorValue(category, known({ sex: 'female' }))).toBe(0.8)
    expect(() => factorValue(category, known({ sex: 'constructor' }))).toThrow(RangeError)
  })
  test('step: `from` applies at the bound and above', () => {
    expect(factorValue(step, known({ age: 17.999 }))).toBe(0.5)
    expect(factorValue(step, known({ age: 18 }))).toBe(1)
    expect(factorValue(step, known({ age: 18 * (1 - 1e-15) }))).toBe(1)
    expect(factorValue(step, known({ age: 70 }))).toBe(1)
  })
  test('a covariate that is missing throws, and never counts as 0', () => {
    expect(() => factorValue(power, known({}))).toThrow(RangeError)
  })
})

describe('a relation is a sum of products', () => {
  const terms: readonly Term[] = [
    { value: 0.35, factors: [] },
    {
      value: 3.9,
      factors: [{ kind: 'power', covariate: 'creatinineClearance', in: mlPerMin, reference: 100, exponent: 1 }]
    },
    { value: -0.0874, factors: [linear, category] }
  ]
  test('with negative coefficients and a covariate brought to the unit of its reference', () => {
    const covariates = known({ creatinineClearance: 3, age: 65, sex: 'female' })
    expectWithin(typicalValue({ typical: terms }, covariates), 0.35 + 3.9 * 0.5 - 0.0874 * 0.75 * 0.8, {
      relative: 1e-14
    })
  })
  test('and goes to the canonical unit by an exact ratio', () => {
    expect(toCanonical({ toCanonical: { times: 3, per: 50 } }, 100)).toBe(6)
  })
})

describe('a relation prints as an equation', () => {
  test('of the invented drug', () => {
    expect(pw101.parameters.slice(0, 3).map((parameter) => equation(parameter))).toEqual([
      'CL = 0.35 + 3.9 x (CLcr / 100 mL/min)',
      'V1 = 21 x (weight / 70 kg)',
      'Q = 9'
    ])
  })
  test.each([
    [[{ value: 5, factors: [power] }], 'X = 5 x (weight / 70 kg)^0.75'],
    [[{ value: 1, factors: [linear] }], 'X = (1 - 0.01 x (age - 40 years))'],
    [[{ value: 2, factors: [exponential] }], 'X = 2 x exp(0.02 x (age - 40 years))'],
    [
      [{ value: 2, factors: [{ ...exponential, reference: 0, rate: -1 / 3 }] }],
      'X = 2 x exp(-0.333333 x (age in years))'
    ],
    [
      [
        {
          value: 2,
          factors: [{ ...power, covariate: 'daysAfterInjury', in: { ...kg, unit: 'd' }, reference: 1, exponent: 1 }]
        }
      ],
      'X = 2 x (daysAfterInjury / 1 day)'
    ],
    [[{ value: 2, factors: [maturation] }], 'X = 2 x (PMA^3.4 / (PMA^3.4 + (47.7 weeks)^3.4))'],
    [[{ value: 2, factors: [category, step] }], 'X = 2 x (sex: female 0.8, male 1) x (0.5 if age < 18 years, else 1)'],
    [
      [
        { value: -1, factors: [] },
        { value: -0.5, factors: [power] }
      ],
      'X = -1 - 0.5 x (weight / 70 kg)^0.75'
    ]
  ] as const)('%#: as a reader would write it', (typical, expected) => {
    expect(equation({ name: 'X', typical })).toBe(expected)
  })
})
