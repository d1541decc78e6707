import { expm1 } from '../numerics/elementary'
import { followedBy, steadyState, type Transition } from '../numerics/gth'
import { NumericalFailure } from '../numerics/numericalFailure'
import { type Rates, reachedFrom } from '../numerics/rates'
import type { ReadonlyVector } from '../numerics/vector'
import { linearForm, volumeOf } from './linearRates'
import type { Model } from './model'
import { OperatorStore } from './operatorStore'
import { finalState, inputColumns, propagate } from './propagate'
import type { Segment } from './segment'
import { type BodyState, emptyState } from './state'

/**
 * The state at the start of a period, before its boluses, that comes back at its end when the segments repeat for ever.
 * Amounts by GTH elimination on the period's transition; each effect site from its response over one period that starts
 * with the steady amounts and an empty site, over 1 - e^(-sum of ke0 x length). No subtraction anywhere.
 * Throws `NumericalFailure` 'no-way-out', naming the compartment, where drug that enters it can never leave.
 */
export function periodicState(segments: readonly Segment[], store: OperatorStore = new OperatorStore()): BodyState {
  const { model } = segments[0]
  const empty = emptyState(model)
  const load = finalState(propagate(segments, empty, store)).amounts
  const reached = reachedFrom(ratesOfAll(segments), inputsOfAll(segments))
  const amounts = named(model, () => steadyState(transitionOver(segments, store), load, reached))
  const fromEmptySites = finalState(propagate(segments, { ...empty, amounts }, store)).effectSites
  const effectSites = Array.from(fromEmptySites, (response, site) => {
    const decay = segments.reduce((sum, segment) => sum + segment.model.effectSites[site].rate * segment.duration, 0)
    return response / -expm1(-decay)
  })
  return { amounts, effectSites }
}

/**
 * The state that constant inputs [mg/h] lead to: an endless infusion. Every effect site is at its source's concentration.
 * Throws `NumericalFailure` 'no-way-out', naming the compartment, where drug that enters it can never leave.
 */
export function constantState(model: Model, inputs: ReadonlyVector): BodyState {
  const { rates } = linearForm(model)
  const balance: Transition = { transition: rates.between, sink: rates.out }
  const amounts = named(model, () => steadyState(balance, inputs, reachedFrom(rates, inputs)))
  return { amounts, effectSites: model.effectSites.map((site) => amounts[site.source] / volumeOf(model, site.source)) }
}

/** Transition over all segments, one after another. */
function transitionOver(segments: readonly Segment[], store: OperatorStore): Transition {
  const columns = inputColumns(segments)
  return segments
    .map((segment): Transition => store.of(segment.model, columns.get(segment.model) ?? []).at(segment.duration))
    .reduce((earlier, later) => followedBy(earlier, later))
}

/** Rates that are in force in any of the segments, for finding out where drug can get to. */
function ratesOfAll(segments: readonly Segment[]): Rates {
  const size = segments[0].model.compartments.length
  const all = { size, between: new Float64Array(size * size), out: new Float64Array(size) }
  for (const model of new Set(segments.map((segment) => segment.model))) {
    const { rates } = linearForm(model)
    for (let p = 0; p < size * size; p++) all.between[p] = Math.max(all.between[p], rates.between[p])
    for (let j = 0; j < size; j++) all.out[j] = Math.max(all.out[j], rates.out[j])
  }
  return all
}

/** Everything that enters each compartment in any of the segments, as far as being more than nothing. */
function inputsOfAll(segments: readonly Segment[]): ReadonlyVector {
  return segments[0].model.compartments.map((_, i) =>
    segments.some((segment) => segment.boluses[i] > 0 || segment.inputs[i] > 0) ? 1 : 0
  )
}

/** Run, and name the compartment in a failure that knows only its number. */
function named<T>(model: Model, run: () => T): T {
  try {
    return run()
  } catch (failure) {
    if (!(failure instanceof NumericalFailure) || failure.code !== 'no-way-out' || failure.compartment === undefined) {
      throw failure
    }
    const name = model.compartments[failure.compartment].name
    const message = `no steady state: drug that enters compartment "${name}" never leaves`
    throw new NumericalFailure('no-way-out', message, failure.compartment)
  }
}
