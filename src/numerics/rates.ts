import type { ReadonlyVector } from './vector'

/**
 * First-order rates of a linear compartment model, all nonnegative and in one unit, 1/time. Rates between compartments
 * and rates out of the body stay apart and the diagonal is never stored: a slow elimination would lose its digits in a
 * sum with a fast exchange (METHODS 1.1).
 */
export interface Rates {
  readonly size: number
  /** size x size, row-major: `between[i * size + j]` from j to i; the diagonal is 0. */
  readonly between: ReadonlyVector
  /** Out of the body, from each compartment. */
  readonly out: ReadonlyVector
}

/** Throw `RangeError` unless sizes agree, every rate is finite and nonnegative, and the diagonal is 0. */
export function checkRates(rates: Rates): void {
  const { size, between, out } = rates
  if (!(Number.isInteger(size) && size > 0))
    throw new RangeError(`a model needs a whole number of compartments, got ${size}`)
  if (between.length !== size * size)
    throw new RangeError(`rates between ${size} compartments: got ${between.length} numbers`)
  if (out.length !== size) throw new RangeError(`rates out of ${size} compartments: got ${out.length} numbers`)
  for (let i = 0; i < size; i++) {
    if (!isRate(out[i])) throw new RangeError(`rate out of compartment ${i} is ${out[i]}`)
    for (let j = 0; j < size; j++) {
      const rate = between[i * size + j]
      if (!isRate(rate)) throw new RangeError(`rate from compartment ${j} to ${i} is ${rate}`)
      if (i === j && rate !== 0) throw new RangeError(`rate from compartment ${i} to itself is ${rate}`)
    }
  }
}

function isRate(value: number): boolean {
  return value >= 0 && value < Number.POSITIVE_INFINITY
}

/** Everything that leaves compartment j per unit of time: out of the body first, then to others by ascending index. */
export function outflow(rates: Rates, j: number): number {
  let sum = rates.out[j]
  for (let i = 0; i < rates.size; i++) sum += rates.between[i * rates.size + j]
  return sum
}

/** Which compartments drug reaches from those where `load` is positive, themselves included. */
export function reachedFrom(rates: Rates, load: ReadonlyVector): readonly boolean[] {
  const { size, between } = rates
  const reached = Array.from({ length: size }, (_, i) => load[i] > 0)
  const waiting = reached.flatMap((is, i) => (is ? [i] : []))
  for (let j = waiting.pop(); j !== undefined; j = waiting.pop()) {
    for (let i = 0; i < size; i++) {
      if (between[i * size + j] > 0 && !reached[i]) {
        reached[i] = true
        waiting.push(i)
      }
    }
  }
  return reached
}
