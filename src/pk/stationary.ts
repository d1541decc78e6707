import { factorInto, solveInto } from '../numerics/lu'
import { NumericalFailure } from '../numerics/numericalFailure'
import type { ReadonlyVector } from '../numerics/vector'
import type { Milligrams, MilligramsPerHour } from '../units/canonical'
import { Flux } from './flux'
import { eliminatedState } from './fluxLayout'
import type { Model } from './model'
import { reachedBy } from './pathways'

/** A state in which nothing changes. */
export interface Stationary {
  /** In every compartment. */
  readonly amounts: Float64Array
  /** Drug that leaves the body. */
  readonly elimination: MilligramsPerHour
}

/** One compartment whose amount is kept as it is. */
export interface Held {
  readonly compartment: number
  readonly amount: Milligrams
}

const MOST_ROUNDS = 1000
/** A correction below this, relative to the amount, is the last. */
const CLOSE = 1e-13
/** Below this, corrections that no longer become smaller are rounding. */
const NEARLY = 1e-6
/** An amount below this part of all that there is of its kind counts by that part. */
const LEAST = 1e-9
/** Newton's correction is taken where no amount changes by more than this, relatively. */
const NEWTON_CHANGE = 0.5
const STEP_GROWTH = 4

/**
 * The state that constant inputs [mg/h] and the model's own production lead to, from a body without drug; with `held`, one
 * compartment's amount given and all others in balance with it. Newton's method; far from the answer linearly implicit
 * Euler steps of growing length, so that the answer is the one that the body itself comes to. Accurate to about 1e-12
 * divided by how near the inputs are to capacity.
 *
 * Throws `NumericalFailure` 'no-convergence'. Whether there is such a state is not asked here: see `capacityOf`.
 */
export function stationaryState(model: Model, inputs: ReadonlyVector, held?: Held): Stationary {
  return new StationarySolver(model, inputs, held).solve()
}

class StationarySolver {
  readonly #model: Model
  readonly #flux: Flux
  readonly #held: Held | undefined
  /** States that are solved for. */
  readonly #active: readonly number[]
  readonly #state: Float64Array
  readonly #amounts: Float64Array
  readonly #slopes: Float64Array
  readonly #jacobian: Float64Array
  readonly #matrix: Float64Array
  readonly #pivots: Int32Array
  readonly #correction: Float64Array

  constructor(full: Model, inputs: ReadonlyVector, held: Held | undefined) {
    const model = { ...full, effectSites: [], observations: [] }
    const flux = new Flux(model)
    const entered = model.compartments.map((_, i) => inputs[i] > 0 || i === held?.compartment)
    const reached = reachedBy(model, model.transfers, entered)
    const complexes = new Set(flux.equilibria.map(({ complex }) => complex))
    this.#model = model
    this.#flux = flux
    this.#held = held
    this.#active = reached.flatMap((holds, i) => (holds && !complexes.has(i) ? [i] : []))
    this.#state = new Float64Array(flux.size)
    this.#amounts = new Float64Array(flux.coupled)
    this.#slopes = new Float64Array(flux.size)
    this.#jacobian = new Float64Array(flux.size * flux.size)
    const n = this.#active.length
    this.#matrix = new Float64Array(n * n)
    this.#pivots = new Int32Array(n)
    this.#correction = new Float64Array(n)
    flux.inputs.set(Array.from(inputs))
    if (held !== undefined) this.#state[held.compartment] = held.amount
  }

  solve(): Stationary {
    const fastest = this.#evaluate()
    let step = fastest > 0 ? 0.1 / fastest : 1
    let before = Number.POSITIVE_INFINITY
    for (let round = 0; round < MOST_ROUNDS; round++) {
      if (this.#active.length === 0) return this.#found()
      const change = this.#correct(0)
      if (change <= NEWTON_CHANGE) {
        this.#take()
        // Near capacity rounding keeps corrections above what is close; they no longer become smaller then.
        if (change <= CLOSE || (change <= NEARLY && change > 0.5 * before)) return this.#found()
        before = change
        continue
      }
      before = Number.POSITIVE_INFINITY
      const moved = this.#correct(1 / step)
      if (Number.isNaN(moved)) step /= STEP_GROWTH
      else {
        this.#take()
        step *= moved <= 1 ? STEP_GROWTH : 1
      }
    }
    throw new NumericalFailure('no-convergence', `the constant state was not found in ${MOST_ROUNDS} rounds`)
  }

  #found(): Stationary {
    this.#evaluate()
    return { amounts: this.#amounts, elimination: this.#slopes[eliminatedState(this.#flux.layout)] }
  }

  /** Slopes and Jacobian at the state, a held amount as a spring; returns the fastest rate of any of the states solved for. */
  #evaluate(): number {
    const flux = this.#flux
    const { size } = flux
    flux.derivativeInto(this.#state, this.#slopes)
    flux.jacobianInto(this.#state, this.#jacobian)
    flux.amountsInto(this.#state, this.#amounts)
    let fastest = 0
    for (const i of this.#active) fastest = Math.max(fastest, Math.abs(this.#jacobian[i * size + i]))
    if (this.#held !== undefined) this.#hold(this.#held, fastest > 0 ? fastest : 1)
    return fastest
  }

  /** Replace the equation of the held compartment by rate x (amount to hold - amount): the amount of what is free. */
  #hold({ compartment, amount }: Held, rate: number): void {
    const { size, coupled } = this.#flux
    this.#slopes[compartment] = rate * (amount - this.#amounts[compartment])
    for (const j of this.#active) {
      const unit = new Float64Array(coupled)
      unit[j] = 1
      this.#flux.amountSlopes(this.#amounts, unit)
      this.#jacobian[compartment * size + j] = -rate * unit[compartment]
    }
  }

  /**
   * The correction (diagonal I - J)^-1 f at the state; returns its largest relative change of an amount, infinite for
   * the first of an amount, not a number where there is none. Amounts do not go below zero: the correction is cut there.
   */
  #correct(diagonal: number): number {
    this.#evaluate()
    const active = this.#active
    const n = active.length
    const { size } = this.#flux
    for (let p = 0; p < n; p++) {
      this.#correction[p] = this.#slopes[active[p]]
      for (let q = 0; q < n; q++) {
        this.#matrix[p * n + q] = -this.#jacobian[active[p] * size + active[q]] + (p === q ? diagonal : 0)
      }
    }
    if (!factorInto(this.#matrix, n, n, this.#pivots)) return Number.NaN
    solveInto(this.#matrix, n, n, this.#pivots, this.#correction)
    const { drug, target } = this.#sums()
    let largest = 0
    for (let p = 0; p < n; p++) {
      const i = active[p]
      const amount = this.#state[i]
      const all = this.#model.compartments[i].holds === 'drug' ? drug : target
      const change = Math.max(this.#correction[p], -amount)
      const relative = Math.abs(this.#correction[p]) / Math.max(amount, LEAST * all)
      this.#correction[p] = change
      if (relative > largest) largest = relative
      if (Number.isNaN(this.#correction[p])) return Number.NaN
    }
    return largest
  }

  #take(): void {
    this.#active.forEach((i, p) => {
      this.#state[i] += this.#correction[p]
    })
  }

  #sums(): { readonly drug: Milligrams; readonly target: Milligrams } {
    let drug = 0
    let target = 0
    for (const i of this.#active) {
      if (this.#model.compartments[i].holds === 'drug') drug += this.#state[i]
      else target += this.#state[i]
    }
    return { drug, target }
  }
}
