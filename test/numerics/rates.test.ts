import { expect, test } from 'vitest'
import { checkRates, outflow, reachedFrom } from '../../src/numerics/rates'
import { compartments } from './compartments'

const rates = compartments(
  4,
  [
    [0, 1, 0.9],
    [1, 2, 0.5],
    [2, 1, 0.2]
  ],
  [
    [1, 0.1],
    [3, 0.4]
  ]
)

test('the outflow of a compartment is all that leaves it, to others and out of the body', () => {
  expect([0, 1, 2, 3].map((j) => outflow(rates, j))).toEqual([0.9, 0.6, 0.2, 0.4])
})

test('drug reaches what lies downstream of where it goes in, and nothing else', () => {
  expect(reachedFrom(rates, [1, 0, 0, 0])).toEqual([true, true, true, false])
  expect(reachedFrom(rates, [0, 0, 5, 0])).toEqual([false, true, true, false])
  expect(reachedFrom(rates, [0, 0, 0, 0])).toEqual([false, false, false, false])
})

test('rates that are no rates are refused, and the message says which', () => {
  expect(() => checkRates(rates)).not.toThrow()
  expect(() => checkRates({ ...rates, size: 3 })).toThrow('rates between 3 compartments: got 16 numbers')
  expect(() => checkRates({ ...rates, size: 0 })).toThrow(RangeError)
  expect(() => checkRates({ ...rates, out: [0, 0, 0] })).toThrow('got 3 numbers')
  expect(() => checkRates({ ...rates, out: [0, Number.POSITIVE_INFINITY, 0, 0] })).toThrow(
    'rate out of compartment 1 is Infinity'
  )
  const negative = Array.from(rates.between, (rate, p) => (p === 4 ? -1 : rate))
  expect(() => checkRates({ ...rates, between: negative })).toThrow('rate from compartment 0 to 1 is -1')
})
