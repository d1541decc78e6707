import { expect, test } from 'vitest'
import { acos, cos, exp, expm1, ln, log1p, pow } from '../../src/numerics/elementary'
import { expectWithin } from '../expectWithin'
import reference from '../reference/numerics/elementary.json'

const U = 2.220446049250313e-16
const FUNCTIONS = { exp, expm1, ln, log1p, cos, acos } as const

for (const [name, f] of Object.entries(FUNCTIONS)) {
  test(`${name} is within one rounding unit of 50 digits`, () => {
    const cases: readonly number[][] = reference.cases[name as keyof typeof FUNCTIONS]
    expect(cases.length).toBeGreaterThan(50)
    for (const [x, expected] of cases) expectWithin(f(x), expected, { relative: U }, `${name}(${x})`)
  })
}

test('pow is within one rounding unit of 50 digits', () => {
  for (const [x, expected, y] of reference.cases.pow)
    expectWithin(pow(x, y), expected, { relative: U }, `pow(${x}, ${y})`)
})
