import { factorInto, solveInto } from '../numerics/lu'
import type { ReadonlyVector } from '../numerics/vector'
import type { MilligramsPerHour } from '../units/canonical'
import type { Model, Transfer } from './model'
import { reachedBy } from './pathways'

/** How much can leave the body where every way out is limited, against how much enters. */
export interface Capacity {
  /** Largest mean dose rate into `compartments` that can leave again: the sum of the maximum rates on the way out. */
  readonly rate: MilligramsPerHour
  /** Mean dose rate into these. */
  readonly doseRate: MilligramsPerHour
  /** The dosed compartments whose drug has no other way. */
  readonly compartments: readonly number[]
}

/** Parts of the flow that rounding may leave over. */
const ROUNDING = 1e-12

/**
 * The limit that a regimen meets first when all its dose rates rise together; undefined where none does, because a path
 * without a limit leads out of the body from every compartment that takes a dose. `inputs` are mean dose rates, one a
 * compartment, after product fraction and bioavailability.
 *
 * Maximum flow and minimum cut [Ford & Fulkerson 1956, Can. J. Math. 8:399, from memory]: first-order movements carry
 * anything, a saturable one its maximum rate, a binding what is produced of its target; what enters a compartment that
 * first-order movements alone lead out of goes on in fixed parts. The smallest cut for rates that cannot leave gives a
 * limit; rates at that limit give the next, until all leaves.
 */
export function capacityOf(model: Model, transfers: readonly Transfer[], inputs: ReadonlyVector): Capacity | undefined {
  const limits = limitsOf(model, transfers)
  const produced = producedIn(model, transfers)
  const size = model.compartments.length
  const goesOn = passedOn(model, transfers, inputs)
  const finite = limits.reduce((sum, limit) => sum + (limit < Number.POSITIVE_INFINITY ? limit : 0), 0)
  const least = Math.min(...goesOn.map(({ rate }) => rate).filter((rate) => rate > 0))
  if (!(least < Number.POSITIVE_INFINITY)) return undefined
  let scale = (2 * (finite + produced.reduce((sum, rate) => sum + rate, 0))) / least + 1
  let found: Capacity | undefined
  // Each cut leaves out at least one dosed compartment of the one before, or is the last.
  for (let round = 0; round <= size; round++) {
    const supply = Array.from({ length: size }, (_, i) => produced[i] + scale * goesOn[i].rate)
    const cut = smallestCut(limits, supply)
    if (cut === undefined) return found
    const compartments = [...new Set(cut.side.flatMap((i) => goesOn[i].from))].sort((a, b) => a - b)
    const doseRate = compartments.reduce((sum, i) => sum + inputs[i], 0)
    const supplied = cut.side.reduce((sum, i) => sum + goesOn[i].rate, 0)
    // What the body makes by itself has no way out: nothing is left for a dose.
    if (!(doseRate > 0)) return { rate: 0, doseRate: 0, compartments: [] }
    const left = Math.max(0, cut.limit - cut.side.reduce((sum, i) => sum + produced[i], 0))
    // Where all that is given comes to the limit, the limit is the capacity to the last digit.
    const rate = supplied === doseRate ? left : (left / supplied) * doseRate
    found = { rate, doseRate, compartments }
    if (rate === 0) return found
    scale = left / supplied
  }
  return found
}

/** What comes to a compartment of all that is given, and the dosed compartments that it comes from. */
interface PassedOn {
  readonly rate: MilligramsPerHour
  readonly from: readonly number[]
}

/**
 * Inputs at the first compartment on their way that something else than first-order movements leads out of. What leaves
 * the body before is in none.
 */
function passedOn(model: Model, transfers: readonly Transfer[], inputs: ReadonlyVector): PassedOn[] {
  const size = model.compartments.length
  const isWay = model.compartments.map((_, i) => transfers.some((t) => t.kind === 'first-order' && t.from === i))
  for (const transfer of transfers) {
    if (transfer.kind === 'saturable') isWay[transfer.from] = false
    if (transfer.kind === 'binding') {
      for (const place of [transfer.drug, transfer.target, transfer.complex]) isWay[place] = false
    }
  }
  const rates = Array.from({ length: size }, (_, i) => (isWay[i] ? 0 : inputs[i]))
  const from = rates.map((rate, i) => (rate > 0 ? [i] : []))
  for (let start = 0; start < size; start++) {
    if (!(isWay[start] && inputs[start] > 0)) continue
    const throughput = amountsOnTheWay(transfers, isWay, start, inputs[start])
    if (throughput === undefined) {
      rates[start] += inputs[start]
      from[start].push(start)
      continue
    }
    for (const transfer of transfers) {
      if (transfer.kind !== 'first-order' || transfer.to === 'eliminated') continue
      const flow = transfer.rate * throughput[transfer.from]
      if (isWay[transfer.to] || !(flow > 0)) continue
      rates[transfer.to] += flow
      if (!from[transfer.to].includes(start)) from[transfer.to].push(start)
    }
  }
  return rates.map((rate, i) => ({ rate, from: from[i] }))
}

/** Amounts in the compartments on the way that hold an input; undefined where they keep all of it. */
function amountsOnTheWay(
  transfers: readonly Transfer[],
  isWay: readonly boolean[],
  start: number,
  input: MilligramsPerHour
): Float64Array | undefined {
  const n = isWay.length
  const matrix = new Float64Array(n * n)
  for (let i = 0; i < n; i++) if (!isWay[i]) matrix[i * n + i] = 1
  for (const transfer of transfers) {
    if (transfer.kind !== 'first-order' || !isWay[transfer.from]) continue
    matrix[transfer.from * n + transfer.from] += transfer.rate
    if (transfer.to !== 'eliminated' && isWay[transfer.to]) matrix[transfer.to * n + transfer.from] -= transfer.rate
  }
  const pivots = new Int32Array(n)
  const amounts = new Float64Array(n)
  amounts[start] = input
  if (!factorInto(matrix, n, n, pivots)) return undefined
  solveInto(matrix, n, n, pivots, amounts)
  return amounts
}

/** What of drug is produced in each compartment. */
function producedIn(model: Model, transfers: readonly Transfer[]): MilligramsPerHour[] {
  const produced = model.compartments.map(() => 0)
  for (const transfer of transfers) {
    if (transfer.kind === 'production' && model.compartments[transfer.into].holds === 'drug') {
      produced[transfer.into] += transfer.rate
    }
  }
  return produced
}

/** Limits between compartments, row-major from row to column, the last column being out of the body; 0 where nothing goes. */
function limitsOf(model: Model, transfers: readonly Transfer[]): MilligramsPerHour[] {
  const size = model.compartments.length
  const limits = new Array<number>(size * (size + 1)).fill(0)
  const add = (from: number, to: number | 'eliminated', limit: number): void => {
    if (model.compartments[from].holds === 'drug')
      limits[from * (size + 1) + (to === 'eliminated' ? size : to)] += limit
  }
  for (const transfer of transfers) {
    switch (transfer.kind) {
      case 'first-order':
        add(transfer.from, transfer.to, transfer.rate > 0 ? Number.POSITIVE_INFINITY : 0)
        break
      case 'saturable':
        add(transfer.from, transfer.to, transfer.maximumRate)
        break
      case 'binding':
        add(transfer.drug, transfer.complex, targetProduced(model, transfers, transfer.target))
        if (transfer.dissociation > 0) add(transfer.complex, transfer.drug, Number.POSITIVE_INFINITY)
        break
      case 'production':
        break
    }
  }
  return limits
}

/** All that is produced and can come to be a target. */
function targetProduced(model: Model, transfers: readonly Transfer[], target: number): MilligramsPerHour {
  const moving = transfers.filter(({ kind }) => kind !== 'production')
  return transfers.reduce((sum, transfer) => {
    if (transfer.kind !== 'production') return sum
    const from = model.compartments.map((_, i) => i === transfer.into)
    return reachedBy(model, moving, from)[target] ? sum + transfer.rate : sum
  }, 0)
}

interface Cut {
  /** Compartments that cannot pass on all that they are supplied with. */
  readonly side: readonly number[]
  /** Sum of the limits that lead away from them. */
  readonly limit: MilligramsPerHour
}

/** The smallest cut, where the supply cannot all leave. Flow is pushed along shortest paths [Edmonds & Karp 1972, from memory]. */
function smallestCut(limits: readonly number[], supply: readonly number[]): Cut | undefined {
  const size = supply.length
  const out = size
  const left = Array.from({ length: size + 1 }, (_, i) =>
    Array.from({ length: size + 1 }, (_, j) => (i < size ? limits[i * (size + 1) + j] : 0))
  )
  const waiting = [...supply]
  const total = supply.reduce((sum, rate) => sum + rate, 0)
  for (;;) {
    const previous = pathsFrom(waiting, left, ROUNDING * total)
    if (previous[out] === undefined) {
      const side = supply.flatMap((_, i) => (previous[i] === undefined ? [] : [i]))
      if (side.length === 0) return undefined
      let limit = 0
      for (const i of side) {
        for (let j = 0; j <= size; j++) if (!side.includes(j)) limit += limits[i * (size + 1) + j]
      }
      return { side, limit }
    }
    let amount = Number.POSITIVE_INFINITY
    let place = out
    for (let from = previous[place]; from !== undefined && from !== place; from = previous[place]) {
      amount = Math.min(amount, left[from][place])
      place = from
    }
    amount = Math.min(amount, waiting[place])
    waiting[place] -= amount
    place = out
    for (let from = previous[place]; from !== undefined && from !== place; from = previous[place]) {
      left[from][place] -= amount
      left[place][from] += amount
      place = from
    }
  }
}

/** For every place that a waiting supply gets to, where it comes from: itself for a place where supply waits. */
function pathsFrom(
  waiting: readonly number[],
  left: readonly (readonly number[])[],
  least: number
): (number | undefined)[] {
  const previous: (number | undefined)[] = [...waiting, 0].map(() => undefined)
  const queue: number[] = []
  for (let i = 0; i < waiting.length; i++) {
    if (waiting[i] <= least) continue
    previous[i] = i
    queue.push(i)
  }
  for (let at = 0; at < queue.length; at++) {
    const from = queue[at]
    for (let to = 0; to <= waiting.length; to++) {
      if (previous[to] !== undefined || !(left[from][to] > least)) continue
      previous[to] = from
      queue.push(to)
    }
  }
  return previous
}
