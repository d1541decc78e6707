import { expect, test } from 'vitest'
import { decaysInto } from '../../src/numerics/decays'
import { expectWithin } from '../expectWithin'
import reference from '../reference/numerics/elementary.json'

const U = 2.220446049250313e-16

function decayed(exponent: number): number {
  const out = new Float64Array(1)
  decaysInto([exponent], out)
  return out[0]
}

test('e^-y of a list is within one rounding unit of 50 digits', () => {
  const falling = reference.cases.exp.filter(([x]) => x <= 0)
  expect(falling.length).toBeGreaterThan(30)
  const out = new Float64Array(falling.length)
  decaysInto(
    falling.map(([x]) => -x),
    out
  )
  for (const [i, [x, expected]] of falling.entries()) expectWithin(out[i], expected, { relative: U }, `e^${x}`)
})

test('nothing decays over no time, everything over a very long one, and values in between never rise', () => {
  expect(decayed(0)).toBe(1)
  expect(decayed(746)).toBe(0)
  expect(decayed(1e300)).toBe(0)
  expect(decayed(Number.POSITIVE_INFINITY)).toBe(0)
  // Below the smallest normal number: e^-740 is 4.189e-322 (mpmath), of which two digits are left.
  expectWithin(decayed(740), 4.2e-322, { absolute: 5e-324 })
  for (let y = 0; y < 740; y += 0.371) expect(decayed(y + 0.371)).toBeLessThan(decayed(y))
})

test('an exponent that is no number stays one', () => {
  expect(decayed(Number.NaN)).toBeNaN()
})
