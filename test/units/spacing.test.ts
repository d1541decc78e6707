import { describe, expect, test } from 'vitest'
import { ratioOf } from '../../src/units/quantity'
import { multipleOf } from '../../src/units/spacing'

const every = (value: number, unit: string) => ({ value, ...ratioOf('time', unit) })

describe('multiples of a spacing', () => {
  test('are those of the number typed, in the unit typed', () => {
    // In binary floating point 3 x 0.1 is 0.30000000000000004.
    expect(multipleOf(every(0.1, 'h'), 3)).toBe(0.3)
    expect(multipleOf(every(0.1, 'd'), 3)).toBe(0.3 * 24)
  })

  test('of minutes fall on the hours to the bit', () => {
    for (let k = 1; k <= 1000; k++) expect(multipleOf(every(20, 'min'), 3 * k)).toBe(k)
    for (let k = 1; k <= 1000; k++) expect(multipleOf(every(10, 's'), 360 * k)).toBe(k)
  })
})
