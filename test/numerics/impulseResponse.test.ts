import { expect, test } from 'vitest'
import { impulseResponse } from '../../src/numerics/impulseResponse'
import { expectWithin } from '../expectWithin'
import reference from '../reference/numerics/spectrum.json'
import { compartments } from './compartments'

for (const model of reference.cases) {
  for (const response of model.responses) {
    const { terms } = response
    test(`coefficients are within 1e-13 of the largest, against 240 digits: ${model.name}, from ${response.from}`, () => {
      const found = impulseResponse(model, response.weights, response.from)
      if (terms === null) {
        expect(found.some(({ coefficient }) => coefficient === undefined)).toBe(true)
        return
      }
      const largest = Math.max(...terms.map(({ coefficient }) => Math.hypot(coefficient[0], coefficient[1])))
      for (const { eigenvalue, coefficient, why } of found) {
        if (coefficient === undefined) {
          expect(why).toBeTruthy()
          continue
        }
        const nearest = terms.reduce((a, b) => (distance(b, eigenvalue.rate) < distance(a, eigenvalue.rate) ? b : a))
        expectWithin(coefficient, nearest.coefficient[0], { absolute: 1e-13 * largest }, `at ${eigenvalue.rate}`)
      }
    })
  }
}

function distance(term: { readonly rate: readonly number[] }, rate: number): number {
  return Math.hypot(term.rate[0] - rate, term.rate[1])
}

test('K15: coefficients of two compartments after 250 mg into 42.5 L (Bourne, self-test "micro to macro")', () => {
  const rates = compartments(
    2,
    [
      [0, 1, 2.07],
      [1, 0, 1.52]
    ],
    [[0, 0.16]]
  )
  const [a, b] = impulseResponse(rates, [1 / 42.5, 0], 0).map(({ coefficient }) => 250 * (coefficient ?? Number.NaN))
  expectWithin(a, 3.51836087128, { relative: 1e-9 })
  expectWithin(b, 2.3639920699, { relative: 1e-9 })
})

test('K17: shares of the level at once after a bolus, remifentanil (Minto et al 1997, Anesthesiology 86:10)', () => {
  const [v1, v2, v3, cl, q2, q3] = [4.98, 9.01, 6.54, 2.46, 1.69, 0.065]
  const rates = compartments(
    3,
    [
      [0, 1, q2 / v1],
      [1, 0, q2 / v2],
      [0, 2, q3 / v1],
      [2, 0, q3 / v3]
    ],
    [[0, cl / v1]]
  )
  const found = impulseResponse(rates, [1 / v1, 0, 0], 0)
  const expected = [0.896857557452, 0.102577819727, 0.000564622821888]
  // Printed as fractions of the level at once after the bolus: V1 x coefficient.
  for (const k of [0, 1, 2]) expectWithin(v1 * (found[k].coefficient ?? Number.NaN), expected[k], { relative: 1e-9 })
  expectWithin(
    found.reduce((sum, { shareOfArea }) => sum + (shareOfArea ?? Number.NaN), 0),
    1,
    { relative: 1e-14 }
  )
})

test('one compartment with absorption: C = ka / (V (ka - k)), negative for the absorption', () => {
  const found = impulseResponse(compartments(2, [[0, 1, 0.9]], [[1, 0.1]]), [0, 1 / 20], 0)
  expectWithin(found[0].coefficient ?? Number.NaN, -0.9 / (20 * 0.8), { relative: 1e-14 })
  expectWithin(found[1].coefficient ?? Number.NaN, 0.9 / (20 * 0.8), { relative: 1e-14 })
})

test('only what lies on the path is listed: neither the depot after a bolus nor a metabolite is', () => {
  const rates = compartments(
    3,
    [
      [0, 1, 0.9],
      [1, 2, 0.05]
    ],
    [
      [1, 0.1],
      [2, 0.4]
    ]
  )
  expect(impulseResponse(rates, [0, 1, 0], 1).map(({ eigenvalue }) => eigenvalue.rate)).toEqual([0.15000000000000002])
  expect(impulseResponse(rates, [1, 0, 0], 1)).toEqual([])
})

test('where there is no coefficient of its own, none is given and the reason is', () => {
  const near = impulseResponse(compartments(2, [[0, 1, 0.3 * (1 + 1e-9)]], [[1, 0.3]]), [0, 1], 0)
  expect(near.map(({ coefficient }) => coefficient)).toEqual([undefined, undefined])
  expect(near[0].why).toContain('so near')
  const [transit, last] = impulseResponse(
    compartments(
      3,
      [
        [0, 1, 2],
        [1, 2, 2]
      ],
      [[2, 0.1]]
    ),
    [0, 0, 1],
    0
  )
  expect(transit.coefficient).toBeUndefined()
  expect(transit.why).toContain('powers of time')
  expectWithin(last.coefficient ?? Number.NaN, (2 / 1.9) ** 2, { relative: 1e-14 })
  const ring = impulseResponse(
    compartments(
      3,
      [
        [0, 1, 1],
        [1, 2, 1],
        [2, 0, 1]
      ],
      [[0, 0.1]]
    ),
    [1, 0, 0],
    0
  )
  expect(ring.find(({ eigenvalue }) => eigenvalue.kind === 'complex')?.why).toContain('swings')
})

test('where part of the drug never leaves there are coefficients but no shares of the area', () => {
  const found = impulseResponse(
    compartments(
      2,
      [
        [0, 1, 1],
        [1, 0, 0.5]
      ],
      []
    ),
    [1, 0],
    0
  )
  expectWithin(found[0].coefficient ?? Number.NaN, 2 / 3, { relative: 1e-14 })
  expectWithin(found[1].coefficient ?? Number.NaN, 1 / 3, { relative: 1e-14 })
  expect(found.map(({ shareOfArea }) => shareOfArea)).toEqual([undefined, undefined])
  expect(found[0].why).toContain('never leaves')
})
