import { describe, expect, test } from 'vitest'
import { convert, fromCanonical, ratioOf, toCanonical } from '../../src/units/quantity'
import { KINDS, type Kind, unitsOf } from '../../src/units/unitTable'
import { expectWithin } from '../expectWithin'
import reference from '../reference/units/ucum.json'

const KIND_OF: Readonly<Record<string, Kind>> = {
  'L/h': 'clearance',
  'ug/kg/min': 'doseRate',
  wk: 'age',
  a: 'age',
  mo: 'age',
  '/min': 'rateConstant',
  'mg/L': 'concentration'
}

describe('conversion', () => {
  test.each(reference.conversions as [string, number, string, number][])(
    '%s %d is in %s %d',
    (from, value, to, expected) => {
      const kind = KIND_OF[from]
      expect(kind, `a kind for ${from}`).toBeDefined()
      // Two roundings at most, one to the canonical unit and one from it.
      expectWithin(convert(kind!, { value, unit: from }, to), expected, { relative: 4.5e-16 })
    }
  )

  test('every minute of a day is exactly a sixtieth of its number in hours', () => {
    for (let m = 0; m <= 1440; m++) expect(toCanonical('time', { value: m, unit: 'min' })).toBe(m / 60)
  })

  test('72 h are 3 d and 30 d are 720 h, to the bit', () => {
    expect(convert('time', { value: 72, unit: 'h' }, 'd')).toBe(3)
    expect(convert('time', { value: 30, unit: 'd' }, 'h')).toBe(720)
  })

  test('a value in the unit asked for is the value itself', () => {
    expect(convert('time', { value: 0.1, unit: 's' }, 's')).toBe(0.1)
  })

  test('there and back is the same within two roundings, for every unit', () => {
    for (const kind of KINDS) {
      for (const { code } of unitsOf(kind)) {
        const there = toCanonical(kind, { value: 0.7, unit: code }, 452.3)
        expectWithin(fromCanonical(kind, there, code, 452.3).value, 0.7, { relative: 1e-15 }, `${kind}: ${code}`)
      }
    }
  })

  test('1 mmol of a drug of 452.3 g/mol is 452.3 mg', () => {
    expect(toCanonical('amount', { value: 1, unit: 'mmol' }, 452.3)).toBe(452.3)
    expect(toCanonical('concentration', { value: 1000, unit: 'nmol/L' }, 452.3)).toBeCloseTo(0.4523, 15)
  })

  test('a unit of another kind, and moles without a molar mass, are mistakes of the caller', () => {
    expect(() => toCanonical('amount', { value: 1, unit: 'kg' })).toThrow(RangeError)
    expect(() => ratioOf('concentration', 'nmol/L')).toThrow(RangeError)
  })
})
