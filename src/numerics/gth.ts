import { NumericalFailure } from './numericalFailure'
import { type Rates, reachedFrom } from './rates'
import type { ReadonlyVector } from './vector'

/** Amounts now to amounts after some time, and the share of a unit in each compartment that has left by then. */
export interface Transition {
  /** n x n, row-major. */
  readonly transition: ReadonlyVector
  /** n; with its column of `transition` it sums to 1. */
  readonly sink: ReadonlyVector
}

/**
 * Amounts x at the start of a period that come back at its end: x = X x + load, where `load` is what one period's input
 * leaves in an empty body at the period's end. `reached` says which compartments drug reaches at all (`reachedFrom`);
 * the others hold 0 and do not enter. Solved without a subtraction by elimination after Grassmann, Taksar & Heyman
 * (METHODS 1.7), so that every amount has its digits, however slow the elimination.
 * Throws `NumericalFailure` 'no-way-out', naming a compartment, where drug that enters it can never leave.
 */
export function steadyState(period: Transition, load: ReadonlyVector, reached: readonly boolean[]): Float64Array {
  return solveBalance(period.transition, period.sink, load, reached)
}

/**
 * Integral over all time of the amount in every compartment after `load` is put in at once: (-K)^-1 load. Throws
 * `NumericalFailure` 'no-way-out', naming a compartment, where drug that enters it can never leave.
 */
export function areaToInfinity(rates: Rates, load: ReadonlyVector): Float64Array {
  return solveBalance(rates.between, rates.out, load, reachedFrom(rates, load))
}

/** The transition over `earlier` and then `later`: D <- D + D2 X, X <- X2 X, every column and its sink brought back to sum 1. */
export function followedBy(earlier: Transition, later: Transition): Transition {
  const n = earlier.sink.length
  if (later.sink.length !== n)
    throw new RangeError(`a transition of ${n} compartments followed by one of ${later.sink.length}`)
  const transition = new Float64Array(n * n)
  const sink = new Float64Array(n)
  for (let j = 0; j < n; j++) {
    let left = earlier.sink[j]
    for (let k = 0; k < n; k++) left += later.sink[k] * earlier.transition[k * n + j]
    let total = left
    for (let i = 0; i < n; i++) {
      let amount = 0
      for (let k = 0; k < n; k++) amount += later.transition[i * n + k] * earlier.transition[k * n + j]
      transition[i * n + j] = amount
      total += amount
    }
    sink[j] = left / total
    for (let i = 0; i < n; i++) transition[i * n + j] /= total
  }
  return { transition, sink }
}

/**
 * Solve (sum of what leaves i) x_i = load_i + sum_j W_ij x_j, where column j of W (its diagonal is not read) and `way out`
 * of j are what leaves j. Eliminate from the last compartment to the first: what k passes on is shared out among those
 * before it, and among them and the way out in proportion; then substitute forward.
 */
function solveBalance(
  passedOn: ReadonlyVector,
  wayOut: ReadonlyVector,
  load: ReadonlyVector,
  reached: readonly boolean[]
): Float64Array {
  const size = wayOut.length
  if (passedOn.length !== size * size || load.length !== size || reached.length !== size) {
    throw new RangeError(`a balance of ${size} compartments needs its matrix, load and reach of that size`)
  }
  const places = reached.flatMap((is, i) => (is ? [i] : []))
  const n = places.length
  const w = Float64Array.from({ length: n * n }, (_, p) => passedOn[places[Math.floor(p / n)] * size + places[p % n]])
  const d = Float64Array.from(places, (place) => wayOut[place])
  const b = Float64Array.from(places, (place) => load[place])
  const leaving = new Float64Array(n)
  for (let k = n - 1; k >= 0; k--) {
    let sum = d[k]
    for (let i = 0; i < k; i++) sum += w[i * n + k]
    if (!(sum > 0)) {
      throw new NumericalFailure('no-way-out', `drug that enters compartment ${places[k]} can never leave`, places[k])
    }
    leaving[k] = sum
    for (let i = 0; i < k; i++) b[i] += (w[i * n + k] * b[k]) / sum
    for (let j = 0; j < k; j++) {
      const share = w[k * n + j] / sum
      for (let i = 0; i < k; i++) if (i !== j) w[i * n + j] += w[i * n + k] * share
      d[j] += d[k] * share
    }
  }
  const x = new Float64Array(size)
  for (let k = 0; k < n; k++) {
    let sum = b[k]
    for (let j = 0; j < k; j++) sum += w[k * n + j] * x[places[j]]
    x[places[k]] = sum / leaving[k]
  }
  return x
}
