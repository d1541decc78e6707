import { describe, expect, test } from 'vitest'
import { isUnitOfActivity, nearestUnit } from '../../src/units/nearestUnit'
import { KINDS, type Kind, unitOf, unitsOf } from '../../src/units/unitTable'

const meant: readonly (readonly [Kind, string, string])[] = [
  ['amount', 'mcg', 'ug'],
  ['amount', 'µg', 'ug'],
  ['amount', 'μg', 'ug'],
  ['amount', 'MG', 'mg'],
  ['amount', 'milligrams', 'mg'],
  ['dose', 'mcg/kg', 'ug/kg'],
  ['dose', 'mg/m²', 'mg/m2'],
  ['dose', 'mg/m^2', 'mg/m2'],
  ['doseRate', 'mcg/kg/min', 'ug/kg/min'],
  ['doseRate', 'mg/hr', 'mg/h'],
  ['time', 'hr', 'h'],
  ['time', 'hours', 'h'],
  ['time', 'mins', 'min'],
  ['time', 'days', 'd'],
  ['time', 'weeks', 'wk'],
  ['age', 'years', 'a'],
  ['age', 'yr', 'a'],
  ['age', 'months', 'mo'],
  ['bodyWeight', 'kgs', 'kg'],
  ['concentration', 'mg/l', 'mg/L'],
  ['concentration', 'mcg/mL', 'ug/mL'],
  ['concentration', 'µg/ml', 'ug/mL'],
  ['concentration', 'uM', 'umol/L'],
  ['concentration', 'nM', 'nmol/L'],
  ['creatinine', 'µmol/l', 'umol/L'],
  ['filtration', 'ml/min', 'mL/min'],
  ['indexedFiltration', 'mL/min/1.73m2', 'mL/min/{1.73_m2}'],
  ['indexedFiltration', 'ml/min/1.73 m²', 'mL/min/{1.73_m2}'],
  ['indexedFiltration', 'mL/min/{1.73m2}', 'mL/min/{1.73_m2}'],
  ['clearance', 'l/hr', 'L/h'],
  ['clearance', 'litres/hour', 'L/h'],
  ['rateConstant', '1/h', '/h'],
  ['rateConstant', 'h-1', '/h'],
  ['rateConstant', 'h^-1', '/h'],
  ['rateConstant', 'min⁻¹', '/min'],
  ['rateConstant', 'per hour', '/h'],
  ['area', 'h*ng/mL', 'h.ng/mL'],
  ['area', 'mg*h/L', 'mg.h/L'],
  ['area', 'mg·h/l', 'mg.h/L'],
  ['fraction', 'percent', '%']
]

describe('a spelling that is not UCUM', () => {
  test.each(meant)('%s in %s is meant as %s', (kind, typed, unit) => {
    expect(nearestUnit(kind, typed)).toBe(unit)
  })

  test('offers nothing of another size, only another spelling', () => {
    for (const [kind, typed] of [
      ['amount', 'pg'],
      ['amount', 'kg'],
      ['amount', 'mgg'],
      ['time', 'ms'],
      ['time', 'mo'],
      ['concentration', 'mg/hL'],
      ['filtration', 'mL/min/1.73m2'],
      ['indexedFiltration', 'mL/min'],
      ['bodyWeight', 'lb'],
      // Names that every object has.
      ['amount', 'constructor'],
      ['amount', 'toString/hasOwnProperty']
    ] as const) {
      expect(nearestUnit(kind, typed), typed).toBeUndefined()
    }
  })

  test('offers a unit of the table itself, for every unit in capitals', () => {
    for (const kind of KINDS) {
      for (const { code } of unitsOf(kind)) {
        const nearest = nearestUnit(kind, code.toUpperCase())
        expect(nearest !== undefined && unitOf(kind, nearest) !== undefined, `${kind}: ${code}`).toBe(true)
      }
    }
  })
})

describe('units of activity', () => {
  test.each([
    '[iU]',
    '[IU]',
    'IU',
    'iu',
    'U',
    'mU',
    'kIU',
    'k[iU]',
    '[iU]/kg',
    'IU/L',
    'units',
    'units/kg',
    'U/kg/h',
    "[USP'U]",
    'MBq'
  ])('%s is one', (typed) => expect(isUnitOfActivity(typed)).toBe(true))

  test('no unit of the table is one', () => {
    for (const kind of KINDS) for (const { code } of unitsOf(kind)) expect(isUnitOfActivity(code), code).toBe(false)
  })
})
