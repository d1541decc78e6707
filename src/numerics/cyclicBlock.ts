import { EigenvalueDecomposition, Matrix } from 'ml-matrix'
import type { Block, BlockEigenvalue } from './block'
import {
  COMPLEX_ONE,
  type Complex,
  complex,
  differenceOf,
  magnitude,
  quotientOf,
  solveInPlace,
  sumOf,
  unitMatrix
} from './doubleComplex'
import { exactly, rounded, ZERO } from './doubleDouble'

const MOST_ROUNDS = 60
/** A correction smaller than this, relatively, ends an eigenvalue's search. */
const SETTLED = 1e-28
/** Eigenvalues nearer than this, relatively, are a cluster: coefficients of their own would cancel in six digits or more. */
export const NEAR = 1e-6

/**
 * Eigenvalues of a block of any form, by a general routine in double precision and a simultaneous Newton search
 * [Ehrlich 1967, Aberth 1973] in twice the precision, which makes good what the routine lost to stiffness (METHODS 1.8).
 * Those that come to lie near each other, or do not settle, are reported as clustered.
 */
export function cyclicEigenvalues(block: Block): readonly BlockEigenvalue[] {
  const roots = distinctStarts(block)
  const settled = polish(block, roots)
  if (block.closed) setSmallestToZero(roots)
  return roots.flatMap((root, i) => {
    const near = roots.some((other, j) => j !== i && isNear(root, other))
    const clustered = near || !settled[i]
    const turning =
      !clustered && rounded(root.im) !== 0 && magnitude({ re: ZERO, im: root.im }) > 1e-12 * magnitude(root)
    if (turning && rounded(root.im) < 0) return []
    const frequency = turning ? root.im : ZERO
    return [{ rate: root.re, frequency, multiplicity: turning ? 2 : 1, clustered }]
  })
}

function isNear(a: Complex, b: Complex): boolean {
  return magnitude(differenceOf(a, b)) <= NEAR * Math.max(magnitude(a), magnitude(b))
}

/** Eigenvalues of -K in double precision, drawn apart where they coincide. */
function distinctStarts(block: Block): Complex[] {
  const n = block.members.length
  const matrix = new Matrix(n, n)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) matrix.set(i, j, i === j ? rounded(block.outflows[j]) : -block.between[i * n + j])
  }
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(matrix)
  const largest = Math.max(...block.outflows.map(rounded))
  const apart = 1e-9 * largest
  const starts: Complex[] = []
  for (let i = 0; i < n; i++) {
    let re = Number.isFinite(realEigenvalues[i]) ? realEigenvalues[i] : largest
    const im = Number.isFinite(imaginaryEigenvalues[i]) ? imaginaryEigenvalues[i] : 0
    while (starts.some((start) => rounded(start.re) === re && rounded(start.im) === im)) re += apart
    starts.push(complex(exactly(re), exactly(im)))
  }
  return starts
}

/** Improve all roots together, in place; says which of them settled. */
function polish(block: Block, roots: Complex[]): readonly boolean[] {
  const settled = roots.map(() => false)
  const smallest = 1e-30 * Math.max(...block.outflows.map(rounded))
  for (let round = 0; round < MOST_ROUNDS && settled.includes(false); round++) {
    for (let i = 0; i < roots.length; i++) {
      if (settled[i]) continue
      const correction = correctionOf(block, roots, i)
      roots[i] = differenceOf(roots[i], correction)
      settled[i] = magnitude(correction) <= Math.max(smallest, SETTLED * magnitude(roots[i]))
    }
  }
  return settled
}

/** p / p' at a root of p(z) = det(-K - z I), with the other roots divided out: w = N / (1 - N sum 1 / (z - z_j)), N = p / p'. */
function correctionOf(block: Block, roots: readonly Complex[], i: number): Complex {
  const z = roots[i]
  const inverse = solveInPlace(shifted(block, z), unitMatrix(roots.length))
  if (inverse === undefined) return complex(ZERO)
  let trace = complex(ZERO)
  for (let k = 0; k < roots.length; k++) trace = sumOf(trace, inverse[k][k])
  let others = complex(ZERO)
  for (let j = 0; j < roots.length; j++) {
    if (j !== i) others = sumOf(others, quotientOf(COMPLEX_ONE, differenceOf(z, roots[j])))
  }
  // p'/p is minus the trace of (-K - z I)^-1.
  const slope = differenceOf(complex(ZERO), trace)
  return quotientOf(COMPLEX_ONE, differenceOf(slope, others))
}

/** -K - z I, as rows. */
function shifted(block: Block, z: Complex): Complex[][] {
  const n = block.members.length
  return Array.from({ length: n }, (_, i) =>
    Array.from({ length: n }, (_, j) =>
      i === j ? differenceOf(complex(block.outflows[j]), z) : complex(exactly(-block.between[i * n + j]))
    )
  )
}

/** What never leaves has the eigenvalue 0, exactly. */
function setSmallestToZero(roots: Complex[]): void {
  let smallest = 0
  for (let i = 1; i < roots.length; i++) if (magnitude(roots[i]) < magnitude(roots[smallest])) smallest = i
  roots[smallest] = complex(ZERO)
}
