import type { RosenbrockSystem } from '../numerics/rosenbrockSystem'
import type { ReadonlyVector } from '../numerics/vector'
import { bound, chainTotals, type Equilibrium, equilibriaOf, free } from './fluxEquilibrium'
import { netFlows } from './fluxFlows'
import { eliminatedState, type FluxLayout, fluxLayout } from './fluxLayout'
import { readings } from './fluxReadings'
import { saturableRate, saturableSlope } from './fluxSaturable'
import { volumeOf } from './linearRates'
import type { Model } from './model'

/**
 * What a model does to its state: right side and analytic Jacobian of its amounts, effect sites, areas and eliminated
 * drug, under constant inputs. Opposite arrows are one net flow and so is a binding, so that a fast balance cancels once
 * and in both ends alike. The eliminated amount is of drug only: what leaves from a target's compartment is not counted.
 * Owns its scratch.
 */
export class Flux implements RosenbrockSystem {
  readonly model: Model
  readonly layout: FluxLayout
  readonly size: number
  readonly coupled: number
  /** Zero-order input to each compartment [mg/h]; production is part of the model and not of this. */
  readonly inputs: Float64Array
  readonly equilibria: readonly Equilibrium[]
  readonly #production: Float64Array
  readonly #from: Int32Array
  readonly #to: Int32Array
  readonly #there: Float64Array
  readonly #back: Float64Array
  readonly #saturable: readonly {
    readonly from: number
    readonly to: number
    readonly maximum: number
    readonly half: number
    readonly hill: number
  }[]
  /** Association / volume [/mg/h] and dissociation. */
  readonly #binding: readonly {
    readonly drug: number
    readonly target: number
    readonly complex: number
    readonly on: number
    readonly off: number
  }[]
  /** Rows of the effect sites and areas: `weights[r]` x state `sources[r]` into row `rows[r]`. */
  readonly #rows: Int32Array
  readonly #sources: Int32Array
  readonly #weights: Float64Array
  /** The Jacobian of all that is linear. */
  readonly #linear: Float64Array
  /** Free amounts, where bindings are approximated. */
  readonly #amounts: Float64Array

  /** Throws `RangeError` where a volume is missing or two approximated bindings share a compartment. */
  constructor(model: Model) {
    const layout = fluxLayout(model)
    const { size, compartments } = layout
    this.model = model
    this.layout = layout
    this.size = size
    this.coupled = compartments
    this.inputs = new Float64Array(compartments)
    this.equilibria = equilibriaOf(model)
    this.#production = new Float64Array(compartments)
    this.#amounts = new Float64Array(compartments)
    const counted = (from: number, to: number | 'eliminated'): number => {
      if (to !== 'eliminated') return to
      return model.compartments[from].holds === 'drug' ? eliminatedState(layout) : -1
    }
    for (const transfer of model.transfers) {
      if (transfer.kind === 'production') this.#production[transfer.into] += transfer.rate
    }
    const list = netFlows(model, counted)
    this.#from = Int32Array.from(list, (flow) => flow.from)
    this.#to = Int32Array.from(list, (flow) => flow.to)
    this.#there = Float64Array.from(list, (flow) => flow.there)
    this.#back = Float64Array.from(list, (flow) => flow.back)
    this.#saturable = model.transfers.flatMap((transfer) =>
      transfer.kind === 'saturable'
        ? [
            {
              from: transfer.from,
              to: counted(transfer.from, transfer.to),
              maximum: transfer.maximumRate,
              half: transfer.halfSaturation * volumeOf(model, transfer.from),
              hill: transfer.hill
            }
          ]
        : []
    )
    this.#binding = model.transfers.flatMap((transfer) => {
      if (transfer.kind !== 'binding' || transfer.approximation !== 'none') return []
      const { drug, target, complex, association, dissociation } = transfer
      return [{ drug, target, complex, on: association / volumeOf(model, drug), off: dissociation }]
    })
    const reads = readings(model, layout)
    this.#rows = Int32Array.from(reads, (read) => read.row)
    this.#sources = Int32Array.from(reads, (read) => read.source)
    this.#weights = Float64Array.from(reads, (read) => read.weight)
    this.#linear = this.#linearJacobian()
  }

  derivativeInto(state: ReadonlyVector, out: Float64Array): void {
    const n = this.coupled
    const x = this.#freeAmounts(state)
    const inputs = this.inputs
    const production = this.#production
    for (let i = 0; i < n; i++) out[i] = inputs[i] + production[i]
    for (let i = n; i < this.size; i++) out[i] = 0
    const from = this.#from
    const to = this.#to
    const there = this.#there
    const back = this.#back
    for (let p = 0; p < from.length; p++) {
      const a = from[p]
      const b = to[p]
      let flow = there[p] * x[a]
      if (back[p] !== 0) flow -= back[p] * x[b]
      out[a] -= flow
      if (b >= 0) out[b] += flow
    }
    const saturable = this.#saturable
    for (let p = 0; p < saturable.length; p++) {
      const term = saturable[p]
      const flow = saturableRate(x[term.from], term.maximum, term.half, term.hill)
      out[term.from] -= flow
      if (term.to >= 0) out[term.to] += flow
    }
    const binding = this.#binding
    for (let p = 0; p < binding.length; p++) {
      const term = binding[p]
      const flow = term.on * x[term.drug] * x[term.target] - term.off * x[term.complex]
      out[term.drug] -= flow
      out[term.target] -= flow
      out[term.complex] += flow
    }
    const rows = this.#rows
    const sources = this.#sources
    const weights = this.#weights
    for (let p = 0; p < rows.length; p++) {
      const source = sources[p]
      out[rows[p]] += weights[p] * (source < n ? x[source] : state[source])
    }
    for (const { drug, target, complex } of this.equilibria) {
      out[drug] += out[complex]
      out[target] += out[complex]
      out[complex] = 0
    }
  }

  jacobianInto(state: ReadonlyVector, out: Float64Array): void {
    const size = this.size
    const x = this.#freeAmounts(state)
    out.set(this.#linear)
    const saturable = this.#saturable
    for (let p = 0; p < saturable.length; p++) {
      const term = saturable[p]
      const slope = saturableSlope(x[term.from], term.maximum, term.half, term.hill)
      out[term.from * size + term.from] -= slope
      if (term.to >= 0) out[term.to * size + term.from] += slope
    }
    const binding = this.#binding
    for (let p = 0; p < binding.length; p++) {
      const { drug, target, complex, on } = binding[p]
      const byDrug = on * x[target]
      const byTarget = on * x[drug]
      out[drug * size + drug] -= byDrug
      out[drug * size + target] -= byTarget
      out[target * size + drug] -= byDrug
      out[target * size + target] -= byTarget
      out[complex * size + drug] += byDrug
      out[complex * size + target] += byTarget
    }
    for (const equilibrium of this.equilibria) chainTotals(equilibrium, x, size, out)
  }

  /** Write the amounts in the compartments of a state: free and bound apart. */
  amountsInto(state: ReadonlyVector, out: Float64Array): void {
    for (let i = 0; i < this.coupled; i++) out[i] = state[i]
    for (const { drug, target, complex, constant } of this.equilibria) {
      out[drug] = free(state[drug], state[target], constant)
      out[target] = free(state[target], state[drug], constant)
      out[complex] = bound(state[drug], state[target], constant)
    }
  }

  /** Write the state of these amounts: totals where bindings are approximated. What stands behind the amounts is left alone. */
  stateInto(amounts: ReadonlyVector, out: Float64Array): void {
    for (let i = 0; i < this.coupled; i++) out[i] = amounts[i]
    for (const { drug, target, complex } of this.equilibria) {
      out[drug] += amounts[complex]
      out[target] += amounts[complex]
      out[complex] = 0
    }
  }

  /** Turn slopes of a state into slopes of the amounts at free amounts x, in place. */
  amountSlopes(x: ReadonlyVector, slopes: Float64Array): void {
    for (const { drug, target, complex, constant } of this.equilibria) {
      const sum = constant + x[drug] + x[target]
      const rise = (x[target] * slopes[drug] + x[drug] * slopes[target]) / sum
      slopes[complex] = rise
      slopes[drug] -= rise
      slopes[target] -= rise
    }
  }

  #freeAmounts(state: ReadonlyVector): ReadonlyVector {
    if (this.equilibria.length === 0) return state
    this.amountsInto(state, this.#amounts)
    return this.#amounts
  }

  #linearJacobian(): Float64Array {
    const size = this.size
    const jacobian = new Float64Array(size * size)
    const add = (row: number, column: number, value: number): void => {
      jacobian[row * size + column] += value
    }
    for (let p = 0; p < this.#from.length; p++) {
      const a = this.#from[p]
      const b = this.#to[p]
      add(a, a, -this.#there[p])
      if (b >= 0) add(b, a, this.#there[p])
      if (this.#back[p] !== 0) {
        add(a, b, this.#back[p])
        add(b, b, -this.#back[p])
      }
    }
    for (const { complex, drug, target, off } of this.#binding) {
      add(drug, complex, off)
      add(target, complex, off)
      add(complex, complex, -off)
    }
    for (let p = 0; p < this.#rows.length; p++) add(this.#rows[p], this.#sources[p], this.#weights[p])
    return jacobian
  }
}
