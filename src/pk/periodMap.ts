import type { ReadonlyVector } from '../numerics/vector'
import type { Milligrams } from '../units/canonical'
import { Flux } from './flux'
import type { IntegrationTolerance } from './fluxTolerance'
import { Integrator } from './integrate'
import type { Model } from './model'
import { reachedBy, transfersIn } from './pathways'
import type { Segment } from './segment'

/**
 * What one period does to the amounts at its start, in the coordinates that determine them: totals where bindings are
 * approximated, and only compartments that anything reaches. Effect sites, which nothing depends on, are left out.
 */
export class PeriodMap {
  /** Coordinates. */
  readonly size: number
  readonly #flux: Flux
  readonly #segments: readonly Segment[]
  readonly #places: readonly number[]
  readonly #isDrug: readonly boolean[]
  readonly #integrators = new Map<number, Integrator>()
  readonly #state: Float64Array
  /** All drug that enters in a period. */
  readonly #entered: Milligrams
  /** Periods that were integrated so far. */
  periods = 0

  constructor(segments: readonly Segment[]) {
    const bare = new Map<Model, Model>()
    this.#segments = segments.map((segment) => {
      const model = bare.get(segment.model) ?? { ...segment.model, effectSites: [], observations: [] }
      bare.set(segment.model, model)
      return { ...segment, model }
    })
    const { model } = this.#segments[0]
    const entered = model.compartments.map((_, i) =>
      segments.some((segment) => segment.boluses[i] > 0 || segment.inputs[i] > 0)
    )
    const reached = reachedBy(model, transfersIn(segments), entered)
    this.#flux = new Flux(model)
    const complexes = new Set(this.#flux.equilibria.map(({ complex }) => complex))
    this.#places = reached.flatMap((holds, i) => (holds && !complexes.has(i) ? [i] : []))
    this.#isDrug = this.#places.map((i) => model.compartments[i].holds === 'drug')
    this.#state = new Float64Array(this.#flux.size)
    this.#entered = segments.reduce(
      (sum, { boluses, inputs, duration }) =>
        model.compartments.reduce((all, _, i) => all + boluses[i] + inputs[i] * duration, sum),
      0
    )
    this.size = this.#places.length
  }

  /** Coordinates of these amounts. */
  coordinates(amounts: ReadonlyVector): Float64Array {
    this.#flux.stateInto(amounts, this.#state)
    return Float64Array.from(this.#places, (place) => this.#state[place])
  }

  /** Amounts at these coordinates. */
  amounts(coordinates: ReadonlyVector): Float64Array {
    this.#state.fill(0)
    this.#places.forEach((place, p) => {
      this.#state[place] = coordinates[p]
    })
    const amounts = new Float64Array(this.#flux.coupled)
    this.#flux.amountsInto(this.#state, amounts)
    return amounts
  }

  /** Coordinates one period later. Throws `RosenbrockFailure` where the period cannot be integrated. */
  after(coordinates: ReadonlyVector, tolerance: IntegrationTolerance): Float64Array {
    const integrator = this.#integrators.get(tolerance.relative) ?? new Integrator(tolerance)
    this.#integrators.set(tolerance.relative, integrator)
    integrator.begin({ amounts: this.amounts(coordinates), effectSites: [] })
    for (const segment of this.#segments) integrator.pass(segment)
    this.periods += 1
    return this.coordinates(integrator.state.amounts).map((value) => Math.max(0, value))
  }

  /**
   * By how much each coordinate may differ before it counts as different: its own size, or a part of all of its kind, drug
   * that enters in the period included, of which next to nothing may be left at its end.
   */
  scales(coordinates: ReadonlyVector, part: number): Float64Array {
    let drug = this.#entered
    let target: Milligrams = 0
    for (let p = 0; p < this.size; p++) {
      if (this.#isDrug[p]) drug += coordinates[p]
      else target += coordinates[p]
    }
    return Float64Array.from(this.#places, (_, p) => Math.max(coordinates[p], part * (this.#isDrug[p] ? drug : target)))
  }
}
