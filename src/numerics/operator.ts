import type { ReadonlyVector } from './vector'

/**
 * A number that follows the amounts: f' = weights . x - decay f. With decay 0 it is an integral, such as an area under a
 * concentration (weights 1/V at one compartment); with decay ke0 and weight ke0/V an effect-site concentration; with an
 * eigenvalue as decay one exponential's part of a response.
 */
export interface Functional {
  /** Nonnegative, one a compartment. */
  readonly weights: ReadonlyVector
  /** Nonnegative, 1/time. */
  readonly decay: number
}

/**
 * What a linear model does to its state over `duration`, with constant inputs. n compartments, m compartments that take
 * an input, f functionals; matrices are row-major.
 */
export interface Operator {
  duration: number
  /** n x n, X: amounts now to amounts then. Every column and its `sink` sum to 1. */
  readonly transition: Float64Array
  /** n: share of a unit in j now that has left the body by then. */
  readonly sink: Float64Array
  /** n x m, Phi: amounts then from an input of 1 per unit of time. */
  readonly response: Float64Array
  /** m: amount that has left the body by then, from an input of 1 per unit of time. */
  readonly sinkResponse: Float64Array
  /** f x n, R: functionals then from amounts now. */
  readonly rows: Float64Array
  /** f x m, H: functionals then from an input of 1 per unit of time. */
  readonly direct: Float64Array
  /** f: e^(-decay duration), functionals now to functionals then. */
  readonly decays: Float64Array
}

/** Storage for the operator of n compartments, m inputs and f functionals, all zero. */
export function emptyOperator(n: number, m: number, f: number): Operator {
  return {
    duration: 0,
    transition: new Float64Array(n * n),
    sink: new Float64Array(n),
    response: new Float64Array(n * m),
    sinkResponse: new Float64Array(m),
    rows: new Float64Array(f * n),
    direct: new Float64Array(f * m),
    decays: new Float64Array(f)
  }
}

/**
 * Carry amounts and functionals over the operator's duration: x <- X x + Phi b, f <- d f + R x + H b, x the old amounts.
 * `inputRates` holds one rate for every input column. Outputs must not be inputs. Allocates nothing.
 */
export function advanceInto(
  operator: Operator,
  amounts: ReadonlyVector,
  functionals: ReadonlyVector,
  inputRates: ReadonlyVector,
  outAmounts: Float64Array,
  outFunctionals: Float64Array
): void {
  advanceAmountsInto(operator, amounts, inputRates, outAmounts)
  for (let r = 0; r < operator.decays.length; r++) {
    outFunctionals[r] = functionalAfter(operator, r, amounts, functionals[r], inputRates)
  }
}

/** The amounts alone: x <- X x + Phi b. `out` must not be `amounts`. Allocates nothing. */
export function advanceAmountsInto(
  operator: Operator,
  amounts: ReadonlyVector,
  inputRates: ReadonlyVector,
  out: Float64Array
): void {
  const n = operator.sink.length
  const m = operator.sinkResponse.length
  const { transition, response } = operator
  for (let i = 0; i < n; i++) {
    let sum = 0
    for (let j = 0; j < n; j++) sum += transition[i * n + j] * amounts[j]
    for (let k = 0; k < m; k++) sum += response[i * m + k] * inputRates[k]
    out[i] = sum
  }
}

/** One functional's value after the operator's duration, from its value and the amounts at the start. */
export function functionalAfter(
  operator: Operator,
  index: number,
  amounts: ReadonlyVector,
  value: number,
  inputRates: ReadonlyVector
): number {
  const n = operator.sink.length
  const m = operator.sinkResponse.length
  const { rows, direct } = operator
  let sum = operator.decays[index] * value
  for (let j = 0; j < n; j++) sum += rows[index * n + j] * amounts[j]
  for (let k = 0; k < m; k++) sum += direct[index * m + k] * inputRates[k]
  return sum
}

/** Amount that leaves the body over the operator's duration. */
export function eliminatedOver(operator: Operator, amounts: ReadonlyVector, inputRates: ReadonlyVector): number {
  let sum = 0
  for (let j = 0; j < operator.sink.length; j++) sum += operator.sink[j] * amounts[j]
  for (let k = 0; k < operator.sinkResponse.length; k++) sum += operator.sinkResponse[k] * inputRates[k]
  return sum
}
