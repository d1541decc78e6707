import { decaysInto } from './decays'
import type { Kernel } from './kernel'
import type { NonnegativeForm } from './nonnegativeForm'
import type { TaylorPlan } from './taylorPlan'

/** Coefficients of a polynomial, k = 0 to 16. */
const TERMS = 17
/** 1 / k!. */
const INVERSE_FACTORIAL = Float64Array.from({ length: TERMS }, (_, k) => 1 / factorial(k))

/** k!, exact for k up to 18. */
function factorial(k: number): number {
  return k === 0 ? 1 : k * factorial(k - 1)
}

/**
 * The operator over a short step T by truncated series with nothing but nonnegative terms (METHODS 1.3): X, R, Phi and H
 * are polynomials in N = (K + sigma I) T, all evaluated with the same few powers of N. Owns its scratch; `into`
 * allocates nothing. Numbers that methods share stand in arrays: handed over, they would be allocated.
 */
export class OperatorSeries {
  readonly #form: NonnegativeForm
  readonly #kernel: Kernel
  /** N. */
  readonly #first: Float64Array
  /** N^k above T r N^k, a row for each functional; index k from 0 to 4. */
  readonly #powers: readonly [Float64Array, Float64Array, Float64Array, Float64Array, Float64Array]
  /** As many zeros as a power has numbers: stands for the powers that a short stride does without. */
  readonly #absent: Float64Array
  /** X, then R, then the rows of H before they meet a column; and their product with N^stride. */
  #stack: Float64Array
  #product: Float64Array
  readonly #columnProducts: Float64Array
  /**
   * Sets of coefficients: those of R, a set for each row, then those of H. Those of Phi are the sink's in R, whose decay
   * is 0.
   */
  readonly #coefficients: Float64Array
  /** Where the set of each row of R and of H begins: rows of one decay share it, as the sink and all areas do. */
  readonly #sets: Int32Array
  /** nu and e^-nu. */
  readonly #nu = new Float64Array(1)
  readonly #damping = new Float64Array(1)

  constructor(form: NonnegativeForm, kernel: Kernel) {
    const { n, m, f } = form
    const power = () => new Float64Array((n + f) * n)
    this.#form = form
    this.#kernel = kernel
    this.#first = new Float64Array(n * n)
    this.#powers = [power(), power(), power(), power(), power()]
    for (let i = 0; i < n; i++) this.#powers[0][i * n + i] = 1
    this.#absent = power()
    this.#stack = new Float64Array((n + 2 * f) * n)
    this.#product = new Float64Array((n + 2 * f) * n)
    this.#columnProducts = new Float64Array(m * n)
    this.#coefficients = new Float64Array(2 * f * TERMS)
    this.#sets = new Int32Array(2 * f)
  }

  /**
   * Write the operator over the time in `step` by series of the plan's degree: X over R (sink first) into `block`, Phi column by
   * column into `columns`, H into `direct`.
   */
  into(step: Float64Array, plan: TaylorPlan, block: Float64Array, columns: Float64Array, direct: Float64Array): void {
    const { n, m, f, inputs, sigma } = this.#form
    const { degree, stride } = plan
    const stacked = block.length
    this.#nu[0] = sigma * step[0]
    this.#raisePowers(step, stride)
    this.#setCoefficients(step, degree)
    this.#sumStack(degree, stride)
    if (m > 0) this.#sumColumns(degree, stride, columns)

    decaysInto(this.#nu, this.#damping)
    const damping = this.#damping[0]
    const timed = step[0] * damping
    const stack = this.#stack
    for (let p = 0; p < stacked; p++) block[p] = stack[p] * damping
    for (let p = 0; p < columns.length; p++) columns[p] *= timed
    for (let r = 0; r < f; r++) {
      for (let c = 0; c < m; c++) direct[r * m + c] = stack[stacked + r * n + inputs[c]] * timed
    }
  }

  /** N to N^stride, and T r to T r N^(stride - 1). */
  #raisePowers(step: Float64Array, stride: number): void {
    const { n, f, shifted, weights } = this.#form
    const time = step[0]
    const first = this.#first
    const powers = this.#powers
    const sources = powers[0]
    for (let p = 0; p < shifted.length; p++) first[p] = shifted[p] * time
    for (let p = 0; p < weights.length; p++) sources[n * n + p] = weights[p] * time
    for (let k = 1; k <= stride; k++) this.#kernel.rows(powers[k - 1], k < stride ? n + f : n, first, powers[k])
  }

  /** The sets of rows that have a decay of their own, and who shares them. */
  #setCoefficients(step: Float64Array, degree: number): void {
    const { f, gaps } = this.#form
    const sets = this.#sets
    for (let r = 0; r < f; r++) {
      const shared = gaps[r] === gaps[0]
      const own = shared ? 0 : r * TERMS
      sets[r] = own
      sets[f + r] = own + f * TERMS
      if (r === 0 || !shared) this.#divide(r, degree, step)
    }
  }

  /**
   * Coefficients by synthetic division of sum x^k / k!, once at mu for R and once more for H:
   * q_{j-1} = 1 / j! + mu q_j; g_{j-1} = p_j + mu g_j, p those of the sink, at nu.
   */
  #divide(r: number, degree: number, step: Float64Array): void {
    const mu = this.#form.gaps[r] * step[0]
    const own = r * TERMS
    const coefficients = this.#coefficients
    const ofDirect = own + this.#form.f * TERMS
    let q = 0
    let g = 0
    coefficients[own + degree] = 0
    coefficients[ofDirect + degree] = 0
    for (let j = degree; j > 0; j--) {
      g = (j < degree ? coefficients[j] : 0) + mu * g
      q = INVERSE_FACTORIAL[j] + mu * q
      coefficients[own + j - 1] = q
      coefficients[ofDirect + j - 1] = g
    }
  }

  /**
   * X = sum N^k / k!, R = T r sum q_k N^k, rows of H = T r sum g_k N^k, together: polynomials in N^stride by Horner's
   * rule, whose coefficients are polynomials of lower degree [Paterson & Stockmeyer 1973].
   */
  #sumStack(degree: number, stride: number): void {
    const { n, f } = this.#form
    const highest = this.#powers[stride]
    const start = this.#stack
    for (let p = 0; p < n * n; p++) start[p] = INVERSE_FACTORIAL[degree] * highest[p]
    for (let p = n * n; p < start.length; p++) start[p] = 0
    this.#addLowPowers(degree - stride, stride)
    for (let lowest = degree - 2 * stride; lowest >= 0; lowest -= stride) {
      const product = this.#product
      this.#kernel.rows(this.#stack, n + 2 * f, highest, product)
      this.#product = this.#stack
      this.#stack = product
      this.#addLowPowers(lowest, stride)
    }
  }

  /** Add the terms with N^lowest to N^(lowest + stride - 1), divided by N^lowest, to every row of the stack. */
  #addLowPowers(lowest: number, stride: number): void {
    const { n, f } = this.#form
    const stack = this.#stack
    const sets = this.#sets
    const coefficients = this.#coefficients
    const powers = this.#powers
    const sources = powers[0]
    const first = powers[1]
    const second = stride > 2 ? powers[2] : this.#absent
    const third = stride > 3 ? powers[3] : this.#absent
    const d1 = INVERSE_FACTORIAL[lowest + 1]
    const d2 = INVERSE_FACTORIAL[lowest + 2]
    const d3 = INVERSE_FACTORIAL[lowest + 3]
    for (let p = 0; p < n * n; p++) stack[p] += d1 * first[p] + d2 * second[p] + d3 * third[p]
    for (let p = 0; p < n * n; p += n + 1) stack[p] += INVERSE_FACTORIAL[lowest]
    for (let i = 0; i < 2 * f; i++) {
      const term = sets[i] + lowest
      const c0 = coefficients[term]
      const c1 = coefficients[term + 1]
      const c2 = coefficients[term + 2]
      const c3 = coefficients[term + 3]
      // R and H have the same sources.
      const source = (n + (i < f ? i : i - f)) * n
      const place = (n + i) * n
      for (let j = 0; j < n; j++) {
        const p = source + j
        stack[place + j] += c0 * sources[p] + c1 * first[p] + c2 * second[p] + c3 * third[p]
      }
    }
  }

  /** Phi = T sum p_k N^k e_c, but for the factor T: the low powers stand in columns of N^k. */
  #sumColumns(degree: number, stride: number, columns: Float64Array): void {
    const { n, m, inputs } = this.#form
    const { columns: multiply } = this.#kernel
    const coefficients = this.#coefficients
    const products = this.#columnProducts
    const powers = this.#powers
    const highest = powers[stride]
    const zeroth = powers[0]
    const first = powers[1]
    const second = stride > 2 ? powers[2] : this.#absent
    const third = stride > 3 ? powers[3] : this.#absent
    for (let q = 0; q < products.length; q++) products[q] = 0
    for (let term = degree - stride; term >= 0; term -= stride) {
      const c0 = coefficients[term]
      const c1 = coefficients[term + 1]
      const c2 = coefficients[term + 2]
      const c3 = coefficients[term + 3]
      for (let c = 0, q = 0; c < m; c++) {
        for (let p = inputs[c]; p < n * n; p += n, q++) {
          columns[q] = products[q] + (c0 * zeroth[p] + c1 * first[p] + c2 * second[p] + c3 * third[p])
        }
      }
      if (term > 0) multiply(highest, n, columns, m, products)
    }
  }
}
