import { type Block, blocksOf } from './block'
import { complex, solveInPlace } from './doubleComplex'
import { type DoubleDouble, exactly, minus, negated, over, plus, rounded, times, ZERO } from './doubleDouble'
import { areaToInfinity } from './gth'
import { NumericalFailure } from './numericalFailure'
import { type Rates, reachedFrom } from './rates'
import { type Eigenvalue, eigenvaluesOf, type PlacedEigenvalue } from './spectrum'
import type { ReadonlyVector } from './vector'

/** One exponential of the response to a unit put into a compartment at time 0: coefficient x e^(-rate t). */
export interface ResponseTerm {
  readonly eigenvalue: Eigenvalue
  /** Undefined where there is none of its own: `why` says the reason. May be negative (absorption). */
  readonly coefficient: number | undefined
  /** Its share of the area under the response, coefficient / rate / area; undefined also where the area is not finite. */
  readonly shareOfArea: number | undefined
  readonly why: string | undefined
}

const WHY = {
  clustered: 'two rates are so near each other that neither has a coefficient of its own',
  defective:
    'the same rate occurs more than once on the path of the drug, so that the exponential comes with powers of time',
  complex: 'a complex pair swings and has no share of its own'
} as const
const NEVER_LEAVES = 'part of the drug never leaves, so that the area is not finite'

/**
 * The exponentials of weights . e^(Kt) e_from, fastest first: the response of a weighted sum of amounts to a unit put
 * into compartment `from` at time 0. Only eigenvalues of compartments on a path from there to a weight are listed.
 *
 * A coefficient is the residue of weights . (s I - K)^-1 e_from at its eigenvalue, taken from solutions on both sides of
 * it in twice the working precision (METHODS 1.9): relative to the largest coefficient it is good to about 1e-14, with no
 * difference of two rates formed in working precision.
 */
export function impulseResponse(rates: Rates, weights: ReadonlyVector, from: number): readonly ResponseTerm[] {
  if (weights.length !== rates.size)
    throw new RangeError(`a response of ${rates.size} compartments got ${weights.length} weights`)
  if (!(Number.isInteger(from) && from >= 0 && from < rates.size)) throw new RangeError(`no compartment ${from}`)
  const passed = passedCompartments(rates, weights, from)
  const blocks = blocksOf(rates).filter((block) => block.members.some((member) => passed.has(member)))
  const placed = eigenvaluesOf(rates, blocks)
  const response = transformOf(rates, blocks, weights, from)
  const endless = placed.some(({ eigenvalue }) => eigenvalue.rate === 0)
  const area = endless ? undefined : areaUnder(rates, blocks, weights, from)
  return placed.map((each) => {
    const { eigenvalue } = each
    if (eigenvalue.kind !== 'real') {
      return { eigenvalue, coefficient: undefined, shareOfArea: undefined, why: WHY[eigenvalue.kind] }
    }
    const coefficient = residueAt(response, each.exact.rate, distanceToOthers(each, placed))
    if (area === undefined) return { eigenvalue, coefficient, shareOfArea: undefined, why: NEVER_LEAVES }
    return { eigenvalue, coefficient, shareOfArea: coefficient / eigenvalue.rate / area, why: undefined }
  })
}

/** Those on a path from `from` to a compartment with weight. */
function passedCompartments(rates: Rates, weights: ReadonlyVector, from: number): ReadonlySet<number> {
  const { size, between } = rates
  const reversed = Array.from({ length: size * size }, (_, p) => between[(p % size) * size + Math.floor(p / size)])
  const forth = reachedFrom(rates, unitAt(from, size))
  const back = reachedFrom({ ...rates, between: reversed }, weights)
  return new Set(forth.flatMap((is, i) => (is && back[i] ? [i] : [])))
}

function unitAt(place: number, size: number): readonly number[] {
  return Array.from({ length: size }, (_, i) => (i === place ? 1 : 0))
}

/** s -> weights . (s I - K)^-1 e_from, over the compartments passed; what leaves them is gone. */
function transformOf(
  rates: Rates,
  blocks: readonly Block[],
  weights: ReadonlyVector,
  from: number
): (s: DoubleDouble) => DoubleDouble {
  const members = blocks.flatMap((block) => block.members)
  const outflows = blocks.flatMap((block) => block.outflows)
  return (s) => {
    const matrix = members.map((i) =>
      members.map((j, column) => {
        return complex(i === j ? plus(s, outflows[column]) : exactly(-rates.between[i * rates.size + j]))
      })
    )
    const unit = members.map((i) => [complex(exactly(i === from ? 1 : 0))])
    const solution = solveInPlace(matrix, unit)
    if (solution === undefined)
      throw new NumericalFailure('out-of-range', `two rates near ${-rounded(s)} are not told apart`)
    let sum = ZERO
    members.forEach((i, row) => {
      sum = plus(sum, times(exactly(weights[i]), solution[row][0].re))
    })
    return sum
  }
}

/** How far an evaluation stands from the pole, as a share of the distance to the next one. */
const ASIDE = 2e-5

/**
 * Residue of a function at its simple pole -rate. With A(e) the mean of e f(-rate + e) and -e f(-rate - e), which is the
 * residue + a e^2 + ..., (4 A(e) - A(2 e)) / 3 is off by the fourth power of e / distance.
 */
function residueAt(f: (s: DoubleDouble) => DoubleDouble, rate: DoubleDouble, distance: number): number {
  const mean = (e: DoubleDouble) => {
    const right = f(minus(e, rate))
    const left = f(minus(negated(e), rate))
    return times(times(e, minus(right, left)), exactly(0.5))
  }
  const e = exactly(ASIDE * distance)
  const twice = exactly(2 * ASIDE * distance)
  return rounded(over(minus(times(exactly(4), mean(e)), mean(twice)), exactly(3)))
}

/** Distance from an eigenvalue to the nearest other one, or its own size where there is none. */
function distanceToOthers(each: PlacedEigenvalue, all: readonly PlacedEigenvalue[]): number {
  let least = Number.POSITIVE_INFINITY
  for (const other of all) {
    if (other === each) continue
    const real = Math.abs(rounded(minus(other.exact.rate, each.exact.rate)))
    const imaginary = Math.abs(rounded(minus(other.exact.frequency, each.exact.frequency)))
    least = Math.min(least, Math.max(real, imaginary))
  }
  const own = rounded(each.exact.rate)
  if (least < Number.POSITIVE_INFINITY) return least
  return own > 0 ? own : 1
}

/** Area under the response; compartments beyond those passed are out of the body for it. */
function areaUnder(rates: Rates, blocks: readonly Block[], weights: ReadonlyVector, from: number): number {
  const members = blocks.flatMap((block) => block.members)
  const inside = new Set(members)
  const between = members.flatMap((i) => members.map((j) => rates.between[i * rates.size + j]))
  const out = members.map((j) => {
    let sum = rates.out[j]
    for (let i = 0; i < rates.size; i++) if (!inside.has(i)) sum += rates.between[i * rates.size + j]
    return sum
  })
  const areas = areaToInfinity(
    { size: members.length, between, out },
    members.map((i) => (i === from ? 1 : 0))
  )
  return members.reduce((sum, i, row) => sum + weights[i] * areas[row], 0)
}
