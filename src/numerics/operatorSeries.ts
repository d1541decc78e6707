import { decaysInto } from './decays'
import type { Kernel } from './kernels'
import type { NonnegativeForm } from './nonnegativeForm'
import { strideOf } from './taylorPlan'

/** 1 / k! for k = 0 to 16. */
const INVERSE_FACTORIAL = Float64Array.from({ length: 17 }, (_, k) => 1 / factorial(k))

/** k!, exact for k up to 18. */
function factorial(k: number): number {
  return k === 0 ? 1 : k * factorial(k - 1)
}

/**
 * The operator over a short step by truncated series with nothing but nonnegative terms (METHODS 1.3). Owns its scratch;
 * `into` allocates nothing.
 */
export class OperatorSeries {
  readonly #form: NonnegativeForm
  readonly #kernel: Kernel
  /** N^k at index k, from 1 to 4, N = (K + sigma I) T; and the product of the polynomial so far. */
  readonly #powers: readonly Float64Array[]
  readonly #product: Float64Array
  /** Terms of R, Phi and H, and room for the next. */
  readonly #rowTerms: Float64Array
  readonly #rowProducts: Float64Array
  readonly #columnTerms: Float64Array
  readonly #columnProducts: Float64Array
  readonly #directTerms: Float64Array
  /** T r and mu of each row, mu^k / k!, nu and e^-nu. Numbers stand in arrays: handed to a method they would be allocated. */
  readonly #sources: Float64Array
  readonly #mus: Float64Array
  readonly #rowPowers: Float64Array
  readonly #nu = new Float64Array(1)
  readonly #damping = new Float64Array(1)

  constructor(form: NonnegativeForm, kernel: Kernel) {
    const { n, m, f } = form
    this.#form = form
    this.#kernel = kernel
    this.#powers = Array.from({ length: 5 }, () => new Float64Array(n * n))
    this.#product = new Float64Array(n * n)
    this.#rowTerms = new Float64Array(f * n)
    this.#rowProducts = new Float64Array(f * n)
    this.#columnTerms = new Float64Array(m * n)
    this.#columnProducts = new Float64Array(m * n)
    this.#directTerms = new Float64Array(f * m)
    this.#sources = new Float64Array(f * n)
    this.#mus = new Float64Array(f)
    this.#rowPowers = new Float64Array(f)
  }

  /**
   * Write the operator over `step` by series of this degree: X over R (sink first) into `block`, Phi column by column
   * into `columns`, H into `direct`.
   */
  into(step: number, degree: number, block: Float64Array, columns: Float64Array, direct: Float64Array): void {
    const { n, m, inputs, shifted, weights, gaps, sigma } = this.#form
    const first = this.#powers[1]
    const sources = this.#sources
    for (let p = 0; p < first.length; p++) first[p] = shifted[p] * step
    for (let p = 0; p < sources.length; p++) sources[p] = weights[p] * step
    for (let r = 0; r < gaps.length; r++) this.#mus[r] = gaps[r] * step
    this.#nu[0] = sigma * step
    columns.fill(0)
    for (let c = 0; c < m; c++) columns[c * n + inputs[c]] = step
    this.#sumPowers(degree, block)
    this.#sumColumns(degree, columns, direct)
    this.#sumRows(degree, block)
    this.#damp(block, columns, direct)
  }

  /** Everything times e^-nu. */
  #damp(block: Float64Array, columns: Float64Array, direct: Float64Array): void {
    decaysInto(this.#nu, this.#damping)
    const damping = this.#damping[0]
    for (let p = 0; p < block.length; p++) block[p] *= damping
    for (let p = 0; p < columns.length; p++) columns[p] *= damping
    for (let p = 0; p < direct.length; p++) direct[p] *= damping
  }

  /** X = sum_{k=0..m} N^k / k!, as a polynomial in N^stride with polynomials of lower degree as coefficients. */
  #sumPowers(degree: number, block: Float64Array): void {
    const { n } = this.#form
    const { rows } = this.#kernel
    const powers = this.#powers
    const product = this.#product
    const stride = strideOf(degree)
    for (let k = 1; k < stride; k++) rows(powers[k], n, powers[1], powers[k + 1])
    const highest = powers[stride]
    for (let p = 0; p < n * n; p++) product[p] = INVERSE_FACTORIAL[degree] * highest[p]
    for (let lowest = degree - stride; lowest >= 0; lowest -= stride) {
      // `product` holds what stands above N^stride; add the powers from `lowest` on below it.
      for (let i = 0; i < n; i++) product[i * n + i] += INVERSE_FACTORIAL[lowest]
      for (let k = 1; k < stride; k++) {
        const power = powers[k]
        const coefficient = INVERSE_FACTORIAL[lowest + k]
        for (let p = 0; p < n * n; p++) product[p] += coefficient * power[p]
      }
      if (lowest === 0) break
      rows(product, n, highest, block)
      for (let p = 0; p < n * n; p++) product[p] = block[p]
    }
    for (let p = 0; p < n * n; p++) block[p] = product[p]
  }

  /**
   * Phi = sum c_k / k!: c_1 = T e_j, which stands in `columns`, c_{k+1} = N c_k + nu^k T e_j; and with them
   * H = sum h_k / k!: h_1 = 0, h_{k+1} = T r c_k + mu h_k. Each term comes divided by its factorial.
   */
  #sumColumns(degree: number, columns: Float64Array, direct: Float64Array): void {
    const { n, m, f, inputs } = this.#form
    if (m === 0) return
    const first = this.#powers[1]
    const terms = this.#columnTerms
    const products = this.#columnProducts
    const directTerms = this.#directTerms
    const sources = this.#sources
    const mus = this.#mus
    const nu = this.#nu[0]
    const step = columns[inputs[0]]
    terms.set(columns)
    directTerms.fill(0)
    direct.fill(0)
    let power = nu
    for (let k = 1; k < degree; k++) {
      const share = 1 / (k + 1)
      for (let r = 0; r < f; r++) {
        for (let c = 0; c < m; c++) {
          let sum = 0
          for (let j = 0; j < n; j++) sum += sources[r * n + j] * terms[c * n + j]
          const p = r * m + c
          const term = (sum + mus[r] * directTerms[p]) * share
          directTerms[p] = term
          direct[p] += term
        }
      }
      this.#kernel.columns(first, terms, m, products)
      for (let c = 0; c < m; c++) products[c * n + inputs[c]] += power * step
      for (let p = 0; p < n * m; p++) {
        const term = products[p] * share
        terms[p] = term
        columns[p] += term
      }
      power *= nu * share
    }
  }

  /** R = sum w_k / k!: w_1 = T r, w_{k+1} = w_k N + mu^k T r, below X in `block`. Each term comes divided by its factorial. */
  #sumRows(degree: number, block: Float64Array): void {
    const { n, f } = this.#form
    const first = this.#powers[1]
    const terms = this.#rowTerms
    const products = this.#rowProducts
    const sources = this.#sources
    const powers = this.#rowPowers
    const mus = this.#mus
    const below = n * n
    terms.set(sources)
    powers.set(mus)
    for (let p = 0; p < f * n; p++) block[below + p] = terms[p]
    for (let k = 1; k < degree; k++) {
      const share = 1 / (k + 1)
      this.#kernel.rows(terms, f, first, products)
      for (let r = 0; r < f; r++) {
        const power = powers[r]
        for (let p = r * n; p < (r + 1) * n; p++) {
          const term = (products[p] + power * sources[p]) * share
          terms[p] = term
          block[below + p] += term
        }
        powers[r] = power * mus[r] * share
      }
    }
  }
}
