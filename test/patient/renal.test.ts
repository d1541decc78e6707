import { describe, expect, test } from 'vitest'
import type { GfrEquation } from '../../src/patient/drugModel'
import type { Person } from '../../src/patient/person'
import { creatinineClearanceOf, GFR_EQUATIONS, indexedGfrOf, maturedGfrOf } from '../../src/patient/renalEstimates'
import {
  absoluteFrom,
  bedsideSchwartz,
  ckdEpi2012Cystatin,
  ckdEpi2021Creatinine,
  ckdEpi2021CreatinineCystatin,
  cockcroftGault,
  litresPerHour,
  mdrd
} from '../../src/patient/renalFunction'
import { maturedFiltration, renalMaturation } from '../../src/patient/renalMaturation'
import { expectWithin } from '../expectWithin'
import { withNumbers, woman } from './pw101'

// Where a number is said to be recomputed: from the published coefficients, with independent code in arbitrary precision.
const NINE = { relative: 1e-9 }

describe('Cockcroft DW, Gault MH 1976 Nephron 16:31, worked examples, recomputed', () => {
  // Printed as 74.1, 87.5, 7.64, 80.9 (the last cut off, not rounded: 81.0).
  test.each([
    [60, 80, 1.2, 'male', 74.0740740741],
    [50, 70, 1, 'male', 87.5],
    [30, 50, 10, 'male', 7.63888888889],
    [45, 65, 0.9, 'female', 80.9992283951],
    [80, 55, 1.4, 'female', 27.8273809524]
  ] as const)('%d years, %d kg, %d mg/dL, %s', (ageYears, weight, serumCreatinineMgPerDl, sex, expected) => {
    expectWithin(cockcroftGault({ sex, ageYears, weight, serumCreatinineMgPerDl }).mlPerMin, expected, NINE)
  })
})

describe('Inker LA et al 2021 NEJM 385:1737, creatinine, recomputed', () => {
  test.each([
    [1.0, 50, 'male', 91.6914786098],
    [0.8, 30, 'male', 122.097333223],
    [0.6, 40, 'female', 116.295451622],
    [2.0, 70, 'male', 35.242996729],
    [1.5, 65, 'female', 38.433638476],
    [0.7, 20, 'female', 126.896225729],
    [0.9, 20, 'male', 125.3915274]
  ] as const)('%d mg/dL, %d years, %s', (serumCreatinineMgPerDl, ageYears, sex, expected) => {
    expectWithin(ckdEpi2021Creatinine({ sex, ageYears, serumCreatinineMgPerDl }).mlPerMinPer173, expected, NINE)
  })
})

describe('Inker LA et al 2021 NEJM 385:1737, creatinine and cystatin C (coefficients from memory)', () => {
  // At both hinges every power is 1, so that only the leading number, the age and the sex remain.
  test('at the hinges, 135 x 0.9961^age x 0.963 in women', () => {
    const man = { sex: 'male', ageYears: 1, serumCreatinineMgPerDl: 0.9, cystatinCMgPerL: 0.8 } as const
    expectWithin(ckdEpi2021CreatinineCystatin(man).mlPerMinPer173, 135 * 0.9961, { relative: 1e-14 })
    const woman = { ...man, sex: 'female', serumCreatinineMgPerDl: 0.7 } as const
    expectWithin(ckdEpi2021CreatinineCystatin(woman).mlPerMinPer173, 135 * 0.9961 * 0.963, { relative: 1e-14 })
  })

  // Doubling a value above the hinge or halving it below multiplies by a power of 2 alone.
  test.each([
    ['male', 1.8, 1.6, -0.544, -0.778],
    ['male', 0.45, 0.4, 0.144, 0.323],
    ['female', 1.4, 1.6, -0.544, -0.778],
    ['female', 0.35, 0.4, 0.219, 0.323]
  ] as const)('%s, creatinine %d, cystatin C %d', (sex, creatinine, cystatin, byCreatinine, byCystatin) => {
    const hinge = { sex, ageYears: 50, serumCreatinineMgPerDl: sex === 'male' ? 0.9 : 0.7, cystatinCMgPerL: 0.8 }
    const base = ckdEpi2021CreatinineCystatin(hinge).mlPerMinPer173
    const one = ckdEpi2021CreatinineCystatin({ ...hinge, serumCreatinineMgPerDl: creatinine }).mlPerMinPer173
    const other = ckdEpi2021CreatinineCystatin({ ...hinge, cystatinCMgPerL: cystatin }).mlPerMinPer173
    expectWithin(one / base, 2 ** byCreatinine, { relative: 1e-13 })
    expectWithin(other / base, 2 ** byCystatin, { relative: 1e-13 })
  })
})

describe('Inker LA et al 2012 NEJM 367:20, cystatin C, recomputed', () => {
  test.each([
    [0.8, 50, 'male', 108.84752594],
    [0.7, 40, 'female', 112.870142101],
    [1.2, 60, 'male', 61.0327240888],
    [2.0, 75, 'female', 27.1802598001]
  ] as const)('%d mg/L, %d years, %s', (cystatinCMgPerL, ageYears, sex, expected) => {
    expectWithin(ckdEpi2012Cystatin({ sex, ageYears, cystatinCMgPerL }).mlPerMinPer173, expected, NINE)
  })
})

describe('Levey AS et al 2006 Ann Intern Med 145:247, recomputed', () => {
  test.each([
    [1.0, 50, 'male', 79.0946553183],
    [1.5, 65, 'female', 34.8506778515],
    [3.0, 40, 'male', 23.2928131295]
  ] as const)('MDRD, %d mg/dL, %d years, %s', (serumCreatinineMgPerDl, ageYears, sex, expected) => {
    expectWithin(mdrd({ sex, ageYears, serumCreatinineMgPerDl }).mlPerMinPer173, expected, NINE)
  })
})

describe('Schwartz GJ et al 2009 JASN 20:629, recomputed', () => {
  test.each([
    [100, 0.5, 82.6],
    [140, 1.3, 44.4769230769],
    [165, 0.8, 85.18125]
  ])('bedside, %d cm, %d mg/dL', (height, serumCreatinineMgPerDl, expected) => {
    expectWithin(bedsideSchwartz({ height, serumCreatinineMgPerDl }).mlPerMinPer173, expected, NINE)
  })
})

describe('Rhodin MM et al 2009 Pediatr Nephrol 24:67, recomputed (121.2 mL/min/70 kg from memory)', () => {
  test.each([
    [28, 0.140484533538],
    [32, 0.204685222575],
    [40, 0.354669410711],
    [47.7, 0.5],
    [52, 0.57284344897],
    [66.1, 0.751981239648],
    [92.18, 0.903780987209],
    [144.36, 0.977358916895]
  ])('maturation at %d weeks', (weeks, expected) => expectWithin(renalMaturation(weeks), expected, NINE))

  test.each([
    [3.5, 40, 4.54520898404],
    [10, 92.18, 25.4531941785]
  ])('filtration at %d kg and %d weeks', (weight, postmenstrualAgeWeeks, expected) => {
    expectWithin(maturedFiltration({ weight, postmenstrualAgeWeeks }).mlPerMin, expected, NINE)
  })
})

describe('indexed and absolute rates are kinds of their own', () => {
  test('only a body surface area leads from the one to the other', () => {
    const indexed = bedsideSchwartz({ height: 100, serumCreatinineMgPerDl: 0.5 })
    expect(indexed.kind).toBe('indexed')
    const absolute = absoluteFrom(indexed, 0.865)
    expect(absolute.kind).toBe('absolute')
    expectWithin(absolute.mlPerMin, 41.3, { relative: 1e-12 })
    expectWithin(litresPerHour(absolute), 2.478, { relative: 1e-12 })
    // @ts-expect-error an indexed rate is no flow
    expect(Number.isNaN(litresPerHour(indexed))).toBe(true)
  })
})

const everything: Person = withNumbers(woman, { cystatinC: 1.2, height: 120 })
const at = (age: number) => withNumbers(everything, { age })

describe('age limits: outside them nothing is computed, and the reason is said', () => {
  const adult: readonly GfrEquation[] = GFR_EQUATIONS.filter((equation) => equation !== 'bedside-schwartz')

  test.each(adult)('%s from 18 years', (equation) => {
    expect(indexedGfrOf(equation, at(18)).kind).toBe('computed')
    const young = indexedGfrOf(equation, at(17.99))
    expect(young.kind === 'not computed' && young.reason).toMatch(/holds from 18 years$/)
    const infant = indexedGfrOf(equation, at(0.5))
    expect(infant.kind === 'not computed' && infant.reason).toContain('under 1 year renal maturation only')
  })

  test('Cockcroft-Gault from 18 years', () => {
    expect(creatinineClearanceOf(at(18), { weight: 'actual' }).kind).toBe('computed')
    expect(creatinineClearanceOf(at(17.99), { weight: 'actual' }).kind).toBe('not computed')
  })

  test('bedside Schwartz from 1 to under 18 years', () => {
    expect(indexedGfrOf('bedside-schwartz', at(1)).kind).toBe('computed')
    expect(indexedGfrOf('bedside-schwartz', at(17.99)).kind).toBe('computed')
    const adult = indexedGfrOf('bedside-schwartz', at(18))
    expect(adult.kind === 'not computed' && adult.reason).toContain('from 1 to under 18 years')
    const infant = indexedGfrOf('bedside-schwartz', at(0.99))
    expect(infant.kind === 'not computed' && infant.reason).toContain('renal maturation only')
  })

  test('bedside Schwartz near either end says that it is at its edge', () => {
    const notes = (age: number) => {
      const estimate = indexedGfrOf('bedside-schwartz', at(age))
      return estimate.kind === 'computed' ? estimate.notes.map((note) => note.kind) : ['not computed']
    }
    expect(notes(1.5)).toEqual(['edge'])
    expect(notes(8)).toEqual([])
    expect(notes(17)).toEqual(['edge'])
  })

  test('a limit reached only but for a rounding is reached', () => {
    expect(indexedGfrOf('mdrd', at(18 * (1 - 1e-12))).kind).toBe('computed')
  })

  test('a postnatal age is an age: a neonate does not get an adult equation for want of one', () => {
    const neonate = withNumbers(everything, { age: undefined, postnatalAge: 3 / 365.25 })
    const estimate = indexedGfrOf('ckd-epi-2021-creatinine', neonate)
    expect(estimate.kind === 'not computed' && estimate.reason).toContain('renal maturation only')
  })

  test('an age over 140 years gives no clearance below 0', () => {
    expect(creatinineClearanceOf(at(141), { weight: 'actual' }).kind).toBe('not computed')
  })
})

describe('what stands beside a renal estimate', () => {
  test('a floor on creatinine is applied and said', () => {
    const low = withNumbers(woman, { serumCreatinine: 0.5 })
    const floored = creatinineClearanceOf(low, { weight: 'actual', creatinineAtLeast: 0.8 })
    const at08 = creatinineClearanceOf(withNumbers(woman, { serumCreatinine: 0.8 }), { weight: 'actual' })
    if (floored.kind !== 'computed' || at08.kind !== 'computed') throw new Error('not computed')
    expect(floored.value).toBe(at08.value)
    expect(floored.notes).toEqual([
      { kind: 'guard', text: 'serum creatinine 0.5 mg/dL is raised to 0.8 mg/dL, the floor of this model' }
    ])
  })

  test('a ceiling is applied and said', () => {
    const held = creatinineClearanceOf(withNumbers(woman, { serumCreatinine: 0.6, age: 30 }), {
      weight: 'actual',
      atMost: 4.2
    })
    if (held.kind !== 'computed') throw new Error('not computed')
    expect(held.value).toBe(4.2)
    expect(held.notes.map((note) => note.text)).toEqual([
      'the computed 126 mL/min is held at 70 mL/min, the ceiling of this model'
    ])
  })

  test('a creatinine below 40 umol/L is questioned as little muscle', () => {
    const estimate = indexedGfrOf('ckd-epi-2021-creatinine', withNumbers(woman, { serumCreatinine: 0.45 }))
    expect(estimate.kind === 'computed' && estimate.notes.map((note) => note.kind)).toEqual(['edge'])
  })

  test('under renal replacement nothing is computed', () => {
    const dialysed: Person = { ...everything, renalReplacement: 'continuous' }
    for (const equation of GFR_EQUATIONS) expect(indexedGfrOf(equation, dialysed).kind).toBe('not computed')
    expect(creatinineClearanceOf(dialysed, { weight: 'actual' }).kind).toBe('not computed')
    expect(maturedGfrOf(dialysed).kind).toBe('not computed')
  })

  test('what is needed is named', () => {
    const estimate = creatinineClearanceOf(withNumbers(woman, { serumCreatinine: undefined, height: undefined }), {
      weight: 'ideal'
    })
    expect(estimate).toEqual({
      kind: 'not computed',
      reason: 'needs serum creatinine; ideal weight needs height',
      missing: ['serumCreatinine', 'height']
    })
  })
})
