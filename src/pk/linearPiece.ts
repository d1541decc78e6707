import { advanceAmountsInto, eliminatedOver, functionalAfter, type Operator } from '../numerics/operator'
import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramHoursPerLitre, Milligrams, MilligramsPerLitre } from '../units/canonical'
import { areaFunctional, derivative, levelFunctional, sourceAreaFunctional, volumeOf } from './linearRates'
import type { ModelOperators } from './operatorStore'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { Piece, Signal } from './trajectory'

/**
 * The exact course of a linear model over one segment: every value is one operator applied to the state just after the
 * segment's boluses. The slope is the operator applied to the slope at the start, which obeys the same equations, so that
 * a curve that levels off keeps the sign of its slope.
 *
 * The area under an effect site is (area under its source) - (rise of the level) / ke0. Over a time t much shorter than
 * 1/ke0 that leaves it about 1e-15/(ke0 t) relative; everything else has the accuracy of the operators.
 */
export class LinearPiece implements Piece {
  readonly segment: Segment
  readonly #operators: ModelOperators
  readonly #start: BodyState
  readonly #rates: readonly number[]
  #changeAtStart: number[] | undefined

  /** `start` is the state at the segment's start with its boluses given. */
  constructor(segment: Segment, operators: ModelOperators, start: BodyState) {
    this.segment = segment
    this.#operators = operators
    this.#start = start
    this.#rates = operators.inputs.map((compartment) => segment.inputs[compartment])
  }

  get probes(): ReadonlyVector {
    return this.#operators.probes(this.segment.duration)
  }

  amountsInto(offset: Hours, out: Float64Array): void {
    if (offset === 0) out.set(Array.from(this.#start.amounts))
    else advanceAmountsInto(this.#operators.at(offset), this.#start.amounts, this.#rates, out)
  }

  concentration(signal: Signal, offset: Hours): MilligramsPerLitre {
    const { model } = this.segment
    switch (signal.kind) {
      case 'observed':
        return this.#amount(model.observed, offset) / volumeOf(model, model.observed)
      case 'observation': {
        const observation = model.observations[signal.index]
        return observation.of.reduce((sum, i) => sum + this.#amount(i, offset), 0) / observation.volume
      }
      case 'effect-site': {
        const level = this.#start.effectSites[signal.index]
        if (offset === 0) return level
        const index = levelFunctional(model, signal.index)
        return functionalAfter(this.#operators.at(offset), index, this.#start.amounts, level, this.#rates)
      }
    }
  }

  slope(signal: Signal, offset: Hours): number {
    const { model } = this.segment
    switch (signal.kind) {
      case 'observed':
        return this.#changeOf(model.observed, offset) / volumeOf(model, model.observed)
      case 'observation': {
        const observation = model.observations[signal.index]
        return observation.of.reduce((sum, i) => sum + this.#changeOf(i, offset), 0) / observation.volume
      }
      case 'effect-site': {
        const site = model.effectSites[signal.index]
        const source = this.#start.amounts[site.source] / volumeOf(model, site.source)
        const atStart = site.rate * (source - this.#start.effectSites[signal.index])
        if (offset === 0) return atStart
        const operator = this.#operators.at(offset)
        const row = levelFunctional(model, signal.index) * model.compartments.length
        return (
          operator.decays[levelFunctional(model, signal.index)] * atStart + dot(operator.rows, row, this.#startChange())
        )
      }
    }
  }

  area(signal: Signal, offset: Hours): MilligramHoursPerLitre {
    return offset === 0 ? 0 : this.#areaFrom(this.#start, signal, offset)
  }

  areaBetween(signal: Signal, from: Hours, to: Hours): MilligramHoursPerLitre {
    return from === to ? 0 : this.#areaFrom(this.stateAt(from), signal, to - from)
  }

  eliminated(offset: Hours): Milligrams {
    return offset === 0 ? 0 : eliminatedOver(this.#operators.at(offset), this.#start.amounts, this.#rates)
  }

  /** Amounts and effect sites at an offset. */
  stateAt(offset: Hours): BodyState {
    if (offset === 0) return this.#start
    const { model } = this.segment
    const operator = this.#operators.at(offset)
    const { amounts, effectSites } = this.#start
    return {
      amounts: Array.from(amounts, (_, i) => amountAfter(operator, i, amounts, this.#rates)),
      effectSites: Array.from(effectSites, (level, i) =>
        functionalAfter(operator, levelFunctional(model, i), amounts, level, this.#rates)
      )
    }
  }

  #amount(compartment: number, offset: Hours): Milligrams {
    const { amounts } = this.#start
    return offset === 0
      ? amounts[compartment]
      : amountAfter(this.#operators.at(offset), compartment, amounts, this.#rates)
  }

  #areaFrom(start: BodyState, signal: Signal, duration: Hours): MilligramHoursPerLitre {
    const { model } = this.segment
    const operator = this.#operators.at(duration)
    const integral = (index: number): number => functionalAfter(operator, index, start.amounts, 0, this.#rates)
    if (signal.kind !== 'effect-site') return integral(areaFunctional(signal))
    const before = start.effectSites[signal.index]
    const after = functionalAfter(operator, levelFunctional(model, signal.index), start.amounts, before, this.#rates)
    const rise = (after - before) / model.effectSites[signal.index].rate
    // Where next to nothing has gone through, rounding may leave less than nothing.
    return Math.max(0, integral(sourceAreaFunctional(model, signal.index)) - rise)
  }

  /** Time derivative of one amount. */
  #changeOf(compartment: number, offset: Hours): number {
    const atStart = this.#startChange()
    if (offset === 0) return atStart[compartment]
    return dot(this.#operators.at(offset).transition, compartment * atStart.length, atStart)
  }

  #startChange(): readonly number[] {
    this.#changeAtStart ??= derivative(this.#operators.form.rates, this.#start.amounts, this.segment.inputs)
    return this.#changeAtStart
  }
}

/** One amount after the operator's duration. */
function amountAfter(operator: Operator, i: number, amounts: ReadonlyVector, inputRates: ReadonlyVector): Milligrams {
  const columns = operator.sinkResponse.length
  let sum = dot(operator.transition, i * amounts.length, amounts)
  for (let k = 0; k < columns; k++) sum += operator.response[i * columns + k] * inputRates[k]
  return sum
}

/** Row of a matrix that begins at `from`, times a vector. */
function dot(matrix: ReadonlyVector, from: number, vector: ReadonlyVector): number {
  let sum = 0
  for (let j = 0; j < vector.length; j++) sum += matrix[from + j] * vector[j]
  return sum
}
