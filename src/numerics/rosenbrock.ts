import { pow } from './elementary'
import type { NumericalFailureCode } from './numericalFailure'
import type { RosenbrockRecorder } from './rosenbrockCourse'
import { RosenbrockFailure } from './rosenbrockFailure'
import { RosenbrockStep } from './rosenbrockStep'
import type { RosenbrockCounts, RosenbrockSystem, RosenbrockTolerance } from './rosenbrockSystem'

/** Looser than this, a step may land on a branch of the solution that does not exist. */
const LOOSEST_RELATIVE = 1e-4
/** Tighter than this, rounding is all that is left of an error estimate. */
const TIGHTEST_RELATIVE = 1e-14
/** A state that cannot be negative may be so by this many absolute tolerances. */
const BELOW_ZERO = 10
/** Steps tried in one stretch. */
const BUDGET = 100_000
/** A step thrown away this often in a row has shrunk by more than 1e-40. */
const REJECTIONS_IN_A_ROW = 60
/** A step aims at this part of what its error estimate would allow. */
const SAFETY = 0.9
/** Most that a step grows or shrinks by from one to the next. */
const GROWTH = 6
const SHRINKAGE = 0.2
/** What is left of a step whose error is not a number, whose matrix is singular or which went below zero. */
const RETREAT = 0.25

export interface RosenbrockOptions {
  readonly tolerance: RosenbrockTolerance
  /** One entry a state: whether it cannot be negative. A step that takes it below -10 absolute tolerances is thrown away. */
  readonly nonnegative?: readonly boolean[]
  /** Steps tried in one stretch before it is given up; 100,000 where not given. */
  readonly budget?: number
}

/**
 * Integrates a stiff system over stretches of time with Rodas5P (METHODS 2): adaptive steps, an end that is met exactly,
 * dense output where a recorder is handed in. The error of a step is held below the tolerance in the root mean square over
 * the states; what is achieved at the end may be ten to twenty times the tolerance.
 *
 * Throws `RosenbrockFailure` with time, step and state: 'step-too-small', 'too-many-steps', 'not-a-number'. Linear invariants
 * of the system are kept to rounding. Owns its scratch; `advance` allocates nothing a step. Not to be shared.
 */
export class Rosenbrock {
  readonly #step: RosenbrockStep
  readonly #tolerance: RosenbrockTolerance
  readonly #relative: number
  readonly #nonnegative: readonly boolean[] | undefined
  readonly #budget: number
  readonly #absolute: Float64Array
  /** Of the step tried last. */
  #error = 0

  constructor(system: RosenbrockSystem, options: RosenbrockOptions) {
    const { tolerance, nonnegative, budget = BUDGET } = options
    if (!(tolerance.relative > 0)) throw new RangeError(`a relative tolerance is positive, got ${tolerance.relative}`)
    if (nonnegative !== undefined && nonnegative.length !== system.size) {
      throw new RangeError(`${nonnegative.length} signs for ${system.size} states`)
    }
    this.#step = new RosenbrockStep(system)
    this.#tolerance = tolerance
    this.#relative = Math.min(LOOSEST_RELATIVE, Math.max(TIGHTEST_RELATIVE, tolerance.relative))
    this.#nonnegative = nonnegative
    this.#budget = budget
    this.#absolute = new Float64Array(system.size)
  }

  /** Work done since this object was made. */
  get counts(): Readonly<RosenbrockCounts> {
    return this.#step.counts
  }

  /**
   * Carry `state` on by `duration`, in place. The operations of a step: evaluate f and J where the step starts; factor; solve
   * the stages; weigh the error; take the step or a shorter one.
   */
  advance(state: Float64Array, duration: number, recorder?: RosenbrockRecorder): void {
    if (!(duration >= 0 && duration < Number.POSITIVE_INFINITY)) {
      throw new RangeError(`a duration must be finite and not negative, got ${duration}`)
    }
    const step = this.#step
    const { counts } = step
    recorder?.begin()
    if (duration === 0) return
    step.prepare(state)
    let time = 0
    let h = this.#firstStep(state, duration)
    let tried = 0
    let inARow = 0
    let lastStep = 0
    let lastError = 0
    while (time < duration) {
      const remaining = duration - time
      const isLast = h >= remaining * (1 - 1e-9)
      if (isLast) h = remaining
      // Two even steps rather than a long one and a rest.
      else if (2 * h > remaining) h = 0.5 * remaining
      if (tried++ >= this.#budget) this.#fail('too-many-steps', `${this.#budget} steps are used up`, time, h, state)
      if (inARow >= REJECTIONS_IN_A_ROW || !(time + h > time)) this.#failAtStep(time, h, state)
      this.#tolerance.absoluteInto(state, h, this.#absolute)
      step.h = h
      this.#try(state)
      const error = this.#error
      if (!(error <= 1)) {
        // An infinite error stands for a step that was none.
        h *= error < Number.POSITIVE_INFINITY ? Math.max(SHRINKAGE, SAFETY * fifthRoot(1 / error)) : RETREAT
        counts.rejections += 1
        inARow += 1
        continue
      }
      counts.steps += 1
      if (recorder !== undefined) {
        recorder.add(time, state)
        step.extensionInto(recorder.rows, recorder.at + state.length)
        recorder.keep()
      }
      time = isLast ? duration : time + h
      state.set(step.next)
      // The predictive controller of Gustafsson: how the error went over the last two steps [Hairer & Wanner, IV.8].
      let inverse = error
      if (lastStep > 0) {
        const ratio = h / lastStep
        const predicted = (error * error) / (lastError * ratio * ratio * ratio * ratio * ratio)
        inverse = Math.max(error, predicted)
      }
      lastStep = h
      lastError = Math.max(1e-2, error)
      let factor = SAFETY * fifthRoot(1 / Math.max(inverse, 1e-6))
      factor = Math.max(SHRINKAGE, Math.min(inARow > 0 ? 1 : GROWTH, factor))
      h *= factor
      inARow = 0
      if (time < duration) step.prepare(state)
    }
  }

  /** Factor and solve for one step. Leaves its error in units of the tolerance, infinite where it is not to be used. */
  #try(state: Float64Array): void {
    const step = this.#step
    this.#error = Number.POSITIVE_INFINITY
    if (!step.factor()) return
    step.take(state)
    const { next, error } = step
    const absolute = this.#absolute
    const relative = this.#relative
    const nonnegative = this.#nonnegative
    const n = state.length
    let sum = 0
    for (let i = 0; i < n; i++) {
      const e = error[i]
      if (nonnegative !== undefined && next[i] < -BELOW_ZERO * absolute[i] && nonnegative[i]) return
      if (e === 0) continue
      const scaled = e / (absolute[i] + relative * Math.max(Math.abs(state[i]), Math.abs(next[i])))
      sum += scaled * scaled
    }
    // A NaN anywhere is in the sum.
    if (sum < Number.POSITIVE_INFINITY) this.#error = Math.sqrt(sum / n)
  }

  /**
   * A first step from f and J f: with d1 and d2 their sizes in units of the tolerance, the time scale of the change is
   * d1/d2 and the error of a step of order 5 about d1 (d2/d1)^5 h^6.
   */
  #firstStep(state: Float64Array, duration: number): number {
    const { derivative, jacobian } = this.#step
    const absolute = this.#absolute
    const n = state.length
    let fastest = 0
    for (let i = 0; i < n; i++) fastest = Math.max(fastest, Math.abs(jacobian[i * n + i]))
    const trial = fastest * duration > 1 ? 1 / fastest : duration
    this.#tolerance.absoluteInto(state, trial, absolute)
    let first = 0
    let second = 0
    for (let i = 0; i < n; i++) {
      const weight = absolute[i] + this.#relative * (Math.abs(state[i]) + trial * Math.abs(derivative[i]))
      let change = 0
      for (let j = 0; j < n; j++) change += jacobian[i * n + j] * derivative[j]
      if (derivative[i] !== 0) first += (derivative[i] / weight) * (derivative[i] / weight)
      if (change !== 0 && weight > 0) second += (change / weight) * (change / weight)
    }
    const d1 = Math.sqrt(first / n)
    const d2 = Math.sqrt(second / n)
    const step = (pow(d2 / d1 / d1, 1 / 6) * d1) / d2
    return step > 0 && step < duration ? step : duration
  }

  #failAtStep(time: number, h: number, state: Float64Array): never {
    const { derivative, jacobian } = this.#step
    const bad = !(derivative.every(Number.isFinite) && jacobian.every(Number.isFinite) && state.every(Number.isFinite))
    if (bad) this.#fail('not-a-number', 'the derivative is not a finite number', time, h, state)
    this.#fail('step-too-small', 'no step is short enough', time, h, state)
  }

  #fail(code: NumericalFailureCode, why: string, time: number, h: number, state: Float64Array): never {
    throw new RosenbrockFailure(code, { why, time, step: h, state: Array.from(state) })
  }
}

/** About x^0.2, near enough to choose a step by: x^(3/16), by square roots, which are quick and the same everywhere. */
function fifthRoot(x: number): number {
  const eighth = Math.sqrt(Math.sqrt(Math.sqrt(x)))
  return eighth * Math.sqrt(eighth)
}
