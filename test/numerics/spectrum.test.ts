import { expect, test } from 'vitest'
import { outflow, type Rates } from '../../src/numerics/rates'
import { spectrum } from '../../src/numerics/spectrum'
import { expectWithin } from '../expectWithin'
import reference from '../reference/numerics/spectrum.json'
import { compartments } from './compartments'

/** Every eigenvalue as often as it occurs, [real, imaginary], fastest first. */
function listed(rates: Rates): number[][] {
  return spectrum(rates)
    .flatMap(({ kind, rate, period, multiplicity }) => {
      if (kind !== 'complex' || period === undefined) return Array.from({ length: multiplicity }, () => [rate, 0])
      const frequency = (2 * Math.PI) / period
      return [
        [rate, frequency],
        [rate, -frequency]
      ]
    })
    .sort(([a, b], [c, d]) => c - a || d - b)
}

for (const model of reference.cases) {
  test(`eigenvalues are within 2 rounding units of 240 digits: ${model.name}`, () => {
    const got = listed(model)
    expect(got.length).toBe(model.size)
    for (const [k, [real, imaginary]] of model.eigenvalues.entries()) {
      const tolerance = { absolute: 4.5e-16 * Math.hypot(real, imaginary) }
      expectWithin(got[k][0], real, tolerance, `real part of eigenvalue ${k}`)
      expectWithin(got[k][1], imaginary, tolerance, `imaginary part of eigenvalue ${k}`)
    }
  })
}

test('a compartment that drug does not come back to has exactly its outflow as eigenvalue', () => {
  const rates = compartments(
    4,
    [
      [0, 1, 0.9],
      [1, 2, 0.5],
      [2, 1, 0.2],
      [1, 3, 0.07]
    ],
    [
      [1, 0.1],
      [3, 0.3]
    ]
  )
  const found = spectrum(rates).map(({ rate }) => rate)
  expect(found).toContain(outflow(rates, 0))
  expect(found).toContain(outflow(rates, 3))
})

// The slow eigenvalue of a closed exchange with a way out e that is ever smaller is e x the share of the drug that is in
// the compartment with the way out: first order in e / rates, and exact to 15 digits from 1e-16 on.
test.each([1e-17, 1e-20, 1e-30, 1e-100, 1e-300])('a way out of %s beside exchanges near 1 keeps its digits', (out) => {
  const two = compartments(
    2,
    [
      [0, 1, 0.45],
      [1, 0, 0.25]
    ],
    [[0, out]]
  )
  expectWithin(spectrum(two)[1].rate, (out * 0.25) / 0.7, { relative: 1e-14 })
  const chain = compartments(
    3,
    [
      [0, 1, 0.5],
      [1, 0, 0.25],
      [1, 2, 3],
      [2, 1, 1.5]
    ],
    [[2, out]]
  )
  // Amounts at rest 1 : 2 : 4.
  expectWithin(spectrum(chain)[2].rate, (out * 4) / 7, { relative: 1e-14 })
})

test('two compartments: K15, Bourne, A First Course in Pharmacokinetics, self-test "micro to macro"', () => {
  const [fast, slow] = spectrum(
    compartments(
      2,
      [
        [0, 1, 2.07],
        [1, 0, 1.52]
      ],
      [[0, 0.16]]
    )
  )
  expectWithin(fast.rate, 3.68398452177, { relative: 1e-9 })
  expectWithin(slow.rate, 0.0660154782309, { relative: 1e-9 })
  expectWithin(fast.halfLife ?? Number.NaN, 0.188151490991, { relative: 1e-9 })
  expectWithin(slow.halfLife ?? Number.NaN, 10.4997676171, { relative: 1e-9 })
})

/** [volumes, clearances], eigenvalues and half-lives as published for three-compartment models with given volumes. */
const THREE = [
  {
    what: 'K17, remifentanil, simple model: Minto et al 1997, Anesthesiology 86:10',
    rates: mammillary([4.98, 9.01, 6.54], [2.46, 1.69, 0.065]),
    rate: [0.932028632777, 0.102197145281, 0.00966796940069],
    halfLife: [0.743697303048, 6.78245149269, 71.6952186992]
  },
  {
    what: 'K20, remifentanil, reference individual: Eleveld et al 2017, Anesthesiology 126:1005',
    rates: mammillary([5.81, 8.82, 5.03], [2.58, 1.72, 0.124]),
    rate: [0.850197605876, 0.107568941645, 0.0233426609554],
    halfLife: [0.815277737516, 6.44374826007, 29.6944372317]
  },
  {
    what: 'K21, propofol: Marsh et al 1991, Br J Anaesth 67:41 (source quoted from memory)',
    rates: compartments(
      3,
      [
        [0, 1, 0.112],
        [1, 0, 0.055],
        [0, 2, 0.0419],
        [2, 0, 0.0033]
      ],
      [[0, 0.119]]
    ),
    rate: [0.298650292638, 0.030151110064, 0.00239859729778],
    halfLife: [2.32093253429, 22.9891098235, 288.9802224]
  }
]

function mammillary(volumes: readonly number[], clearances: readonly number[]): Rates {
  const [v1, v2, v3] = volumes
  const [cl, q2, q3] = clearances
  return compartments(
    3,
    [
      [0, 1, q2 / v1],
      [1, 0, q2 / v2],
      [0, 2, q3 / v1],
      [2, 0, q3 / v3]
    ],
    [[0, cl / v1]]
  )
}

for (const { what, rates, rate, halfLife } of THREE) {
  test(`three compartments: ${what}`, () => {
    const found = spectrum(rates)
    for (const k of [0, 1, 2]) {
      expectWithin(found[k].rate, rate[k], { relative: 1e-9 }, `eigenvalue ${k}`)
      expectWithin(found[k].halfLife ?? Number.NaN, halfLife[k], { relative: 1e-9 }, `half-life ${k}`)
    }
  })

  test(`K18, Vieta identities of the tri-exponential (Bourne, ch. 7.7) hold to 1e-12: ${what}`, () => {
    const [a, b, c] = spectrum(rates).map((each) => each.rate)
    const [k21, k12, k31, k13] = [rates.between[1], rates.between[3], rates.between[2], rates.between[6]]
    const kel = rates.out[0]
    expectWithin(a + b + c, kel + k12 + k21 + k13 + k31, { relative: 1e-12 }, 'sum')
    const pairs = kel * k21 + kel * k31 + k13 * k21 + k12 * k31 + k21 * k31
    expectWithin(a * b + b * c + c * a, pairs, { relative: 1e-12 }, 'sum of pairs')
    expectWithin(a * b * c, kel * k21 * k31, { relative: 1e-12 }, 'product')
  })
}

test('equal rates on one path are said to be defective, on separate paths they are not', () => {
  const inRow = spectrum(
    compartments(
      4,
      [
        [0, 1, 2],
        [1, 2, 2],
        [2, 3, 2]
      ],
      [[3, 0.1]]
    )
  )
  expect(inRow.map(({ kind, multiplicity }) => [kind, multiplicity])).toEqual([
    ['defective', 3],
    ['real', 1]
  ])
  const sideBySide = spectrum(
    compartments(
      3,
      [
        [0, 2, 2],
        [1, 2, 2]
      ],
      [[2, 0.1]]
    )
  )
  expect(sideBySide.map(({ kind, multiplicity }) => [kind, multiplicity])).toEqual([
    ['real', 2],
    ['real', 1]
  ])
})

test('nearly equal rates on one path are said to be clustered, a thousandth apart they are real', () => {
  const kinds = (ka: number) => spectrum(compartments(2, [[0, 1, ka]], [[1, 0.3]])).map(({ kind }) => kind)
  expect(kinds(0.3 * (1 + 1e-9))).toEqual(['clustered', 'clustered'])
  expect(kinds(0.3003)).toEqual(['real', 'real'])
})

test('peripheral compartments that are alike share an eigenvalue that is real, not defective', () => {
  const alike = compartments(
    4,
    [
      [0, 1, 1],
      [1, 0, 0.5],
      [0, 2, 2],
      [2, 0, 0.5],
      [0, 3, 3],
      [3, 0, 0.5]
    ],
    [[0, 0.1]]
  )
  const found = spectrum(alike)
  expect(found.map(({ kind, multiplicity }) => [kind, multiplicity])).toEqual([
    ['real', 1],
    ['real', 2],
    ['real', 1]
  ])
  expect(found[1].rate).toBe(0.5)
})

test('a ring of equal rates swings: its eigenvalues lie on a circle', () => {
  // K = k (P - I), P a cyclic permutation: eigenvalues k (e^(2 pi i j / n) - 1).
  const found = spectrum(
    compartments(
      4,
      [
        [0, 1, 2],
        [1, 2, 2],
        [2, 3, 2],
        [3, 0, 2]
      ],
      []
    )
  )
  expect(found.map(({ kind, multiplicity }) => [kind, multiplicity])).toEqual([
    ['real', 1],
    ['complex', 2],
    ['real', 1]
  ])
  const [fast, pair, never] = found
  expectWithin(fast.rate, 4, { relative: 1e-15 })
  expectWithin(pair.rate, 2, { relative: 1e-15 })
  expectWithin(pair.period ?? Number.NaN, Math.PI, { relative: 1e-15 })
  expectWithin(pair.halfLife ?? Number.NaN, Math.LN2 / 2, { relative: 1e-15 })
  expect(never.rate).toBe(0)
  expect(never.halfLife).toBeUndefined()
})
