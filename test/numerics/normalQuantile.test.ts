import { expect, test } from 'vitest'
import { normalQuantile } from '../../src/numerics/normalQuantile'
import { expectWithin } from '../expectWithin'
import reference from '../reference/numerics/normal-quantile.json'

test('R08: the three values that Wichura 1988 (AS 241) prints, to 1e-15 (source quoted from memory)', () => {
  expectWithin(normalQuantile(0.25), -0.6744897501960817, { relative: 1e-15 })
  expectWithin(normalQuantile(0.001), -3.090232306167814, { relative: 1e-15 })
  expectWithin(normalQuantile(1e-20), -9.262340089798407, { relative: 1e-15 })
})

test('quantiles from 1e-300 to a hair under 1 agree with 50 digits', () => {
  for (const [p, expected] of reference.cases) {
    expectWithin(normalQuantile(p), expected, { relative: reference.tolerance }, `quantile at ${p}`)
  }
})

test('the ends are infinite, the middle is 0, the two sides mirror each other', () => {
  expect(normalQuantile(0)).toBe(Number.NEGATIVE_INFINITY)
  expect(normalQuantile(1)).toBe(Number.POSITIVE_INFINITY)
  expect(normalQuantile(0.5)).toBe(0)
  // 0.0625 and 0.9375 are exact, so that the mirror is too.
  expect(normalQuantile(0.9375)).toBe(-normalQuantile(0.0625))
})

test('what is no probability is refused', () => {
  for (const p of [-1e-9, 1.000001, Number.NaN]) expect(() => normalQuantile(p)).toThrow(RangeError)
})
