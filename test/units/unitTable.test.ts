import { UcumLhcUtils } from '@lhncbc/ucum-lhc'
import { describe, expect, test } from 'vitest'
import { canonicalUnit, ratioOf } from '../../src/units/quantity'
import { KINDS, type Kind, type Unit, unitOf, unitsOf } from '../../src/units/unitTable'
import { expectWithin } from '../expectWithin'
import reference from '../reference/units/ucum.json'

// The reference implementation of UCUM by the US National Library of Medicine.
const ucum = UcumLhcUtils.getInstance()
const MOLAR_MASS = 452.3

/** What one of the unit is in the canonical unit of its kind, by the reference implementation. */
function byReference(unit: Unit, kind: Kind): number {
  const to = unit.reckonedPer === 'dose' ? canonicalUnit(kind) : perPatient(canonicalUnit(kind), unit.reckonedPer)
  const converted = ucum.convertUnitTo(unit.code, 1, to, unit.moles === 0 ? {} : { molecularWeight: MOLAR_MASS })
  if (typeof converted.toVal !== 'number') throw new Error(`${unit.code} to ${to}: ${converted.msg.join('; ')}`)
  return converted.toVal
}

/** `mg` -> `mg/kg`, `mg/h` -> `mg/kg/h`. */
function perPatient(code: string, basis: string): string {
  const [amount, time] = code.split('/')
  return time === undefined ? `${amount}/${basis}` : `${amount}/${basis}/${time}`
}

describe('the table of units', () => {
  test.each(KINDS)('every code of the kind %s is valid UCUM', (kind) => {
    for (const { code } of unitsOf(kind)) expect(ucum.validateUnitString(code).status, code).toBe('valid')
  })

  test.each(KINDS.filter((kind) => kind !== 'creatinine' && kind !== 'association'))(
    'every unit of the kind %s has the ratio that UCUM gives it',
    (kind) => {
      // Twelve digits: the reference implementation carries its factors in floating point.
      for (const unit of unitsOf(kind)) {
        const { times, per } = ratioOf(kind, unit.code, MOLAR_MASS)
        expectWithin(times / per, byReference(unit, kind), { relative: 1e-12 }, `${kind}: ${unit.code}`)
      }
    }
  )

  test('second-order rate constants by mass or by moles have the ratios that UCUM gives them among themselves', () => {
    for (const unit of unitsOf('association')) {
      const to = unit.moles === 0 ? 'L/mg/h' : 'L/mmol/h'
      const converted = ucum.convertUnitTo(unit.code, 1, to).toVal
      const { times, per } = ratioOf('association', unit.code, 1)
      expectWithin(times / per, converted ?? Number.NaN, { relative: 1e-12 }, unit.code)
    }
  })

  test('a second-order rate constant per nmol becomes one per mg by the molar mass', () => {
    // 1 nmol of a substance of 500 g/mol is 500e-6 mg: 0.3 L/nmol/h = 600 L/mg/h.
    const { times, per } = ratioOf('association', 'L/nmol/h', 500)
    expect((0.3 * times) / per).toBe(600)
  })

  test('creatinine is 88.4 umol/L for 1 mg/dL, whatever the drug', () => {
    const { times, per } = ratioOf('creatinine', 'umol/L')
    expect(88.4 * times).toBe(per)
  })

  test('ratios are of whole numbers', () => {
    for (const kind of KINDS) {
      for (const { code, ratio } of unitsOf(kind)) {
        expect(Number.isSafeInteger(ratio.times) && Number.isSafeInteger(ratio.per), code).toBe(true)
      }
    }
  })

  test('codes that are not UCUM are in no kind', () => {
    for (const code of reference.invalid) for (const kind of KINDS) expect(unitOf(kind, code)).toBeUndefined()
  })

  test('the canonical unit of each kind converts to itself', () => {
    for (const kind of KINDS) expect(ratioOf(kind, canonicalUnit(kind))).toEqual({ times: 1, per: 1 })
  })
})

describe('kinds, not dimensions, decide', () => {
  const separate: readonly (readonly [Kind, string, Kind])[] = [
    ['amount', 'mg', 'bodyWeight'],
    ['bodyWeight', 'kg', 'amount'],
    ['age', 'a', 'time'],
    ['age', 'mo', 'time'],
    ['time', 'h', 'age'],
    ['indexedFiltration', 'mL/min/{1.73_m2}', 'filtration'],
    ['filtration', 'mL/min', 'indexedFiltration'],
    ['dose', 'mg/kg', 'amount'],
    ['doseRate', 'mg/kg/h', 'amountRate'],
    ['creatinine', 'umol/L', 'massConcentration']
  ]
  test.each(separate)('%s takes %s and %s does not', (kind, code, other) => {
    expect(unitOf(kind, code)).toBeDefined()
    expect(unitOf(other, code)).toBeUndefined()
  })
})
