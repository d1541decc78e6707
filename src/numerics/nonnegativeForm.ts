import type { Functional } from './operator'
import { checkRates, outflow, type Rates } from './rates'

/**
 * A linear model with sigma added to its diagonal, so that no number in it is negative (METHODS 1.2). Row 0 of the
 * functionals is the sink: weights out, decay 0. Filled by `use`, over and over, without allocating.
 */
export class NonnegativeForm {
  /** Compartments, input columns, and rows with the sink. */
  readonly n: number
  readonly m: number
  readonly f: number
  /** Compartments that take an input, one a column. */
  readonly inputs: Int32Array
  /** K + sigma I, n x n. */
  readonly shifted: Float64Array
  /** f x n. */
  readonly weights: Float64Array
  /** f: decay of each row, and sigma minus it. */
  readonly decays: Float64Array
  readonly gaps: Float64Array
  /** At least every outflow and decay. */
  sigma = 0
  /** Whether any row decays: areas and the sink do not. */
  decaying = false

  constructor(rates: Rates, functionals: readonly Functional[], inputs: readonly number[]) {
    const n = rates.size
    const f = functionals.length + 1
    for (const input of inputs) {
      if (!(Number.isInteger(input) && input >= 0 && input < n))
        throw new RangeError(`no compartment ${input} for an input`)
    }
    this.n = n
    this.m = inputs.length
    this.f = f
    this.inputs = Int32Array.from(inputs)
    this.shifted = new Float64Array(n * n)
    this.weights = new Float64Array(f * n)
    this.decays = new Float64Array(f)
    this.gaps = new Float64Array(f)
    this.use(rates, functionals)
  }

  /** Take over rates and functionals of the same sizes. Throws `RangeError` for others, and for what is negative or not finite. */
  use(rates: Rates, functionals: readonly Functional[]): void {
    const { n, f, shifted, weights, decays, gaps } = this
    if (rates.size !== n) throw new RangeError(`operators of ${n} compartments cannot use rates of ${rates.size}`)
    if (functionals.length !== f - 1)
      throw new RangeError(`operators of ${f - 1} functionals cannot use ${functionals.length}`)
    checkRates(rates)
    let sigma = 0
    this.decaying = false
    for (let j = 0; j < n; j++) {
      weights[j] = rates.out[j]
      sigma = Math.max(sigma, outflow(rates, j))
    }
    for (let r = 1; r < f; r++) {
      const functional = functionals[r - 1]
      checkFunctional(functional, n)
      for (let j = 0; j < n; j++) weights[r * n + j] = functional.weights[j]
      decays[r] = functional.decay
      if (functional.decay > 0) this.decaying = true
      sigma = Math.max(sigma, functional.decay)
    }
    for (let r = 0; r < f; r++) gaps[r] = sigma - decays[r]
    for (let p = 0; p < n * n; p++) shifted[p] = rates.between[p]
    for (let j = 0; j < n; j++) shifted[j * n + j] = sigma - outflow(rates, j)
    this.sigma = sigma
  }
}

function checkFunctional({ weights, decay }: Functional, n: number): void {
  if (weights.length !== n) throw new RangeError(`a functional over ${n} compartments has ${weights.length} weights`)
  if (!(decay >= 0 && decay < Number.POSITIVE_INFINITY)) throw new RangeError(`decay of a functional is ${decay}`)
  for (let j = 0; j < n; j++) {
    const weight = weights[j]
    if (!(weight >= 0 && weight < Number.POSITIVE_INFINITY))
      throw new RangeError(`weight ${j} of a functional is ${weight}`)
  }
}
