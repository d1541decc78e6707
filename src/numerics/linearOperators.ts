import { decaysInto } from './decays'
import type { Kernel } from './kernel'
import { kernelFor } from './kernels'
import { NonnegativeForm } from './nonnegativeForm'
import { NumericalFailure } from './numericalFailure'
import { emptyOperator, type Functional, type Operator } from './operator'
import { OperatorSeries } from './operatorSeries'
import type { Rates } from './rates'
import { planInto, type TaylorPlan } from './taylorPlan'

/** Largest rate x duration: beyond, the products of the plan leave the range of double precision. */
const FARTHEST = 1e280

/** The operator over `duration`, for single use and tests; loops hold a `LinearOperators`. */
export function operatorFor(
  rates: Rates,
  functionals: readonly Functional[],
  inputs: readonly number[],
  duration: number
): Operator {
  const operators = new LinearOperators(rates, functionals, inputs)
  const operator = operators.create()
  operators.into(duration, operator)
  return operator
}

/**
 * Makes the operators of one linear model: exponential, sink, functional rows and input columns, for any duration, by
 * mass-conserving scaling and squaring (METHODS 1). Nothing is ever subtracted, so that every entry, however small, has
 * its digits: the relative error is about u (s + 12 + |ln entry|), u = 2.2e-16, s the number of doublings, whatever the
 * stiffness. Owns its scratch between calls; `into` and `use` allocate nothing.
 */
export class LinearOperators {
  readonly #form: NonnegativeForm
  readonly #kernel: Kernel
  readonly #series: OperatorSeries
  readonly #plan: TaylorPlan = { degree: 0, stride: 0, squarings: 0 }
  /** X above the rows R, the sink first: one block for one product, doubled from one into the other. */
  #block: Float64Array
  #next: Float64Array
  /** Phi, one column after another; X Phi above R Phi, likewise; and H, a row for each functional. */
  readonly #columns: Float64Array
  readonly #products: Float64Array
  readonly #direct: Float64Array
  /** e^(-decay T) of each row over the present step T, which stands in an array: handed to a method it would be allocated. */
  readonly #stepDecays: Float64Array
  readonly #exponents: Float64Array
  readonly #step = new Float64Array(1)

  /**
   * `inputs` lists the compartments that may take a constant input, one column each.
   * Throws `RangeError` for rates, weights or decays that are negative or not finite, or of the wrong length.
   */
  constructor(rates: Rates, functionals: readonly Functional[], inputs: readonly number[]) {
    const form = new NonnegativeForm(rates, functionals, inputs)
    const { n, m, f } = form
    this.#form = form
    this.#kernel = kernelFor(n)
    this.#series = new OperatorSeries(form, this.#kernel)
    this.#block = new Float64Array((n + f) * n)
    this.#next = new Float64Array((n + f) * n)
    this.#columns = new Float64Array(n * m)
    this.#products = new Float64Array((n + f) * m)
    this.#direct = new Float64Array(f * m)
    this.#stepDecays = new Float64Array(f).fill(1)
    this.#exponents = new Float64Array(f)
  }

  /** Empty storage of the right size for `into`. */
  create(): Operator {
    const { n, m, f } = this.#form
    return emptyOperator(n, m, f - 1)
  }

  /** Go over to another individual's rates and functionals, of the same sizes. */
  use(rates: Rates, functionals: readonly Functional[]): void {
    this.#form.use(rates, functionals)
    this.#stepDecays.fill(1)
  }

  /**
   * Write the operator over `duration` into storage made by `create`: choose degree and number of doublings; series over
   * the short step; doublings; copy. Throws `RangeError` for a negative or infinite duration and `NumericalFailure`
   * 'out-of-range' where rate x duration leaves the range of double precision.
   */
  into(duration: number, operator: Operator): void {
    if (!(duration >= 0 && duration < Number.POSITIVE_INFINITY)) {
      throw new RangeError(`a duration must be finite and not negative, got ${duration}`)
    }
    const { n, sigma } = this.#form
    const reach = sigma * duration
    if (!(reach < FARTHEST)) throw new NumericalFailure('out-of-range', `rate x duration is ${reach}`)
    const plan = this.#plan
    planInto(reach, n, plan)
    let step = duration
    for (let k = 0; k < plan.squarings; k++) step *= 0.5
    this.#step[0] = step
    this.#series.into(this.#step, plan, this.#block, this.#columns, this.#direct)
    this.#balance()
    for (let k = 0; k < plan.squarings; k++) {
      this.#decay()
      this.#double()
      this.#step[0] *= 2
    }
    this.#decay()
    this.#copyInto(operator)
    operator.duration = duration
  }

  /** e^(-decay T) over the present step, computed afresh every time: squaring it would double its error. */
  #decay(): void {
    const { f, decays, decaying } = this.#form
    if (!decaying) return
    const step = this.#step[0]
    for (let r = 0; r < f; r++) this.#exponents[r] = decays[r] * step
    decaysInto(this.#exponents, this.#stepDecays)
  }

  /** From the operator over a step to that over twice as long (METHODS 1.5), all from the old X, R and Phi. */
  #double(): void {
    const { n, m, f } = this.#form
    const block = this.#block
    const next = this.#next
    const columns = this.#columns
    const direct = this.#direct
    const products = this.#products
    const decays = this.#stepDecays
    this.#kernel.rows(block, n + f, block, next)
    this.#kernel.columns(block, n + f, columns, m, products)
    for (let r = 0; r < f; r++) {
      const decay = decays[r]
      const row = (n + r) * n
      for (let p = row; p < row + n; p++) next[p] += decay * block[p]
      for (let c = 0; c < m; c++) direct[r * m + c] += decay * direct[r * m + c] + products[c * (n + f) + n + r]
    }
    for (let c = 0; c < m; c++) {
      const column = c * n
      const product = c * (n + f)
      for (let i = 0; i < n; i++) columns[column + i] += products[product + i]
    }
    this.#block = next
    this.#next = block
    this.#balance()
  }

  /** Divide each column of X and its sink by their sum, which is known to be 1: this keeps doubling from doubling errors. */
  #balance(): void {
    this.#kernel.balance(this.#block, this.#form.n + 1)
  }

  #copyInto(operator: Operator): void {
    const { n, m, f } = this.#form
    const block = this.#block
    const columns = this.#columns
    const { transition, sink, response, sinkResponse, rows, direct } = operator
    for (let p = 0; p < n * n; p++) transition[p] = block[p]
    for (let j = 0; j < n; j++) sink[j] = block[n * n + j]
    for (let p = 0; p < (f - 1) * n; p++) rows[p] = block[(n + 1) * n + p]
    for (let c = 0; c < m; c++) {
      sinkResponse[c] = this.#direct[c]
      for (let i = 0; i < n; i++) response[i * m + c] = columns[c * n + i]
    }
    for (let p = 0; p < (f - 1) * m; p++) direct[p] = this.#direct[m + p]
    for (let r = 1; r < f; r++) operator.decays[r - 1] = this.#stepDecays[r]
  }
}
