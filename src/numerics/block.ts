import { stronglyConnected } from './components'
import { type DoubleDouble, exactly, plus, ZERO } from './doubleDouble'
import type { Rates } from './rates'

/** One strongly connected component of a model, whose eigenvalues are its own. */
export interface Block {
  /** Indices in the model, ascending. */
  readonly members: readonly number[]
  /** Rates between members, row-major, from the column to the row. */
  readonly between: readonly number[]
  /** All that leaves each member, to the other members and beyond, to twice the working precision. */
  readonly outflows: readonly DoubleDouble[]
  /** What leaves each member for other blocks or the body's outside. */
  readonly beyond: readonly DoubleDouble[]
  /** Nothing leaves the block. */
  readonly closed: boolean
}

/** The blocks of a model; drug moves only from a block to later ones. */
export function blocksOf(rates: Rates): readonly Block[] {
  return stronglyConnected(rates).map((members) => {
    const inside = new Set(members)
    const between = members.flatMap((i) => members.map((j) => rates.between[i * rates.size + j]))
    const outflows = members.map((j) => exactOutflow(rates, j, () => true))
    const beyond = members.map((j) => exactOutflow(rates, j, (i) => !inside.has(i)))
    const closed = members.every((j) => {
      for (let i = 0; i < rates.size; i++) if (!inside.has(i) && rates.between[i * rates.size + j] > 0) return false
      return rates.out[j] === 0
    })
    return { members, between, outflows, beyond, closed }
  })
}

/** What leaves compartment j, out of the body and to some compartments, per unit of time, to twice the working precision. */
function exactOutflow(rates: Rates, j: number, to: (i: number) => boolean): DoubleDouble {
  let sum = exactly(rates.out[j])
  for (let i = 0; i < rates.size; i++) if (to(i)) sum = plus(sum, exactly(rates.between[i * rates.size + j]))
  return sum
}

/** An eigenvalue of a block, with the sign turned: amounts fall as e^(-rate t), turning by `frequency` t. */
export interface BlockEigenvalue {
  readonly rate: DoubleDouble
  /** Angular; 0 for a real eigenvalue. A complex pair is listed once, with its positive frequency. */
  readonly frequency: DoubleDouble
  /** How many eigenvalues these are that cannot be told apart; they share no chain (no defect). */
  readonly multiplicity: number
  /** Too near to another of the same block for either to carry a coefficient of its own. */
  readonly clustered: boolean
}

/** The single eigenvalue of a block of one compartment: exactly its outflow. */
export function singleEigenvalue(block: Block): readonly BlockEigenvalue[] {
  return [{ rate: block.outflows[0], frequency: ZERO, multiplicity: 1, clustered: false }]
}
