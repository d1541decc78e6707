import type { RosenbrockTolerance } from '../numerics/rosenbrockSystem'
import type { ReadonlyVector } from '../numerics/vector'
import type { Flux } from './flux'
import { areaState, effectSiteState, eliminatedState } from './fluxLayout'
import { volumeOf } from './linearRates'
import { observedVolume } from './model'

/** How closely a course is integrated. */
export interface IntegrationTolerance {
  /** Of every amount and area, a step; what is achieved may be ten to twenty times that. Above 1e-4 counts as 1e-4. */
  readonly relative: number
  /** What is smaller than this part of the largest amount there has been keeps fewer digits than `relative` says. */
  readonly floor: number
}

/** The largest amounts met so far on one course: of drug in the body, and of targets. */
export interface LargestAmounts {
  drug: number
  target: number
}

/**
 * Absolute tolerances that go with the amounts there are, so that no unit of mass is better than another: for drug and for
 * targets relative tolerance x floor x the largest amount so far, what enters during the step included;
 * for concentrations that over the volume; for an area what that concentration amounts to over the step.
 */
export class FluxTolerance implements RosenbrockTolerance {
  readonly relative: number
  readonly #flux: Flux
  /** Absolute tolerance per amount of the largest. */
  readonly #part: number
  readonly #largest: LargestAmounts
  readonly #isDrug: readonly boolean[]
  /** For each state behind the amounts, 1 / volume, and whether it is an area. */
  readonly #perVolume: Float64Array
  readonly #isArea: readonly boolean[]

  /** `largest` is shared by all models of one course. */
  constructor(tolerance: IntegrationTolerance, flux: Flux, largest: LargestAmounts) {
    const { relative, floor } = tolerance
    if (!(floor > 0 && floor <= 1)) throw new RangeError(`the floor is a part of the largest amount, got ${floor}`)
    this.relative = relative
    this.#part = relative * floor
    this.#flux = flux
    this.#largest = largest
    this.#isDrug = flux.model.compartments.map(({ holds }) => holds === 'drug')
    this.#perVolume = new Float64Array(flux.size)
    this.#isArea = behind(flux, this.#perVolume)
  }

  absoluteInto(state: ReadonlyVector, step: number, out: Float64Array): void {
    const { coupled, size, inputs } = this.#flux
    const isDrug = this.#isDrug
    let drug = 0
    let target = 0
    for (let i = 0; i < coupled; i++) {
      const amount = Math.abs(state[i]) + step * inputs[i]
      if (isDrug[i]) drug += amount
      else target = Math.max(target, amount)
    }
    const largest = this.#largest
    if (drug > largest.drug) largest.drug = drug
    if (target > largest.target) largest.target = target
    const ofDrug = this.#part * largest.drug
    const ofTarget = this.#part * largest.target
    for (let i = 0; i < coupled; i++) out[i] = isDrug[i] ? ofDrug : ofTarget
    const perVolume = this.#perVolume
    const isArea = this.#isArea
    for (let i = coupled; i < size; i++) out[i] = ofDrug * perVolume[i] * (isArea[i] ? step : 1)
  }
}

/** Fill in 1 / volume of every state behind the amounts; tell which are areas. */
function behind(flux: Flux, perVolume: Float64Array): boolean[] {
  const { model, layout } = flux
  const isArea = new Array<boolean>(flux.size).fill(false)
  const area = (place: number, inverse: number): void => {
    isArea[place] = true
    perVolume[place] = inverse
  }
  model.effectSites.forEach(({ source }, index) => {
    const inverse = 1 / volumeOf(model, source)
    perVolume[effectSiteState(layout, index)] = inverse
    area(areaState(layout, { kind: 'effect-site', index }), inverse)
  })
  model.observations.forEach(({ volume }, index) => {
    area(areaState(layout, { kind: 'observation', index }), 1 / volume)
  })
  area(areaState(layout, { kind: 'observed' }), 1 / observedVolume(model))
  perVolume[eliminatedState(layout)] = 1
  return isArea
}
