import { LinearOperators } from '../numerics/linearOperators'
import { emptyOperator, type Operator } from '../numerics/operator'
import type { Hours } from '../units/canonical'
import { type LinearForm, linearForm } from './linearRates'
import type { Model } from './model'

/** Operators kept for one model; twice as many at most, and the ones not used of late are let go. */
const KEPT = 2048

/** The first probe, in units of the shortest time on which anything happens, and the step from one to the next. */
const FIRST_PROBE = 0.05
const PROBE_RATIO = 1.25

/**
 * A linear model made ready: its operators by offset from a segment's start, each computed once while it is kept. An
 * operator depends on the model and the offset alone, so that keeping or forgetting one changes no number.
 */
export class ModelOperators {
  readonly model: Model
  readonly form: LinearForm
  /** Compartments that take a constant input, one for each input column. */
  readonly inputs: readonly number[]
  readonly #operators: LinearOperators
  #recent = new Map<Hours, Operator>()
  #older = new Map<Hours, Operator>()
  #probes: number[] = [0]

  constructor(model: Model, inputs: readonly number[]) {
    this.model = model
    this.form = linearForm(model)
    this.inputs = inputs
    this.#operators = new LinearOperators(this.form.rates, this.form.functionals, inputs)
  }

  /** What the model does in `offset` hours. Read it before asking for another; do not keep it. */
  at(offset: Hours): Operator {
    const recent = this.#recent.get(offset)
    if (recent !== undefined) return recent
    const operator = this.#older.get(offset) ?? this.#compute(offset)
    if (this.#recent.size >= KEPT) {
      this.#older = this.#recent
      this.#recent = new Map()
    }
    this.#recent.set(offset, operator)
    return operator
  }

  /**
   * Offsets from 0 to `duration`, geometric from the fastest time on: a sum of exponentials that begins at 0 is smooth
   * on a logarithmic scale of time. All segments with this model share them, and with them the operators.
   */
  probes(duration: Hours): number[] {
    const probes = this.#probes
    const { fastest } = this.form
    if (fastest > 0) {
      if (probes.length === 1) probes.push(FIRST_PROBE / fastest)
      while (probes[probes.length - 1] < duration) probes.push(probes[probes.length - 1] * PROBE_RATIO)
    }
    const within = probes.filter((offset) => offset < duration)
    within.push(duration)
    return within
  }

  #compute(offset: Hours): Operator {
    const { rates, functionals } = this.form
    const operator = emptyOperator(rates.size, this.inputs.length, functionals.length)
    this.#operators.into(offset, operator)
    return operator
  }
}

/** Models made ready, so that trajectories with the same models share their operators. */
export class OperatorStore {
  readonly #made = new Map<Model, Map<string, ModelOperators>>()

  /** The operators of a model with input columns for these compartments. */
  of(model: Model, inputs: readonly number[]): ModelOperators {
    const ofModel = this.#made.get(model) ?? new Map<string, ModelOperators>()
    this.#made.set(model, ofModel)
    const key = inputs.join()
    const operators = ofModel.get(key) ?? new ModelOperators(model, inputs)
    ofModel.set(key, operators)
    return operators
  }
}
