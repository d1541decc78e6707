import { factorInto, solveInto } from './lu'
import { RODAS5P } from './rodas5p'
import type { RosenbrockCounts, RosenbrockSystem } from './rosenbrockSystem'
import type { ReadonlyVector } from './vector'

const { gamma: G, A, C, H } = RODAS5P
const [, [A21], [A31, A32], [A41, A42, A43], [A51, A52, A53, A54], [A61, A62, A63, A64, A65]] = A
// Both sides of a stage are multiplied by gamma h, and with them C.
const [, [C21], [C31, C32], [C41, C42, C43], [C51, C52, C53, C54], [C61, C62, C63, C64, C65], SEVENTH, EIGHTH] = C.map(
  (row) => row.map((entry) => entry * G)
)
const [C71, C72, C73, C74, C75, C76] = SEVENTH
const [C81, C82, C83, C84, C85, C86, C87] = EIGHTH
const [[H11, H12, H13, H14, H15, H16, H17, H18], [H21, H22, H23, H24, H25, H26, H27, H28], THIRD] = H
const [H31, H32, H33, H34, H35, H36, H37, H38] = THIRD

/**
 * One step of Rodas5P (METHODS 2). `prepare` evaluates f and J at the state, `factor` is for a length `h`, `take` solves
 * the stages; a step that is thrown away begins again at `factor`. Owns its scratch; nothing is allocated after the
 * constructor.
 */
export class RosenbrockStep {
  readonly system: RosenbrockSystem
  readonly counts: RosenbrockCounts = { steps: 0, rejections: 0, factorisations: 0, derivatives: 0, jacobians: 0 }
  /** Length of the step to be factored for. A field, since numbers handed from call to call may be put on the heap. */
  h = 0
  /** State after the step, and the estimated error of each of its entries. */
  readonly next: Float64Array
  readonly error: Float64Array
  /** f and J at the state that the step starts from. */
  readonly derivative: Float64Array
  readonly jacobian: Float64Array
  readonly #k1: Float64Array
  readonly #k2: Float64Array
  readonly #k3: Float64Array
  readonly #k4: Float64Array
  readonly #k5: Float64Array
  readonly #k6: Float64Array
  readonly #k7: Float64Array
  readonly #stage: Float64Array
  readonly #f: Float64Array
  /** I - gamma h J: factors of the leading block, the later rows as they are with reciprocal diagonals. */
  readonly #matrix: Float64Array
  readonly #pivots: Int32Array
  #scaled = 0

  constructor(system: RosenbrockSystem) {
    const { size, coupled } = system
    if (!(Number.isInteger(size) && Number.isInteger(coupled) && size > 0 && coupled >= 0 && coupled <= size)) {
      throw new RangeError(`a system of ${size} states cannot have ${coupled} that are coupled`)
    }
    this.system = system
    this.next = new Float64Array(size)
    this.error = new Float64Array(size)
    this.derivative = new Float64Array(size)
    this.jacobian = new Float64Array(size * size)
    this.#k1 = new Float64Array(size)
    this.#k2 = new Float64Array(size)
    this.#k3 = new Float64Array(size)
    this.#k4 = new Float64Array(size)
    this.#k5 = new Float64Array(size)
    this.#k6 = new Float64Array(size)
    this.#k7 = new Float64Array(size)
    this.#stage = new Float64Array(size)
    this.#f = new Float64Array(size)
    this.#matrix = new Float64Array(size * size)
    this.#pivots = new Int32Array(coupled)
  }

  /** Evaluate f and J at the state that steps will start from. */
  prepare(state: Float64Array): void {
    this.system.derivativeInto(state, this.derivative)
    this.system.jacobianInto(state, this.jacobian)
    this.counts.derivatives += 1
    this.counts.jacobians += 1
  }

  /** Factor I - gamma h J for a step of length `h`; false where it is singular, and the step must be shorter. */
  factor(): boolean {
    const { size, coupled } = this.system
    const scaled = G * this.h
    const matrix = this.#matrix
    const jacobian = this.jacobian
    this.#scaled = scaled
    for (let p = 0; p < matrix.length; p++) matrix[p] = -scaled * jacobian[p]
    for (let i = 0; i < coupled; i++) matrix[i * size + i] += 1
    for (let i = coupled; i < size; i++) matrix[i * size + i] = 1 / (1 + matrix[i * size + i])
    this.counts.factorisations += 1
    return factorInto(matrix, coupled, size, this.#pivots)
  }

  /** Solve the eight stages from `y`, which `prepare` has seen, and write `next` and `error`. */
  take(y: Float64Array): void {
    const n = this.system.size
    const scaled = this.#scaled
    const k1 = this.#k1
    const k2 = this.#k2
    const k3 = this.#k3
    const k4 = this.#k4
    const k5 = this.#k5
    const k6 = this.#k6
    const k7 = this.#k7
    const k8 = this.error
    const s = this.#stage
    const f = this.#f
    const next = this.next
    const f0 = this.derivative
    for (let i = 0; i < n; i++) k1[i] = scaled * f0[i]
    this.#solve(k1)
    for (let i = 0; i < n; i++) s[i] = y[i] + A21 * k1[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) k2[i] = scaled * f[i] + C21 * k1[i]
    this.#solve(k2)
    for (let i = 0; i < n; i++) s[i] = y[i] + A31 * k1[i] + A32 * k2[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) k3[i] = scaled * f[i] + C31 * k1[i] + C32 * k2[i]
    this.#solve(k3)
    for (let i = 0; i < n; i++) s[i] = y[i] + A41 * k1[i] + A42 * k2[i] + A43 * k3[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) k4[i] = scaled * f[i] + C41 * k1[i] + C42 * k2[i] + C43 * k3[i]
    this.#solve(k4)
    for (let i = 0; i < n; i++) s[i] = y[i] + A51 * k1[i] + A52 * k2[i] + A53 * k3[i] + A54 * k4[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) k5[i] = scaled * f[i] + C51 * k1[i] + C52 * k2[i] + C53 * k3[i] + C54 * k4[i]
    this.#solve(k5)
    for (let i = 0; i < n; i++) s[i] = y[i] + A61 * k1[i] + A62 * k2[i] + A63 * k3[i] + A64 * k4[i] + A65 * k5[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) {
      k6[i] = scaled * f[i] + C61 * k1[i] + C62 * k2[i] + C63 * k3[i] + C64 * k4[i] + C65 * k5[i]
    }
    this.#solve(k6)
    // Rows 6 to 8 of A are the same but for the ones at their end: each stage goes on from the one before.
    for (let i = 0; i < n; i++) s[i] += k6[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) {
      k7[i] = scaled * f[i] + C71 * k1[i] + C72 * k2[i] + C73 * k3[i] + C74 * k4[i] + C75 * k5[i] + C76 * k6[i]
    }
    this.#solve(k7)
    for (let i = 0; i < n; i++) s[i] += k7[i]
    this.#evaluate(s, f)
    for (let i = 0; i < n; i++) {
      k8[i] =
        scaled * f[i] + C81 * k1[i] + C82 * k2[i] + C83 * k3[i] + C84 * k4[i] + C85 * k5[i] + C86 * k6[i] + C87 * k7[i]
    }
    this.#solve(k8)
    for (let i = 0; i < n; i++) next[i] = s[i] + k8[i]
  }

  /** Write D_0, D_1 and D_2 of the continuous extension of the step just taken into `out` from `at` on. */
  extensionInto(out: Float64Array, at: number): void {
    const n = this.system.size
    const k1 = this.#k1
    const k2 = this.#k2
    const k3 = this.#k3
    const k4 = this.#k4
    const k5 = this.#k5
    const k6 = this.#k6
    const k7 = this.#k7
    const k8 = this.error
    for (let i = 0; i < n; i++) {
      const a = k1[i]
      const b = k2[i]
      const c = k3[i]
      const d = k4[i]
      const e = k5[i]
      const p = k6[i]
      const q = k7[i]
      const r = k8[i]
      out[at + i] = H11 * a + H12 * b + H13 * c + H14 * d + H15 * e + H16 * p + H17 * q + H18 * r
      out[at + n + i] = H21 * a + H22 * b + H23 * c + H24 * d + H25 * e + H26 * p + H27 * q + H28 * r
      out[at + 2 * n + i] = H31 * a + H32 * b + H33 * c + H34 * d + H35 * e + H36 * p + H37 * q + H38 * r
    }
  }

  #evaluate(state: ReadonlyVector, out: Float64Array): void {
    this.system.derivativeInto(state, out)
    this.counts.derivatives += 1
  }

  #solve(vector: Float64Array): void {
    const { size, coupled } = this.system
    const matrix = this.#matrix
    solveInto(matrix, coupled, size, this.#pivots, vector)
    for (let i = coupled; i < size; i++) {
      const row = i * size
      let sum = vector[i]
      for (let j = 0; j < i; j++) sum -= matrix[row + j] * vector[j]
      vector[i] = sum * matrix[row + i]
    }
  }
}
