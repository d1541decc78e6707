import { expect, test } from 'vitest'
import { NumericalFailure } from '../../src/numerics/numericalFailure'
import { rootBetween } from '../../src/numerics/root'
import { expectWithin } from '../expectWithin'

const U = 2.220446049250313e-16

/** Evaluations allowed and the root, from its closed form. */
const CASES: readonly [
  what: string,
  f: (x: number) => number,
  low: number,
  high: number,
  root: number,
  most: number
][] = [
  ['square root of 2', (x) => x * x - 2, 0, 2, Math.SQRT2, 15],
  ['fall of an exponential to 1e-5', (x) => Math.exp(-x) - 1e-5, 0, 50, 5 * Math.LN10, 20],
  ['root of high order, without a slope', (x) => (x - 1) ** 5, 0, 5, 1, 150],
  ['jump', (x) => (x < 3 ? -1 : 1), 0, 4, 3, 70],
  ['falling, ends given the other way round', (x) => 7 - x, 10, 0, 7, 10],
  ['far out', (x) => 1 / x - 1e-200, 1, 1e300, 1e200, 1200],
  ['next to 0', (x) => x - 1e-20, -1, 5, 1e-20, 200]
]

for (const [what, f, low, high, root, most] of CASES) {
  test(`a root is found to two rounding units: ${what}`, () => {
    let count = 0
    const counted = (x: number) => {
      count++
      return f(x)
    }
    expectWithin(rootBetween(counted, low, high), root, { relative: 2 * U })
    expect(count, 'evaluations').toBeLessThanOrEqual(most)
  })
}

test('an end where the function is exactly 0 is the root', () => {
  expect(rootBetween((x) => x - 2, 2, 5)).toBe(2)
  expect(rootBetween((x) => x - 5, 2, 5)).toBe(5)
})

test('equal signs at the ends and values that are no numbers are failures with a name', () => {
  expect(() => rootBetween((x) => x * x + 1, -1, 1)).toThrow(NumericalFailure)
  expect(() => rootBetween((x) => x * x + 1, -1, 1)).toThrow('no change of sign')
  expect(() => rootBetween((x) => Math.sqrt(x) - 1, -1, 4)).toThrow('not a number at -1')
})
