import { describe, expect, test } from 'vitest'
import { readTypedQuantity } from '../../src/units/typedQuantity'

const DOSE = { value: 750, unit: 'mg' }

describe('a value, its unit or both, typed over a quantity', () => {
  test.each([
    ['1.2 g', { value: 1.2, unit: 'g' }],
    ['1.2g', { value: 1.2, unit: 'g' }],
    ['  850 ', { value: 850, unit: 'mg' }],
    ['.5', { value: 0.5, unit: 'mg' }],
    ['1e3', { value: 1000, unit: 'mg' }],
    ['ug', { value: 750, unit: 'ug' }],
    ['20 mg/kg', { value: 20, unit: 'mg/kg' }],
    ['-3', { value: -3, unit: 'mg' }]
  ])('%j is understood', (text, quantity) => {
    expect(readTypedQuantity(text, 'dose', DOSE)).toEqual({ ok: true, quantity })
  })

  test.each([
    ['850 mcg', { value: 850, unit: 'ug' }],
    ['850 µg', { value: 850, unit: 'ug' }],
    ['1,2 g', { value: 1.2, unit: 'g' }]
  ])('%j is answered with what is near, and not taken', (text, offer) => {
    expect(readTypedQuantity(text, 'dose', DOSE)).toMatchObject({ ok: false, offer })
  })

  test('850 mcg is answered with "ug?"', () => {
    expect(readTypedQuantity('850 mcg', 'dose', DOSE)).toMatchObject({ message: 'ug?' })
  })

  test.each(['', 'a lot', '12 mL', '1,200,000', '12..5', '1e999', '7 50'])('%j is refused, with no offer', (text) => {
    const reading = readTypedQuantity(text, 'dose', DOSE)
    expect(reading.ok).toBe(false)
    expect(reading).not.toHaveProperty('offer')
    expect((reading as { message: string }).message).toMatch(/\w/)
  })

  test('kinds decide: a body weight is no amount, an indexed rate no absolute one', () => {
    expect(readTypedQuantity('58 mg', 'bodyWeight', { value: 58, unit: 'kg' }).ok).toBe(false)
    expect(readTypedQuantity('30 mL/min/{1.73_m2}', 'filtration', { value: 30, unit: 'mL/min' }).ok).toBe(false)
  })
})
