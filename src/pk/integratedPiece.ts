import type { RosenbrockCourse } from '../numerics/rosenbrockCourse'
import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramHoursPerLitre, Milligrams, MilligramsPerLitre } from '../units/canonical'
import type { Flux } from './flux'
import { areaState, effectSiteState, eliminatedState } from './fluxLayout'
import { volumeOf } from './linearRates'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { Piece, Signal } from './trajectory'

/**
 * The course of a model over one segment as the integrator left it: values from its dense output, areas and the eliminated
 * amount from states that rode along. Slopes are those of the dense output, which are right within the tolerance over
 * the length of a step; the right side at the dense output would multiply its error by the fastest rate.
 * An amount that the integrator holds to be below zero, which it may by ten absolute tolerances, reads as 0.
 */
export class IntegratedPiece implements Piece {
  readonly segment: Segment
  readonly #flux: Flux
  readonly #course: RosenbrockCourse
  readonly #state: Float64Array
  readonly #amounts: Float64Array
  #probes: ReadonlyVector | undefined

  /** `course` over the segment's duration, in the states of `flux`. */
  constructor(segment: Segment, flux: Flux, course: RosenbrockCourse) {
    this.segment = segment
    this.#flux = flux
    this.#course = course
    this.#state = new Float64Array(flux.size)
    this.#amounts = new Float64Array(flux.coupled)
  }

  /** Where steps begin and end, and the middles of steps. */
  get probes(): ReadonlyVector {
    this.#probes ??= withMiddles(this.#course.times)
    return this.#probes
  }

  amountsInto(offset: Hours, out: Float64Array): void {
    this.#readAmounts(offset, out)
    for (let i = 0; i < out.length; i++) out[i] = Math.max(0, out[i])
  }

  concentration(signal: Signal, offset: Hours): MilligramsPerLitre {
    const { model, layout } = this.#flux
    switch (signal.kind) {
      case 'observed':
        return this.#amount(model.observed, offset) / volumeOf(model, model.observed)
      case 'observation': {
        const { of, volume } = model.observations[signal.index]
        let sum = 0
        for (const i of of) sum += this.#amount(i, offset)
        return sum / volume
      }
      case 'effect-site':
        return Math.max(0, this.#course.value(effectSiteState(layout, signal.index), offset))
    }
  }

  slope(signal: Signal, offset: Hours): number {
    const { model, layout } = this.#flux
    switch (signal.kind) {
      case 'observed':
        return this.#slopeOf(model.observed, offset) / volumeOf(model, model.observed)
      case 'observation': {
        const { of, volume } = model.observations[signal.index]
        let sum = 0
        for (const i of of) sum += this.#slopeOf(i, offset)
        return sum / volume
      }
      case 'effect-site':
        return this.#course.slope(effectSiteState(layout, signal.index), offset)
    }
  }

  area(signal: Signal, offset: Hours): MilligramHoursPerLitre {
    return this.#course.value(areaState(this.#flux.layout, signal), offset)
  }

  areaBetween(signal: Signal, from: Hours, to: Hours): MilligramHoursPerLitre {
    return this.#course.rise(areaState(this.#flux.layout, signal), from, to)
  }

  eliminated(offset: Hours): Milligrams {
    return this.#course.value(eliminatedState(this.#flux.layout), offset)
  }

  /** Amounts and effect sites at an offset, as integrated: not raised to 0 where they are a little below. */
  stateAt(offset: Hours): BodyState {
    const amounts = new Float64Array(this.#flux.coupled)
    this.#readAmounts(offset, amounts)
    const { layout } = this.#flux
    const effectSites = Array.from({ length: layout.effectSites }, (_, index) =>
      this.#course.value(effectSiteState(layout, index), offset)
    )
    return { amounts, effectSites }
  }

  #amount(compartment: number, offset: Hours): Milligrams {
    if (this.#flux.equilibria.length === 0) return Math.max(0, this.#course.value(compartment, offset))
    this.amountsInto(offset, this.#amounts)
    return this.#amounts[compartment]
  }

  #slopeOf(compartment: number, offset: Hours): number {
    if (this.#flux.equilibria.length === 0) return this.#course.slope(compartment, offset)
    const slopes = this.#state
    for (let i = 0; i < this.#flux.coupled; i++) slopes[i] = this.#course.slope(i, offset)
    this.#readAmounts(offset, this.#amounts, slopes)
    return slopes[compartment]
  }

  #readAmounts(offset: Hours, out: Float64Array, slopes?: Float64Array): void {
    const totals = new Float64Array(this.#flux.coupled)
    for (let i = 0; i < totals.length; i++) totals[i] = this.#course.value(i, offset)
    this.#flux.amountsInto(totals, out)
    if (slopes !== undefined) this.#flux.amountSlopes(out, slopes)
  }
}

function withMiddles(times: Float64Array): Float64Array {
  const probes = new Float64Array(2 * times.length - 1)
  for (let k = 0; k < times.length; k++) {
    probes[2 * k] = times[k]
    if (k > 0) probes[2 * k - 1] = 0.5 * (times[k - 1] + times[k])
  }
  return probes
}
