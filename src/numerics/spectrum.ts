import { type Block, type BlockEigenvalue, blocksOf, singleEigenvalue } from './block'
import { cyclicEigenvalues, NEAR } from './cyclicBlock'
import { rounded } from './doubleDouble'
import { branchesOf, treeEigenvalues } from './exchangeTree'
import { type Rates, reachedFrom } from './rates'

/**
 * What an eigenvalue of a model is.
 * - `real`: an exponential of its own.
 * - `clustered`: nearer than one part in a million to another that drug passes through, or not told apart by the search;
 *   its own coefficient would cancel against the other's.
 * - `defective`: the same rate more than once on one path (transit stages); the exponential comes with powers of time.
 * - `complex`: a pair; amounts swing with the period while the envelope falls with the half-life.
 */
export type EigenvalueKind = 'real' | 'clustered' | 'defective' | 'complex'

/** An eigenvalue -rate of the rate matrix. */
export interface Eigenvalue {
  readonly kind: EigenvalueKind
  /** Positive, 1/time; of the envelope for a complex pair; 0 where something never leaves. */
  readonly rate: number
  /** ln 2 / rate; undefined where the rate is 0. */
  readonly halfLife: number | undefined
  /** Time of one swing of a complex pair. */
  readonly period: number | undefined
  /** How many of the model's eigenvalues this is; 2 for a complex pair. Multiplicities sum to the number of compartments. */
  readonly multiplicity: number
}

/**
 * All eigenvalues of the rate matrix, fastest first, by its strongly connected components (METHODS 1.8). Real ones are
 * within a few rounding units of the exact eigenvalues of the rates given, slow ones of stiff models included. A
 * compartment that drug does not come back to has exactly its outflow as eigenvalue.
 */
export function spectrum(rates: Rates): readonly Eigenvalue[] {
  return eigenvaluesOf(rates, blocksOf(rates)).map(({ eigenvalue }) => eigenvalue)
}

/** An eigenvalue with its value to twice the working precision. */
export interface PlacedEigenvalue {
  readonly eigenvalue: Eigenvalue
  readonly exact: Pick<BlockEigenvalue, 'rate' | 'frequency'>
}

/** Eigenvalues of some of a model's blocks, fastest first. */
export function eigenvaluesOf(rates: Rates, blocks: readonly Block[]): readonly PlacedEigenvalue[] {
  const own = blocks.flatMap((block) => blockEigenvalues(block).map((exact) => ({ block, exact })))
  const passes = passesBetween(rates)
  const placed = own.map(({ block, exact }, i) => {
    const linked = own.filter((other, j) => {
      if (j === i || other.block === block) return false
      return passes(block, other.block) || passes(other.block, block)
    })
    const near = linked.filter((other) => isNear(exact, other.exact))
    const equal = near.some((other) => isSingle(block) && isSingle(other.block) && isSame(exact, other.exact))
    const kind = kindOf(exact, near.length > 0, equal)
    return { eigenvalue: eigenvalue(kind, exact), exact }
  })
  return merged(placed).sort((a, b) => b.eigenvalue.rate - a.eigenvalue.rate)
}

function kindOf(exact: BlockEigenvalue, near: boolean, equal: boolean): EigenvalueKind {
  if (equal) return 'defective'
  if (near || exact.clustered) return 'clustered'
  return rounded(exact.frequency) === 0 ? 'real' : 'complex'
}

function eigenvalue(kind: EigenvalueKind, exact: BlockEigenvalue): Eigenvalue {
  const rate = rounded(exact.rate)
  const frequency = rounded(exact.frequency)
  return {
    kind,
    rate,
    halfLife: rate > 0 ? Math.LN2 / rate : undefined,
    period: frequency > 0 ? (2 * Math.PI) / frequency : undefined,
    multiplicity: exact.multiplicity
  }
}

function blockEigenvalues(block: Block): readonly BlockEigenvalue[] {
  if (isSingle(block)) return singleEigenvalue(block)
  const branches = branchesOf(block)
  return branches === undefined ? cyclicEigenvalues(block) : treeEigenvalues(block, branches)
}

function isSingle(block: Block): boolean {
  return block.members.length === 1
}

/** Whether drug passes from one block to another, over others or not. */
function passesBetween(rates: Rates): (from: Block, to: Block) => boolean {
  const known = new Map<Block, readonly boolean[]>()
  return (from, to) => {
    const reached = known.get(from) ?? reachedFrom(rates, oneAt(from.members[0], rates.size))
    known.set(from, reached)
    return reached[to.members[0]]
  }
}

function oneAt(place: number, size: number): readonly number[] {
  return Array.from({ length: size }, (_, i) => (i === place ? 1 : 0))
}

function isNear(a: BlockEigenvalue, b: BlockEigenvalue): boolean {
  const rate = Math.abs(rounded(a.rate) - rounded(b.rate))
  const frequency = Math.abs(rounded(a.frequency) - rounded(b.frequency))
  const size = Math.max(rounded(a.rate), rounded(b.rate), rounded(a.frequency), rounded(b.frequency))
  return Math.max(rate, frequency) <= NEAR * size
}

function isSame(a: BlockEigenvalue, b: BlockEigenvalue): boolean {
  return a.rate.hi === b.rate.hi && a.rate.lo === b.rate.lo
}

/** One entry for eigenvalues that are the same and of one kind. */
function merged(placed: readonly PlacedEigenvalue[]): PlacedEigenvalue[] {
  const entries: PlacedEigenvalue[] = []
  for (const each of placed) {
    const { kind, rate, multiplicity } = each.eigenvalue
    const index = entries.findIndex(({ eigenvalue: other, exact }) => {
      const listedOnce = kind === 'real' || kind === 'defective'
      return (
        listedOnce &&
        other.kind === kind &&
        exact.rate.hi === each.exact.rate.hi &&
        exact.rate.lo === each.exact.rate.lo
      )
    })
    if (index < 0 || rate !== entries[index].eigenvalue.rate) entries.push(each)
    else {
      const other = entries[index]
      const sum = other.eigenvalue.multiplicity + multiplicity
      entries[index] = { ...other, eigenvalue: { ...other.eigenvalue, multiplicity: sum } }
    }
  }
  return entries
}
