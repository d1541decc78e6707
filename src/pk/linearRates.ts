import type { Functional } from '../numerics/operator'
import { outflow, type Rates } from '../numerics/rates'
import type { ReadonlyVector } from '../numerics/vector'
import type { Litres, PerHour } from '../units/canonical'
import { type Model, observedVolume } from './model'
import type { Signal } from './trajectory'

/**
 * A linear model as the numerics take it. Functionals: area under the observed concentration; area under each
 * observation; for each effect site its level (weight ke0/V at the source, decay ke0), then, in a block of their own, the
 * area under the concentration at each effect site's source.
 */
export interface LinearForm {
  readonly rates: Rates
  readonly functionals: readonly Functional[]
  /** The largest rate in the model [/h]: sets the shortest time on which anything happens. */
  readonly fastest: PerHour
}

/** Rates and functionals of a linear model; transfers between the same two places add. Throws `RangeError` otherwise. */
export function linearForm(model: Model): LinearForm {
  const size = model.compartments.length
  const between = new Float64Array(size * size)
  const out = new Float64Array(size)
  for (const transfer of model.transfers) {
    if (transfer.kind !== 'first-order') throw new RangeError(`a ${transfer.kind} transfer is not linear`)
    if (transfer.to === 'eliminated') out[transfer.from] += transfer.rate
    else between[transfer.to * size + transfer.from] += transfer.rate
  }
  const rates: Rates = { size, between, out }
  const reading = (of: readonly number[], weight: number, decay: PerHour): Functional => {
    const weights = new Float64Array(size)
    for (const i of of) weights[i] += weight
    return { weights, decay }
  }
  const functionals = [
    reading([model.observed], 1 / observedVolume(model), 0),
    ...model.observations.map((observation) => reading(observation.of, 1 / observation.volume, 0)),
    ...model.effectSites.map((site) => reading([site.source], site.rate / volumeOf(model, site.source), site.rate)),
    ...model.effectSites.map((site) => reading([site.source], 1 / volumeOf(model, site.source), 0))
  ]
  let fastest = 0
  for (let j = 0; j < size; j++) fastest = Math.max(fastest, outflow(rates, j))
  for (const site of model.effectSites) fastest = Math.max(fastest, site.rate)
  return { rates, functionals, fastest }
}

/** Position of the functional that is the area under the observed concentration or an observation. */
export function areaFunctional(signal: Exclude<Signal, { kind: 'effect-site' }>): number {
  return signal.kind === 'observed' ? 0 : 1 + signal.index
}

/** Position of the functional that is the level at an effect site. */
export function levelFunctional(model: Model, site: number): number {
  return 1 + model.observations.length + site
}

/** Position of the functional that is the area under the concentration at an effect site's source. */
export function sourceAreaFunctional(model: Model, site: number): number {
  return 1 + model.observations.length + model.effectSites.length + site
}

/** Volume in which the concentration of a compartment is read. Throws `RangeError` where it has none. */
export function volumeOf(model: Model, compartment: number): Litres {
  const volume = model.compartments[compartment]?.volume
  if (volume === undefined) throw new RangeError(`compartment ${compartment} has no volume to read a concentration in`)
  return volume
}

/**
 * Time derivative of the amounts [mg/h]. Each pair of opposite arrows is one net flow, added to one end and taken from
 * the other, so that a fast exchange in balance cancels once and in both alike.
 */
export function derivative(rates: Rates, amounts: ReadonlyVector, inputs: ReadonlyVector): number[] {
  const { size, between, out } = rates
  const change = Array.from({ length: size }, (_, i) => inputs[i] - out[i] * amounts[i])
  for (let i = 1; i < size; i++) {
    for (let j = 0; j < i; j++) {
      const net = between[i * size + j] * amounts[j] - between[j * size + i] * amounts[i]
      change[i] += net
      change[j] -= net
    }
  }
  return change
}
