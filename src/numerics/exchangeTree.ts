import type { Block, BlockEigenvalue } from './block'
import { type DoubleDouble, exactly, minus, over, plus, rounded, times, ZERO } from './doubleDouble'

/** A halving of this bracket changes no digit of a number of twice the working precision. */
const NARROWEST = 1e-31
/** Eigenvalues nearer than this, relatively, are one: far below the rounding of the rates, far above that of the count. */
const ONE = 1e-27

/** A member, the member before it on the way from the first, and the rates between the two. */
interface Branch {
  readonly member: number
  readonly parent: number
  /** From the member before it, and back to it. */
  readonly there: DoubleDouble
  readonly back: DoubleDouble
}

/**
 * The branches of a block whose exchanges form a tree: every connection goes both ways and there is no other way round
 * (central and peripheral compartments, chains of tissues). Undefined for any other block.
 */
export function branchesOf(block: Block): readonly Branch[] | undefined {
  const n = block.members.length
  const rate = (i: number, j: number) => block.between[i * n + j]
  let arrows = 0
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      if (!(rate(i, j) > 0)) continue
      if (!(rate(j, i) > 0)) return undefined
      arrows++
    }
  }
  if (arrows !== 2 * (n - 1)) return undefined
  const branches: Branch[] = [{ member: 0, parent: -1, there: ZERO, back: ZERO }]
  for (const { member, parent } of branches) {
    for (let i = 0; i < n; i++) {
      if (i === parent || !(rate(i, member) > 0)) continue
      branches.push({ member: i, parent: member, there: exactly(rate(i, member)), back: exactly(rate(member, i)) })
    }
  }
  return branches
}

/**
 * Eigenvalues of a tree of exchanges, ascending. Such a block is symmetric after a change of scale, so that they are
 * real, none is defective, and elimination from the leaves counts those below any number (METHODS 1.8); each is closed
 * in by halving to about 31 digits.
 */
export function treeEigenvalues(block: Block, branches: readonly Branch[]): readonly BlockEigenvalue[] {
  const n = block.members.length
  const found: BlockEigenvalue[] = []
  // Every column of K has its outflow on the diagonal and at most its outflow beside it.
  const top = exactly(2.1 * Math.max(...block.outflows.map(rounded)))
  let below = 0
  let low = ZERO
  if (block.closed) {
    found.push({ rate: ZERO, frequency: ZERO, multiplicity: 1, clustered: false })
    below = 1
  }
  while (below < n) {
    let high = top
    while (rounded(minus(high, low)) > NARROWEST * rounded(high)) {
      const middle = times(plus(low, high), exactly(0.5))
      // Near the smallest numbers there is nothing between the two long before their digits are used up.
      if (!(rounded(minus(middle, low)) > 0 && rounded(minus(high, middle)) > 0)) break
      if (countBelow(block, branches, middle) > below) high = middle
      else low = middle
    }
    const beyond = times(high, plus(exactly(1), exactly(ONE)))
    const multiplicity = Math.max(1, countBelow(block, branches, beyond) - below)
    found.push({ rate: high, frequency: ZERO, multiplicity, clustered: false })
    below += multiplicity
    low = beyond
  }
  return found
}

/**
 * How many eigenvalues lie below x: negative pivots of the elimination from the leaves to the first member. What is kept
 * of a pivot is its excess over the rate back to the parent, so that a slow way out keeps its digits beside fast exchanges.
 */
function countBelow(block: Block, branches: readonly Branch[], x: DoubleDouble): number {
  const excess = block.beyond.map((beyond) => minus(beyond, x))
  let count = 0
  for (let b = branches.length - 1; b >= 0; b--) {
    const { member, parent, there, back } = branches[b]
    let pivot = plus(back, excess[member])
    // A pivot of exactly 0 stands for one just above: x is taken a hair lower.
    if (rounded(pivot) === 0) pivot = exactly(1e-40 * rounded(x))
    if (rounded(pivot) < 0) count++
    if (parent >= 0) excess[parent] = plus(excess[parent], over(times(there, excess[member]), pivot))
  }
  return count
}
