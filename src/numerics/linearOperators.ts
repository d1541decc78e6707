import { exp } from './elementary'
import { type Kernel, kernelFor } from './kernels'
import { NumericalFailure } from './numericalFailure'
import { emptyOperator, type Functional, type Operator } from './operator'
import { checkRates, outflow, type Rates } from './rates'
import { planInto, strideOf, type TaylorPlan } from './taylorPlan'

/** 1 / k! for k = 0 to 16. */
const INVERSE_FACTORIAL = Float64Array.from({ length: 17 }, (_, k) => 1 / factorial(k))

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
  /** Compartments, input columns, and functional rows with the sink as row 0. */
  readonly #n: number
  readonly #m: number
  readonly #f: number
  readonly #inputs: readonly number[]
  readonly #kernel: Kernel
  readonly #plan: TaylorPlan = { degree: 0, squarings: 0 }
  /** At least every outflow and decay, so that K + sigma I has no negative entry. */
  #sigma = 0
  /** K + sigma I, and the weights and decays of the rows. */
  readonly #shifted: Float64Array
  readonly #weights: Float64Array
  readonly #decays: Float64Array
  /** N^k at index k, from 1 to 4. */
  readonly #powers: readonly Float64Array[]
  /** X above the rows R, one block for one product; doubled from one into the other. */
  #block: Float64Array
  #next: Float64Array
  /** Columns Phi, one after another, and H as rows x inputs. */
  readonly #columns: Float64Array
  readonly #direct: Float64Array
  /** Terms of the series of rows, columns and H, and their successors. */
  #rowTerms: Float64Array
  #nextRowTerms: Float64Array
  #columnTerms: Float64Array
  #nextColumnTerms: Float64Array
  readonly #directTerms: Float64Array
  /** mu^k / k! of each row and nu^k / k!. */
  readonly #rowPowers: Float64Array
  #columnPower = 0

  /**
   * `inputs` lists the compartments that may take a constant input, one column each.
   * Throws `RangeError` for rates, weights or decays that are negative or not finite, or of the wrong length.
   */
  constructor(rates: Rates, functionals: readonly Functional[], inputs: readonly number[]) {
    const n = rates.size
    const m = inputs.length
    const f = functionals.length + 1
    for (const input of inputs) {
      if (!(Number.isInteger(input) && input >= 0 && input < n))
        throw new RangeError(`no compartment ${input} for an input`)
    }
    this.#n = n
    this.#m = m
    this.#f = f
    this.#inputs = [...inputs]
    this.#kernel = kernelFor(n)
    this.#shifted = new Float64Array(n * n)
    this.#weights = new Float64Array(f * n)
    this.#decays = new Float64Array(f)
    this.#powers = Array.from({ length: 5 }, () => new Float64Array(n * n))
    this.#block = new Float64Array((n + f) * n)
    this.#next = new Float64Array((n + f) * n)
    this.#columns = new Float64Array(n * m)
    this.#direct = new Float64Array(f * m)
    this.#rowTerms = new Float64Array(f * n)
    this.#nextRowTerms = new Float64Array(f * n)
    this.#columnTerms = new Float64Array(n * m)
    this.#nextColumnTerms = new Float64Array(n * m)
    this.#directTerms = new Float64Array(f * m)
    this.#rowPowers = new Float64Array(f)
    this.use(rates, functionals)
  }

  /** Empty storage of the right size for `into`. */
  create(): Operator {
    return emptyOperator(this.#n, this.#m, this.#f - 1)
  }

  /** Go over to another individual's rates and functionals, of the same sizes. */
  use(rates: Rates, functionals: readonly Functional[]): void {
    const n = this.#n
    if (rates.size !== n) throw new RangeError(`operators of ${n} compartments cannot use rates of ${rates.size}`)
    if (functionals.length !== this.#f - 1) {
      throw new RangeError(`operators of ${this.#f - 1} functionals cannot use ${functionals.length}`)
    }
    checkRates(rates)
    let sigma = 0
    for (let j = 0; j < n; j++) sigma = Math.max(sigma, outflow(rates, j))
    for (let r = 1; r < this.#f; r++) {
      const { weights, decay } = functionals[r - 1]
      checkFunctional(weights, decay, n)
      this.#decays[r] = decay
      sigma = Math.max(sigma, decay)
      for (let j = 0; j < n; j++) this.#weights[r * n + j] = weights[j]
    }
    for (let j = 0; j < n; j++) {
      this.#weights[j] = rates.out[j]
      for (let i = 0; i < n; i++) this.#shifted[i * n + j] = rates.between[i * n + j]
      this.#shifted[j * n + j] = sigma - outflow(rates, j)
    }
    this.#sigma = sigma
  }

  /**
   * Write the operator over `duration` into storage made by `create`. Throws `RangeError` for a negative or infinite
   * duration and `NumericalFailure` where rate x duration leaves the range of double precision.
   */
  into(duration: number, operator: Operator): void {
    if (!(duration >= 0 && duration < Number.POSITIVE_INFINITY)) {
      throw new RangeError(`a duration must be finite and not negative, got ${duration}`)
    }
    const reach = this.#sigma * duration
    if (!(reach < 1e300)) throw new NumericalFailure('out-of-range', `rate x duration is ${reach}`)
    const plan = this.#plan
    planInto(reach, this.#n, this.#f + this.#m, plan)
    let step = duration
    for (let k = 0; k < plan.squarings; k++) step *= 0.5
    this.#startInto(step, plan.degree)
    for (let k = 0; k < plan.squarings; k++) {
      this.#double(step)
      step *= 2
    }
    this.#copyInto(duration, operator)
  }

  /** The series at the short step, everything times e^-nu, then mass balance (METHODS 1.3). */
  #startInto(step: number, degree: number): void {
    const shifted = this.#shifted
    const first = this.#powers[1]
    for (let p = 0; p < first.length; p++) first[p] = shifted[p] * step
    this.#sumPowers(degree)
    this.#sumRowsAndColumns(step, degree)
    const damping = exp(-this.#sigma * step)
    scale(this.#block, damping)
    scale(this.#columns, damping)
    scale(this.#direct, damping)
    this.#balance()
  }

  /** X = sum_{k=0..m} N^k / k!, as a polynomial in N^stride with polynomials of lower degree as coefficients. */
  #sumPowers(degree: number): void {
    const n = this.#n
    const powers = this.#powers
    const { rows } = this.#kernel
    const stride = strideOf(degree)
    for (let k = 1; k < stride; k++) rows(powers[k], n, powers[1], powers[k + 1])
    const highest = powers[stride]
    for (let p = 0; p < n * n; p++) this.#block[p] = INVERSE_FACTORIAL[degree] * highest[p]
    this.#addLowPowers(degree - stride, stride)
    for (let lowest = degree - 2 * stride; lowest >= 0; lowest -= stride) {
      rows(this.#block, n, highest, this.#next)
      this.#swapBlocks()
      this.#addLowPowers(lowest, stride)
    }
  }

  /** Add sum_{k=0..stride-1} N^k / (lowest + k)! to X. */
  #addLowPowers(lowest: number, stride: number): void {
    const n = this.#n
    const block = this.#block
    for (let i = 0; i < n; i++) block[i * n + i] += INVERSE_FACTORIAL[lowest]
    for (let k = 1; k < stride; k++) {
      const power = this.#powers[k]
      const coefficient = INVERSE_FACTORIAL[lowest + k]
      for (let p = 0; p < n * n; p++) block[p] += coefficient * power[p]
    }
  }

  /** R = sum w_k / k!, Phi = sum c_k / k!, H = sum h_k / k!, each term from the one before. */
  #sumRowsAndColumns(step: number, degree: number): void {
    this.#firstTerms(step)
    for (let k = 1; k < degree; k++) this.#nextTerms(step, k)
  }

  /** w_1 = T r, c_1 = T e_j, h_1 = 0. */
  #firstTerms(step: number): void {
    const n = this.#n
    const block = this.#block
    for (let p = 0; p < this.#weights.length; p++) {
      this.#rowTerms[p] = this.#weights[p] * step
      block[n * n + p] = this.#rowTerms[p]
    }
    for (let r = 0; r < this.#f; r++) this.#rowPowers[r] = (this.#sigma - this.#decays[r]) * step
    this.#columnTerms.fill(0)
    for (let c = 0; c < this.#m; c++) this.#columnTerms[c * n + this.#inputs[c]] = step
    this.#columns.set(this.#columnTerms)
    this.#columnPower = this.#sigma * step
    this.#directTerms.fill(0)
    this.#direct.fill(0)
  }

  /**
   * From term k to term k + 1, with mu^k / k! and nu^k / k! at hand:
   * h <- (T r c + mu h) / (k + 1), w <- (w N + mu^k / k! T r) / (k + 1), c <- (N c + nu^k / k! T e_j) / (k + 1).
   */
  #nextTerms(step: number, k: number): void {
    const n = this.#n
    const m = this.#m
    const share = 1 / (k + 1)
    const first = this.#powers[1]
    const weights = this.#weights
    for (let r = 0; r < this.#f; r++) {
      const mu = (this.#sigma - this.#decays[r]) * step
      for (let c = 0; c < m; c++) {
        let sum = 0
        for (let j = 0; j < n; j++) sum += weights[r * n + j] * this.#columnTerms[c * n + j]
        const term = (sum * step + mu * this.#directTerms[r * m + c]) * share
        this.#directTerms[r * m + c] = term
        this.#direct[r * m + c] += term
      }
    }
    this.#kernel.rows(this.#rowTerms, this.#f, first, this.#nextRowTerms)
    for (let r = 0; r < this.#f; r++) {
      const source = this.#rowPowers[r] * step
      for (let j = 0; j < n; j++) {
        const p = r * n + j
        const term = (this.#nextRowTerms[p] + source * weights[p]) * share
        this.#nextRowTerms[p] = term
        this.#block[n * n + p] += term
      }
      this.#rowPowers[r] *= (this.#sigma - this.#decays[r]) * step * share
    }
    this.#kernel.columns(first, this.#columnTerms, m, this.#nextColumnTerms)
    for (let c = 0; c < m; c++) this.#nextColumnTerms[c * n + this.#inputs[c]] += this.#columnPower * step
    for (let p = 0; p < n * m; p++) {
      const term = this.#nextColumnTerms[p] * share
      this.#nextColumnTerms[p] = term
      this.#columns[p] += term
    }
    this.#columnPower *= this.#sigma * step * share
    this.#swapTerms()
  }

  /** From the operator over `step` to that over twice as long (METHODS 1.5): H, R, Phi, X in this order. */
  #double(step: number): void {
    const n = this.#n
    const m = this.#m
    const f = this.#f
    const block = this.#block
    const next = this.#next
    const columns = this.#columns
    this.#kernel.rows(block, n + f, block, next)
    for (let r = 0; r < f; r++) {
      const decay = this.#decays[r] === 0 ? 1 : exp(-this.#decays[r] * step)
      const row = (n + r) * n
      for (let c = 0; c < m; c++) {
        let sum = 0
        for (let j = 0; j < n; j++) sum += block[row + j] * columns[c * n + j]
        this.#direct[r * m + c] += decay * this.#direct[r * m + c] + sum
      }
      for (let j = 0; j < n; j++) next[row + j] += decay * block[row + j]
    }
    this.#kernel.columns(block, columns, m, this.#nextColumnTerms)
    for (let p = 0; p < n * m; p++) columns[p] += this.#nextColumnTerms[p]
    this.#swapBlocks()
    this.#balance()
  }

  /** Divide each column of X and its sink by their sum, which is exactly 1: this keeps doubling from doubling errors. */
  #balance(): void {
    const n = this.#n
    const block = this.#block
    for (let j = 0; j < n; j++) {
      let sum = 0
      for (let p = j; p < (n + 1) * n; p += n) sum += block[p]
      const factor = 1 / sum
      for (let p = j; p < (n + 1) * n; p += n) block[p] *= factor
    }
  }

  #copyInto(duration: number, operator: Operator): void {
    const n = this.#n
    const m = this.#m
    const block = this.#block
    operator.duration = duration
    const { transition, sink, response, sinkResponse, rows, direct, decays } = operator
    for (let p = 0; p < n * n; p++) transition[p] = block[p]
    for (let j = 0; j < n; j++) sink[j] = block[n * n + j]
    for (let p = 0; p < rows.length; p++) rows[p] = block[(n + 1) * n + p]
    for (let c = 0; c < m; c++) {
      sinkResponse[c] = this.#direct[c]
      for (let i = 0; i < n; i++) response[i * m + c] = this.#columns[c * n + i]
    }
    for (let p = 0; p < direct.length; p++) direct[p] = this.#direct[m + p]
    for (let r = 0; r < decays.length; r++) decays[r] = exp(-this.#decays[r + 1] * duration)
  }

  #swapBlocks(): void {
    const block = this.#block
    this.#block = this.#next
    this.#next = block
  }

  #swapTerms(): void {
    const rowTerms = this.#rowTerms
    this.#rowTerms = this.#nextRowTerms
    this.#nextRowTerms = rowTerms
    const columnTerms = this.#columnTerms
    this.#columnTerms = this.#nextColumnTerms
    this.#nextColumnTerms = columnTerms
  }
}

function scale(values: Float64Array, factor: number): void {
  for (let p = 0; p < values.length; p++) values[p] *= factor
}

function checkFunctional(weights: Functional['weights'], decay: number, n: number): void {
  if (weights.length !== n) throw new RangeError(`a functional over ${n} compartments has ${weights.length} weights`)
  if (!(decay >= 0 && decay < Number.POSITIVE_INFINITY)) throw new RangeError(`decay of a functional is ${decay}`)
  for (let j = 0; j < n; j++) {
    if (!(weights[j] >= 0 && weights[j] < Number.POSITIVE_INFINITY))
      throw new RangeError(`weight ${j} of a functional is ${weights[j]}`)
  }
}

/** k!, exact for k up to 18. */
function factorial(k: number): number {
  return k === 0 ? 1 : k * factorial(k - 1)
}
