import { expm1 } from '../numerics/elementary'
import { factorInto, solveInto } from '../numerics/lu'
import { NumericalFailure } from '../numerics/numericalFailure'
import type { ReadonlyVector } from '../numerics/vector'
import { drugFreeState } from './drugFree'
import type { IntegrationTolerance } from './fluxTolerance'
import { stateAfter } from './integrate'
import { PeriodMap } from './periodMap'
import type { Segment } from './segment'
import type { BodyState } from './state'
import { stationaryState } from './stationary'

/** How an iteration came to its end. */
export interface Convergence {
  /** Corrections that were made. */
  readonly rounds: number
  /** Periods that were integrated for them. */
  readonly periods: number
  /** The last correction, relative to the amounts. */
  readonly change: number
}

export interface PeriodicSolution {
  /** At the start of a period, before its boluses. */
  readonly state: BodyState
  readonly convergence: Convergence
}

/** What a periodic state is integrated with: its error is that of one period over 1 - (what is carried over to the next). */
export const PERIODIC_TOLERANCE: IntegrationTolerance = { relative: 1e-10, floor: 1e-4 }

/** How closely a stage of the iteration looks. */
export interface Stage {
  readonly tolerance: IntegrationTolerance
  /** Relative change of an amount for a difference quotient. */
  readonly nudge: number
  /** A correction below this is the last. */
  readonly goal: number
}

/** The stages of an iteration, each from where the one before came to; the last one's tolerance is that of the answer. */
export type Accuracy = readonly [...Stage[], Stage]

const ROUGH: Stage = { tolerance: { relative: 1e-6, floor: 1e-2 }, nudge: 1e-3, goal: 1e-4 }
const FINE: Stage = { tolerance: PERIODIC_TOLERANCE, nudge: 1e-5, goal: 1e-9 }

/** About 1e-9 / (1 - c), c the part of a small change that is still there a period later. */
export const EXACTLY: Accuracy = [ROUGH, FINE]
/** About 1e-5 / (1 - c): for curves that are drawn. */
export const ROUGHLY: Accuracy = [{ ...ROUGH, goal: 1e-5 }]

/** Corrections that no longer become smaller are good enough below this. */
const NEARLY = 1e-6

const MOST_ROUNDS = 60
/** Amounts below this part of all that there is of their kind count by it. */
const LEAST = 1e-6
/** The same where an amount is nudged for a difference quotient. */
const LEAST_NUDGED = 1e-3
/** A correction takes away no more than this part of an amount. */
const MOST_REMOVED = 0.9
const HALVINGS = 6
/** Corrections that shrink by less than this from one to the next call for new difference quotients. */
const SLOW = 0.25

/**
 * The state that comes back after a period of segments, of a model that is not linear: Newton's method on what one period
 * does to the amounts, with difference quotients that Broyden's update keeps up to date; from `guess` or from the constant
 * state under the mean input.
 *
 * Throws `NumericalFailure` 'no-convergence' where it is not found, `RosenbrockFailure` where a period cannot be integrated.
 * Whether there is such a state is not asked here: see `capacityOf`.
 */
export function periodicIntegrated(
  segments: readonly Segment[],
  accuracy: Accuracy,
  guess?: ReadonlyVector
): PeriodicSolution {
  const map = new PeriodMap(segments)
  const { model } = segments[0]
  const baseline = drugFreeState(model)
  if (map.size === 0) return { state: baseline, convergence: { rounds: 0, periods: 0, change: 0 } }
  const from = map.coordinates(guess ?? firstGuess(segments))
  // A period brings what enters once in it, and a depot with it, near where it is at the start of one.
  const iteration = new PeriodicIteration(map, guess === undefined ? map.after(from, ROUGH.tolerance) : from)
  for (const stage of accuracy) iteration.run(stage)
  const amounts = map.amounts(iteration.coordinates)
  return { state: { amounts, effectSites: periodicSites(segments, amounts) }, convergence: iteration.convergence }
}

/** Mean inputs of a period [mg/h], one a compartment. */
export function meanInputs(segments: readonly Segment[]): number[] {
  const length = segments.reduce((sum, { duration }) => sum + duration, 0)
  return segments[0].model.compartments.map(
    (_, i) =>
      segments.reduce((sum, { boluses, inputs, duration }) => sum + boluses[i] + inputs[i] * duration, 0) / length
  )
}

/** The constant state under the mean input; the state without drug where there is none. */
function firstGuess(segments: readonly Segment[]): ReadonlyVector {
  const [{ model }] = segments
  try {
    return stationaryState(model, meanInputs(segments)).amounts
  } catch (failure) {
    if (!(failure instanceof NumericalFailure)) throw failure
    return drugFreeState(model).amounts
  }
}

/** Each site's level from its response over one period that starts with the steady amounts and an empty site. */
function periodicSites(segments: readonly Segment[], amounts: ReadonlyVector): number[] {
  const sites = segments[0].model.effectSites
  if (sites.length === 0) return []
  const { effectSites } = stateAfter(segments, { amounts, effectSites: sites.map(() => 0) }, PERIODIC_TOLERANCE)
  return sites.map((_, site) => {
    const decay = segments.reduce((sum, { model, duration }) => sum + model.effectSites[site].rate * duration, 0)
    return effectSites[site] / -expm1(-decay)
  })
}

/** Newton's method on (state after a period) - (state) = 0. */
export class PeriodicIteration {
  readonly #map: PeriodMap
  #at: Float64Array
  #excess: Float64Array
  /** Minus the derivative of the excess, row-major; undefined until it is needed. */
  #slopes: Float64Array | undefined
  #fresh = false
  #rounds = 0
  #change = Number.POSITIVE_INFINITY

  constructor(map: PeriodMap, from: Float64Array) {
    this.#map = map
    this.#at = from
    this.#excess = new Float64Array(map.size)
  }

  get coordinates(): ReadonlyVector {
    return this.#at
  }

  get convergence(): Convergence {
    return { rounds: this.#rounds, periods: this.#map.periods, change: this.#change }
  }

  /**
   * Iterate until a correction is below the stage's goal. Each round: solve for the correction; shorten it until the excess
   * falls; learn from it by Broyden's update, or by new difference quotients where progress is slow.
   */
  run(stage: Stage): void {
    this.#excess = this.#excessAt(this.#at, stage)
    let before = Number.POSITIVE_INFINITY
    for (let round = 0; round < MOST_ROUNDS; round++) {
      if (this.#slopes === undefined) this.#differentiate(stage)
      const correction = this.#correction()
      const change = correction === undefined ? Number.POSITIVE_INFINITY : this.#size(correction)
      if (!(change < SLOW * before) && !this.#fresh && change > stage.goal) {
        this.#slopes = undefined
        continue
      }
      const isRounding = this.#fresh && change <= NEARLY && change > 0.5 * before
      this.#rounds += 1
      this.#change = change
      if (correction === undefined || !this.#take(correction, stage)) this.#followOnePeriod(stage)
      if (change <= stage.goal || isRounding) return
      before = change
    }
    const why = `the periodic state was not found in ${MOST_ROUNDS} corrections; the last was ${this.#change} of the amounts`
    throw new NumericalFailure('no-convergence', why)
  }

  /** What a period adds. */
  #excessAt(at: Float64Array, { tolerance }: Stage): Float64Array {
    return this.#map.after(at, tolerance).map((after, p) => after - at[p])
  }

  #differentiate(stage: Stage): void {
    const n = this.#map.size
    const slopes = new Float64Array(n * n)
    const scales = this.#map.scales(this.#at, LEAST_NUDGED)
    for (let q = 0; q < n; q++) {
      const nudged = this.#at.slice()
      nudged[q] += stage.nudge * scales[q]
      const width = nudged[q] - this.#at[q]
      const excess = this.#excessAt(nudged, stage)
      for (let p = 0; p < n; p++) slopes[p * n + q] = -(excess[p] - this.#excess[p]) / width
    }
    this.#slopes = slopes
    this.#fresh = true
  }

  /** Where the tangent says that the excess is 0, as a change of the coordinates; undefined where it says nothing. */
  #correction(): Float64Array | undefined {
    const n = this.#map.size
    const matrix = Float64Array.from(this.#slopes ?? [])
    const pivots = new Int32Array(n)
    const correction = this.#excess.slice()
    if (!factorInto(matrix, n, n, pivots)) return undefined
    solveInto(matrix, n, n, pivots, correction)
    return correction.every(Number.isFinite) ? correction : undefined
  }

  /** Take as much of a correction as makes the excess smaller; false where none does. */
  #take(correction: Float64Array, stage: Stage): boolean {
    const now = this.#size(this.#excess)
    let share = 1
    for (let k = 0; k < HALVINGS; k++, share *= 0.5) {
      const next = this.#at.map((value, p) => Math.max(value + share * correction[p], (1 - MOST_REMOVED) * value))
      const excess = this.#excessAt(next, stage)
      // Near the answer what is left of the excess is rounding, and need not become smaller.
      if (!(this.#size(excess) < now) && now > 10 * stage.tolerance.relative) continue
      this.#learn(next, excess)
      return true
    }
    return false
  }

  /** Broyden's update in coordinates relative to their scales, and the step itself. */
  #learn(next: Float64Array, excess: Float64Array): void {
    const n = this.#map.size
    const scales = this.#map.scales(this.#at, LEAST)
    const step = next.map((value, p) => (value - this.#at[p]) / scales[p])
    const length = step.reduce((sum, part) => sum + part * part, 0)
    const slopes = this.#slopes
    if (slopes !== undefined && length > 0) {
      for (let p = 0; p < n; p++) {
        let predicted = 0
        for (let q = 0; q < n; q++) predicted += slopes[p * n + q] * (next[q] - this.#at[q])
        const missed = (this.#excess[p] - excess[p] - predicted) / length
        for (let q = 0; q < n; q++) slopes[p * n + q] += (missed * step[q]) / scales[q]
      }
    }
    this.#at = next
    this.#excess = excess
    this.#fresh = false
  }

  /** What the body itself would do. */
  #followOnePeriod(stage: Stage): void {
    this.#at = this.#at.map((value, p) => Math.max(0, value + this.#excess[p]))
    this.#excess = this.#excessAt(this.#at, stage)
    this.#slopes = undefined
    this.#fresh = false
  }

  /** The largest part of a coordinate that a change is. */
  #size(change: ReadonlyVector): number {
    const scales = this.#map.scales(this.#at, LEAST)
    let largest = 0
    for (let p = 0; p < scales.length; p++) {
      const part = change[p] === 0 ? 0 : Math.abs(change[p]) / scales[p]
      if (!(part <= largest)) largest = part
    }
    return largest
  }
}
