import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramsPerHour, MilligramsPerLitre } from '../units/canonical'
import { type Capacity, capacityOf } from './capacity'
import { areaBetween, extremes } from './curve'
import { integrate } from './integrate'
import type { Model } from './model'
import { OperatorStore } from './operatorStore'
import { transfersIn } from './pathways'
import { type Accuracy, EXACTLY, meanInputs, periodicIntegrated } from './periodicIntegrated'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { ConstantInput, RepeatingPeriod } from './steadyPeriod'
import { constantSolution, noSteadyState, orWhy, type SteadySolution } from './steadySolution'
import type { Signal, Trajectory } from './trajectory'

/** The steady state that all repeating doses lead to when they are given `factor` times as large. */
export interface SteadyPoint {
  readonly factor: number
  /** Mean over a period, after product fraction and bioavailability. */
  readonly doseRate: MilligramsPerHour
  readonly average: MilligramsPerLitre
  readonly peak: MilligramsPerLitre
  readonly minimum: MilligramsPerLitre
}

/** A point with all that was computed for it. */
export interface SteadyAt extends SteadyPoint {
  readonly state: BodyState
  readonly course: Trajectory
}

/** A period is one segment or more; a constant input is looked at over this time. */
const CONSTANT_FOR: Hours = 24

/**
 * The steady states of one regimen whose repeating doses all grow or shrink together. A point begins from what earlier
 * points found, so that a scan of neighbours costs little; where it began changes a point by less than its accuracy.
 */
export class SteadyScan {
  /** Of the regimen as it is. */
  readonly doseRate: MilligramsPerHour
  readonly capacity: Capacity | undefined
  readonly segments: readonly Segment[]
  readonly #repeating: RepeatingPeriod | ConstantInput
  readonly #signal: Signal
  readonly #known = new Map<number, SteadyAt>()

  constructor(repeating: RepeatingPeriod | ConstantInput, signal: Signal) {
    this.#repeating = repeating
    this.#signal = signal
    this.segments = repeating.kind === 'period' ? repeating.segments : constantSegments(repeating)
    const inputs = meanInputs(this.segments)
    this.doseRate = inputs.reduce((sum, rate) => sum + rate, 0)
    this.capacity = capacityOf(repeating.model, transfersIn(this.segments), inputs)
  }

  /** The factor at a share of the capacity; undefined where there is none. */
  factorAt(share: number): number | undefined {
    return this.capacity === undefined ? undefined : (share * this.capacity.rate) / this.capacity.doseRate
  }

  /** The steady state at a factor above 0; in words where there is none. */
  at(factor: number, accuracy: Accuracy = EXACTLY): SteadyAt | string {
    const guess = this.#guessAt(factor)
    const solution = this.#solve(scaled(this.segments, factor), accuracy, guess)
    if (solution.kind === 'none') return solution.why
    const { state, course } = solution
    const { end } = course
    const { peak, minimum } = extremes(course, this.#signal, 0, end)
    const average = areaBetween(course, this.#signal, 0, end) / end
    const found = { factor, doseRate: factor * this.doseRate, average, peak, minimum, state, course }
    this.#known.set(factor, found)
    return found
  }

  #solve(segments: readonly Segment[], accuracy: Accuracy, guess: ReadonlyVector | undefined): SteadySolution {
    const [{ model, inputs }] = segments
    if (this.#repeating.kind === 'constant') {
      return constantSolution(model, inputs, CONSTANT_FOR, new OperatorStore())
    }
    return orWhy(() => {
      const impossible = noSteadyState(segments)
      if (impossible !== undefined) return { kind: 'none', why: impossible }
      const { state, convergence } = periodicIntegrated(segments, accuracy, guess)
      const { tolerance } = accuracy[accuracy.length - 1]
      return { kind: 'steady', state, convergence, course: integrate(segments, state, tolerance) }
    })
  }

  /** Amounts on the line through the two nearest points, or in proportion to the nearest where it is the only one. */
  #guessAt(factor: number): ReadonlyVector | undefined {
    const near = [...this.#known.values()].sort((a, b) => Math.abs(a.factor - factor) - Math.abs(b.factor - factor))
    const [first, second] = near
    if (first === undefined || second === undefined) return undefined
    const share = (factor - first.factor) / (second.factor - first.factor)
    return Array.from(first.state.amounts, (amount, i) => {
      const guess = amount + share * (second.state.amounts[i] - amount)
      return guess > 0 ? guess : 0.5 * amount
    })
  }
}

/** One stretch of a constant input. */
function constantSegments({ model, endless }: ConstantInput): Segment[] {
  const boluses = model.compartments.map(() => 0)
  return [{ start: 0, duration: CONSTANT_FOR, model, boluses, inputs: endless }]
}

/** Every input times a factor. */
export function scaled(segments: readonly Segment[], factor: number): Segment[] {
  const times = (vector: ReadonlyVector): number[] => Array.from(vector, (value) => value * factor)
  return segments.map((segment) => ({ ...segment, boluses: times(segment.boluses), inputs: times(segment.inputs) }))
}

/** The same with every maximum rate times a factor. */
export function withMaximumRates<Repeating extends RepeatingPeriod | ConstantInput>(
  repeating: Repeating,
  factor: number
): Repeating {
  const made = new Map<Model, Model>()
  const changed = (model: Model): Model => {
    const transfers = model.transfers.map((transfer) =>
      transfer.kind === 'saturable' ? { ...transfer, maximumRate: factor * transfer.maximumRate } : transfer
    )
    const known = made.get(model) ?? { ...model, transfers }
    made.set(model, known)
    return known
  }
  const model = changed(repeating.model)
  if (repeating.kind === 'constant') return { ...repeating, model }
  const segments = repeating.segments.map((segment) => ({ ...segment, model: changed(segment.model) }))
  return { ...repeating, model, segments }
}
