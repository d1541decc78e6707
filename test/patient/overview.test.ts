import { describe, expect, test } from 'vitest'
import type { DrugModel } from '../../src/patient/drugModel'
import { type Overview, type OverviewRow, overview } from '../../src/patient/overview'
import type { Person } from '../../src/patient/person'
import { expectWithin } from '../expectWithin'
import { kg, parameter, pw101, withNumbers, woman } from './pw101'

const used = (rows: readonly OverviewRow[]) =>
  rows.filter((row) => row.usedBy.length > 0).map((row) => [row.label, row.usedBy])
const all = (of: Overview) => Object.values(of).flat() as readonly OverviewRow[]

describe('everything side by side, the one that the model uses marked', () => {
  test('the PW-101 patient', () => {
    const view = overview(woman, pw101)
    expect(used(all(view))).toEqual([
      ['actual weight', ['V1', 'creatinine clearance']],
      ['Cockcroft-Gault, actual weight', ['CL']]
    ])
    expect(view.weights).toHaveLength(7)
    expect(view.surfaceAreas).toHaveLength(4)
    expect(view.creatinineClearances).toHaveLength(6)
    expect(view.indexedRates).toHaveLength(5)
    expect(view.absoluteRates).toHaveLength(6)
    expect(new Set(view.indexedRates.map((row) => row.covariate))).toEqual(new Set(['estimatedGfr']))
    expect(new Set(view.absoluteRates.map((row) => row.covariate))).toEqual(new Set(['absoluteGfr']))
  })

  test('a row that cannot be computed is there, with the reason', () => {
    const reasons = overview(woman, pw101).indexedRates.flatMap((row) =>
      row.estimate.kind === 'not computed' ? [[row.label, row.estimate.reason]] : []
    )
    expect(reasons).toEqual([
      ['CKD-EPI 2021 creatinine and cystatin C', 'needs cystatin C'],
      ['CKD-EPI 2012 cystatin C', 'needs cystatin C'],
      ['bedside Schwartz', 'bedside Schwartz holds from 1 to under 18 years']
    ])
  })

  test('a clearance given directly is the one that is marked', () => {
    expect(used(all(overview(withNumbers(woman, { creatinineClearance: 3 }), pw101)))).toEqual([
      ['actual weight', ['V1']],
      ['creatinine clearance, given directly', ['CL']]
    ])
  })

  const absolute: DrugModel = {
    ...pw101,
    covariates: { estimatedGfr: { equation: 'mdrd' }, bodySurfaceArea: { equation: 'haycock' } },
    parameters: [
      parameter('CL', 'L/h', [
        {
          value: 4,
          factors: [
            {
              kind: 'power',
              covariate: 'absoluteGfr',
              in: { unit: 'mL/min', times: 50, per: 3 },
              reference: 100,
              exponent: 1
            }
          ]
        }
      ]),
      parameter('V1', 'L', [
        { value: 0.4, factors: [{ kind: 'power', covariate: 'adjustedWeight', in: kg, reference: 1, exponent: 1 }] }
      ])
    ]
  }

  test('through an absolute rate its indexed one and the surface area, through an adjusted weight the ideal one', () => {
    expect(used(all(overview(woman, absolute)))).toEqual([
      ['ideal weight (Devine)', ['adjusted weight']],
      ['adjusted weight', ['V1']],
      ['body surface area (Haycock)', ['absolute GFR']],
      ['MDRD', ['absolute GFR']],
      ['MDRD, x BSA / 1.73 m2', ['CL']]
    ])
  })

  test('an indexed rate given directly is what is de-indexed', () => {
    const view = overview(withNumbers(woman, { estimatedGfr: 50, bodySurfaceArea: 1.73 }), absolute)
    expect(used([...view.indexedRates, ...view.absoluteRates])).toEqual([
      ['estimated GFR, given directly', ['absolute GFR']],
      ['estimated GFR given directly, x BSA / 1.73 m2', ['CL']]
    ])
    const row = view.absoluteRates[0]!.estimate
    expectWithin(row.kind === 'computed' ? row.value : Number.NaN, 3, { relative: 1e-12 })
  })

  test('under renal replacement no renal estimate is computed', () => {
    const dialysed: Person = { ...woman, renalReplacement: 'intermittent' }
    const view = overview(dialysed, pw101)
    const renal = [...view.creatinineClearances, ...view.indexedRates, ...view.absoluteRates]
    expect(renal.every((row) => row.estimate.kind === 'not computed')).toBe(true)
    expect(view.weights.some((row) => row.estimate.kind === 'computed')).toBe(true)
  })

  test("the model's own row carries its floor; the others are the plain equations", () => {
    const guarded: DrugModel = {
      ...pw101,
      covariates: { creatinineClearance: { equation: 'cockcroft-gault', weight: 'ideal', creatinineAtLeast: 3.2 } }
    }
    const ratio = (model: DrugModel, position: number) => {
      const estimate = overview(woman, model).creatinineClearances[position]!.estimate
      return estimate.kind === 'computed' ? estimate.value : Number.NaN
    }
    expectWithin(ratio(guarded, 1), ratio(pw101, 1) / 2, { relative: 1e-12 })
    expect(ratio(guarded, 0)).toBe(ratio(pw101, 0))
  })
})
