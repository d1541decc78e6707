import { describe, expect, test } from 'vitest'
import { RODAS5P } from '../../src/numerics/rodas5p'
import { expectWithin } from '../expectWithin'

const { gamma, A, C, nodes, timeWeights, H } = RODAS5P
const STAGES = 8

/** Numbers x 10^40 as integers: the conditions are differences of numbers near 100 and must not lose digits themselves. */
const ONE = 10n ** 40n
type Matrix = readonly (readonly bigint[])[]

/** A coefficient as printed. */
function exact(x: number): bigint {
  const [whole, fraction = ''] = String(Math.abs(x)).split('.')
  const size = BigInt(whole + fraction.padEnd(40, '0'))
  return x < 0 ? -size : size
}

/** Lower triangular 8 x 8 from rows that end before their diagonal. */
function full(rows: readonly (readonly number[])[], diagonal: bigint): Matrix {
  return Array.from({ length: STAGES }, (_, i) =>
    Array.from({ length: STAGES }, (_, j) => (i === j ? diagonal : exact(rows[i]?.[j] ?? 0)))
  )
}

function dot(a: readonly bigint[], b: readonly bigint[]): bigint {
  return a.reduce((sum, entry, i) => sum + entry * b[i], 0n) / ONE
}

function times(a: Matrix, b: Matrix): Matrix {
  return a.map((row) =>
    b[0].map((_, j) =>
      dot(
        row,
        b.map((other) => other[j])
      )
    )
  )
}

/** Inverse of a lower triangular matrix by forward substitution. */
function inverse(lower: Matrix): Matrix {
  const out = lower.map((row) => row.map(() => 0n))
  for (let j = 0; j < STAGES; j++) {
    for (let i = j; i < STAGES; i++) {
      let sum = i === j ? ONE * ONE : 0n
      for (let k = j; k < i; k++) sum -= lower[i][k] * out[k][j]
      out[i][j] = sum / lower[i][i]
    }
  }
  return out
}

/**
 * The untransformed method: k_i = h f(y + sum alpha_ij k_j) + h J sum gamma_ij k_j, with Gamma^-1 = diag(1/gamma) - C and
 * alpha = A Gamma, weights (A_8, 1) Gamma [Hairer & Wanner 1996, IV.7].
 */
const Gamma = inverse(
  full(C, 0n).map((row, i) => row.map((entry, j) => (i === j ? (ONE * ONE) / exact(gamma) : -entry)))
)
const alpha = times(full(A, 0n), Gamma)
const weights = times([[...A[7].map(exact), ONE]], Gamma)[0]
const beta = alpha.map((row, i) => row.map((entry, j) => entry + Gamma[i][j]))
const rowSum = (row: readonly bigint[]): bigint => row.reduce((sum, entry) => sum + entry, 0n)
const number = (x: bigint): number => Number(x) / 1e40

describe('the coefficients of Rodas5P', () => {
  test('the nodes are the row sums of alpha and the time weights those of Gamma', () => {
    for (let i = 0; i < STAGES; i++) {
      expectWithin(number(rowSum(alpha[i])), nodes[i], { absolute: 1e-14 }, `node ${i + 1}`)
      expectWithin(number(rowSum(Gamma[i])), timeWeights[i], { absolute: 1e-14 }, `time weight ${i + 1}`)
    }
  })

  test('the weights sum to 1', () => {
    expectWithin(number(rowSum(weights)), 1, { absolute: 1e-14 })
  })

  test('the method is stiffly accurate: its weights are the last row of alpha + Gamma', () => {
    for (let i = 0; i < STAGES; i++)
      expectWithin(number(weights[i]), number(beta[7][i]), { absolute: 1e-14 }, `weight ${i + 1}`)
  })

  // Order conditions in the form of Hairer & Wanner 1996, IV.7, table 7.1.
  test('the conditions of order 2 to 4 hold, and those of order 5 on nodes and on the longest chain', () => {
    const alphaSums = alpha.map(rowSum)
    const betaSums = beta.map(rowSum)
    const power = (p: number): bigint[] =>
      alphaSums.map((node) =>
        Array<bigint>(p)
          .fill(node)
          .reduce((product, factor) => (product * factor) / ONE, ONE)
      )
    const applied = (v: readonly bigint[]): bigint[] => beta.map((row) => dot(row, v))
    const holds = (v: readonly bigint[], value: number, what: string): void =>
      expectWithin(number(dot(weights, v)), value, { absolute: 1e-14 }, what)
    holds(betaSums, 1 / 2, 'order 2')
    holds(power(2), 1 / 3, 'order 3, nodes')
    holds(applied(betaSums), 1 / 6, 'order 3, chain')
    holds(power(3), 1 / 4, 'order 4, nodes')
    holds(applied(power(2)), 1 / 12, 'order 4, nodes in a chain')
    holds(applied(applied(betaSums)), 1 / 24, 'order 4, chain')
    holds(power(4), 1 / 5, 'order 5, nodes')
    holds(applied(applied(applied(betaSums))), 1 / 120, 'order 5, chain')
  })

  test('the last three stages stand at the end of the step', () => {
    expect(nodes.slice(5)).toEqual([1, 1, 1])
    expect(A[6]).toEqual([...A[5], 1])
    expect(A[7]).toEqual([...A[6], 1])
  })

  // On y' = 1 every y(t + theta h) must be y + theta h, so that each D_r vanishes. The coefficients, up to 80, are printed
  // to 1e-15 of their size, which leaves 1.3e-13.
  test('the continuous extension is exact on a straight line', () => {
    for (const row of H) {
      expectWithin(number(rowSum(times([row.map(exact)], Gamma)[0])), 0, { absolute: 2e-13 })
    }
  })
})
