import { Rosenbrock } from '../../src/numerics/rosenbrock'
import type { RosenbrockCounts, RosenbrockSystem } from '../../src/numerics/rosenbrockSystem'

/** A regimen of equal boluses into the first state of a nonlinear model; the peers in C and Python hold the same two. */
export interface DosedProblem {
  readonly name: string
  readonly title: string
  readonly system: RosenbrockSystem
  readonly initial: readonly number[]
  readonly dose: number
  readonly every: number
  readonly doses: number
  /** The state whose value at the end of every interval is compared, and the largest it gets. */
  readonly compared: number
  readonly peak: number
}

/** Depot, central (20 L) and a peripheral that fills within minutes; saturable elimination of 18 mg/h at most, half at 2.5 mg/L. */
export const SATURABLE: DosedProblem = {
  name: 'saturable',
  title: 'two compartments and depot, saturable elimination, 28 doses',
  system: {
    size: 3,
    coupled: 3,
    derivativeInto(y, out) {
      const absorbed = 1.1 * y[0]
      const exchanged = 5 * y[1] - 0.5 * y[2]
      const eliminated = y[1] > 0 ? (18 * y[1]) / (50 + y[1]) : 0.36 * y[1]
      out[0] = -absorbed
      out[1] = absorbed - exchanged - eliminated
      out[2] = exchanged
    },
    jacobianInto(y, out) {
      const sum = 50 + y[1]
      const slope = y[1] > 0 ? 900 / (sum * sum) : 0.36
      out[0] = -1.1
      out[1] = 0
      out[2] = 0
      out[3] = 1.1
      out[4] = -5 - slope
      out[5] = 0.5
      out[6] = 0
      out[7] = 5
      out[8] = -0.5
    }
  },
  initial: [0, 0, 0],
  dose: 180,
  every: 12,
  doses: 28,
  compared: 1,
  peak: 200
}

/** Drug (3 L), peripheral, target and complex with turnover; times in h, six doses in twelve weeks. */
export const TARGET_MEDIATED: DosedProblem = {
  name: 'target-mediated',
  title: 'full target-mediated disposition, 6 doses in 12 weeks',
  system: {
    size: 4,
    coupled: 4,
    derivativeInto(y, out) {
      const exchanged = 0.007 * y[0] - 0.01 * y[1]
      const bound = (10 / 3) * y[0] * y[2] - 0.5 * y[3]
      out[0] = -exchanged - bound - 0.003 * y[0]
      out[1] = exchanged
      out[2] = 0.06 - bound - 0.02 * y[2]
      out[3] = bound - 0.005 * y[3]
    },
    jacobianInto(y, out) {
      const byDrug = (10 / 3) * y[2]
      const byTarget = (10 / 3) * y[0]
      out[0] = -0.007 - byDrug - 0.003
      out[1] = 0.01
      out[2] = -byTarget
      out[3] = 0.5
      out[4] = 0.007
      out[5] = -0.01
      out[6] = 0
      out[7] = 0
      out[8] = -byDrug
      out[9] = 0
      out[10] = -byTarget - 0.02
      out[11] = 0.5
      out[12] = byDrug
      out[13] = 0
      out[14] = byTarget
      out[15] = -0.505
    }
  },
  initial: [0, 0, 3, 0],
  dose: 30,
  every: 336,
  doses: 6,
  compared: 0,
  peak: 30
}

/** Solves one problem again and again with one set of scratch. */
export class Dosed {
  readonly problem: DosedProblem
  readonly #method: Rosenbrock
  readonly #state: Float64Array

  constructor(problem: DosedProblem, relative: number) {
    const absolute = 1e-3 * relative * problem.dose
    this.problem = problem
    this.#method = new Rosenbrock(problem.system, {
      tolerance: { relative, absoluteInto: (_state, _step, out) => out.fill(absolute) },
      nonnegative: problem.initial.map(() => true)
    })
    this.#state = new Float64Array(problem.system.size)
  }

  /** The compared state at the end of every interval. */
  solve(): number[] {
    const { initial, doses, dose, every, compared } = this.problem
    const state = this.#state
    state.set(initial)
    const ends: number[] = []
    for (let k = 0; k < doses; k++) {
      state[0] += dose
      this.#method.advance(state, every)
      ends.push(state[compared])
    }
    return ends
  }

  get counts(): Readonly<RosenbrockCounts> {
    return this.#method.counts
  }
}

/** Largest error of what is compared, relative to its value or a thousandth of the peak. */
export function errorOf(problem: DosedProblem, ends: readonly number[], exact: readonly number[]): number {
  return Math.max(...exact.map((value, k) => Math.abs(ends[k] - value) / Math.max(value, 1e-3 * problem.peak)))
}
