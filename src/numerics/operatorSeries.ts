import { decaysInto } from './decays'
import type { Kernel } from './kernel'
import type { NonnegativeForm } from './nonnegativeForm'
import { strideOf } from './taylorPlan'

/** Coefficients of a row's polynomials, k = 0 to 16. */
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
  /** N^k at index k, from 1 to 4; at index 0 as many zeros as any of these or of the rows has numbers. */
  readonly #powers: readonly Float64Array[]
  /** T r N^k of all rows at index k, from 0 to 3. */
  readonly #lowRows: readonly Float64Array[]
  /** X, then R, then the rows of H before they meet a column; and their product with N^stride. */
  #stack: Float64Array
  #nextStack: Float64Array
  readonly #columnProducts: Float64Array
  /** Coefficients of R and H, a set for each row. Those of Phi are the set of the sink, whose decay is 0. */
  readonly #rowCoefficients: Float64Array
  readonly #directCoefficients: Float64Array
  /** Where each row's set begins: rows of one decay share it, as the sink and all areas do. */
  readonly #sets: Int32Array
  /** nu and e^-nu. */
  readonly #nu = new Float64Array(1)
  readonly #damping = new Float64Array(1)

  constructor(form: NonnegativeForm, kernel: Kernel) {
    const { n, m, f } = form
    this.#form = form
    this.#kernel = kernel
    this.#powers = Array.from({ length: 5 }, (_, k) => new Float64Array(k === 0 ? Math.max(n, f) * n : n * n))
    this.#lowRows = Array.from({ length: 4 }, () => new Float64Array(f * n))
    this.#stack = new Float64Array((n + 2 * f) * n)
    this.#nextStack = new Float64Array((n + 2 * f) * n)
    this.#columnProducts = new Float64Array(m * n)
    this.#rowCoefficients = new Float64Array(f * TERMS)
    this.#directCoefficients = new Float64Array(f * TERMS)
    this.#sets = new Int32Array(f)
  }

  /**
   * Write the operator over `step` by series of this degree: X over R (sink first) into `block`, Phi column by column
   * into `columns`, H into `direct`.
   */
  into(step: number, degree: number, block: Float64Array, columns: Float64Array, direct: Float64Array): void {
    const { n, m, f, inputs, shifted, weights, gaps, sigma } = this.#form
    const first = this.#powers[1]
    const sources = this.#lowRows[0]
    for (let p = 0; p < first.length; p++) first[p] = shifted[p] * step
    for (let p = 0; p < sources.length; p++) sources[p] = weights[p] * step
    this.#nu[0] = sigma * step
    for (let r = 0; r < f; r++) {
      const shared = gaps[r] === gaps[0]
      this.#sets[r] = shared ? 0 : r * TERMS
      if (r === 0 || !shared) this.#setCoefficients(r * TERMS, degree, gaps[r] * step)
    }
    this.#raisePowers(degree)
    this.#sumStack(degree)
    this.#sumColumns(degree, columns)

    decaysInto(this.#nu, this.#damping)
    const damping = this.#damping[0]
    const stack = this.#stack
    for (let p = 0; p < block.length; p++) block[p] = stack[p] * damping
    for (let p = 0; p < columns.length; p++) columns[p] *= step * damping
    for (let r = 0; r < f; r++) {
      const row = (n + f + r) * n
      for (let c = 0; c < m; c++) direct[r * m + c] = stack[row + inputs[c]] * step * damping
    }
  }

  /**
   * Coefficients by synthetic division of sum x^k / k!, once at mu for R and once more for H:
   * q_{j-1} = 1 / j! + mu q_j; g_{j-1} = p_j + mu g_j, p those of the sink, at nu.
   */
  #setCoefficients(own: number, degree: number, mu: number): void {
    const q = this.#rowCoefficients
    const g = this.#directCoefficients
    q[own + degree] = 0
    g[own + degree] = 0
    g[own + degree - 1] = 0
    for (let j = degree; j > 0; j--) q[own + j - 1] = INVERSE_FACTORIAL[j] + mu * q[own + j]
    for (let j = degree - 1; j > 0; j--) g[own + j - 1] = q[j] + mu * g[own + j]
  }

  /** N^2 to N^stride, and T r N to T r N^(stride - 1). */
  #raisePowers(degree: number): void {
    const { n, f } = this.#form
    const { rows } = this.#kernel
    const powers = this.#powers
    const lowRows = this.#lowRows
    const stride = strideOf(degree)
    for (let k = 1; k < stride; k++) {
      rows(powers[k], n, powers[1], powers[k + 1])
      rows(lowRows[k - 1], f, powers[1], lowRows[k])
    }
  }

  /**
   * X = sum N^k / k!, R = T r sum q_k N^k, rows of H = T r sum g_k N^k, together: polynomials in N^stride by Horner's
   * rule, whose coefficients are polynomials of lower degree [Paterson & Stockmeyer 1973].
   */
  #sumStack(degree: number): void {
    const { n, f } = this.#form
    const stride = strideOf(degree)
    const highest = this.#powers[stride]
    const start = this.#stack
    for (let p = 0; p < n * n; p++) start[p] = INVERSE_FACTORIAL[degree] * highest[p]
    for (let p = n * n; p < start.length; p++) start[p] = 0
    for (let lowest = degree - stride; lowest >= 0; lowest -= stride) {
      if (lowest < degree - stride) {
        this.#kernel.rows(this.#stack, n + 2 * f, highest, this.#nextStack)
        const product = this.#nextStack
        this.#nextStack = this.#stack
        this.#stack = product
      }
      this.#addLowPowers(lowest, stride)
    }
  }

  /** Add the terms with N^lowest to N^(lowest + stride - 1), divided by N^lowest, to everything in the stack. */
  #addLowPowers(lowest: number, stride: number): void {
    const { n, f } = this.#form
    const stack = this.#stack
    const [absent, first] = this.#powers
    const second = stride > 2 ? this.#powers[2] : absent
    const third = stride > 3 ? this.#powers[3] : absent
    const c1 = INVERSE_FACTORIAL[lowest + 1]
    const c2 = INVERSE_FACTORIAL[lowest + 2]
    const c3 = INVERSE_FACTORIAL[lowest + 3]
    for (let p = 0; p < n * n; p++) stack[p] += c1 * first[p] + c2 * second[p] + c3 * third[p]
    for (let i = 0; i < n; i++) stack[i * n + i] += INVERSE_FACTORIAL[lowest]
    for (let r = 0; r < f; r++) {
      const term = this.#sets[r] + lowest
      this.#addLowRow(r, term, stride, this.#rowCoefficients, (n + r) * n)
      this.#addLowRow(r, term, stride, this.#directCoefficients, (n + f + r) * n)
    }
  }

  /** The same for one row that starts at `place` in the stack, with its coefficients from `term` on. */
  #addLowRow(r: number, term: number, stride: number, coefficients: Float64Array, place: number): void {
    const { n } = this.#form
    const stack = this.#stack
    const [sources, first] = this.#lowRows
    const absent = this.#powers[0]
    const second = stride > 2 ? this.#lowRows[2] : absent
    const third = stride > 3 ? this.#lowRows[3] : absent
    const c0 = coefficients[term]
    const c1 = coefficients[term + 1]
    const c2 = coefficients[term + 2]
    const c3 = coefficients[term + 3]
    const row = r * n
    for (let j = 0; j < n; j++) {
      const p = row + j
      stack[place + j] += c0 * sources[p] + c1 * first[p] + c2 * second[p] + c3 * third[p]
    }
  }

  /** Phi = T sum p_k N^k e_c, but for the factor T: the low powers stand in columns of N^k. */
  #sumColumns(degree: number, columns: Float64Array): void {
    const { n, m, inputs } = this.#form
    if (m === 0) return
    const stride = strideOf(degree)
    const products = this.#columnProducts
    const p = this.#rowCoefficients
    for (let q = 0; q < n * m; q++) products[q] = 0
    for (let lowest = degree - stride; lowest >= 0; lowest -= stride) {
      if (lowest < degree - stride) this.#kernel.columns(this.#powers[stride], columns, m, products)
      for (let c = 0; c < m; c++) {
        const input = inputs[c]
        const own = c * n
        products[own + input] += p[lowest]
        for (let k = 1; k < stride; k++) {
          const power = this.#powers[k]
          for (let i = 0; i < n; i++) products[own + i] += p[lowest + k] * power[i * n + input]
        }
        for (let i = own; i < own + n; i++) columns[i] = products[i]
      }
    }
  }
}
