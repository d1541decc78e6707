import { NumericalFailure } from '../numerics/numericalFailure'
import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramsPerHour } from '../units/canonical'
import { capacityOf } from './capacity'
import { integrate } from './integrate'
import { isLinear, type Model } from './model'
import type { OperatorStore } from './operatorStore'
import { compartmentWithoutExit, neverLeaves, reachedBy, transfersIn } from './pathways'
import { constantState, periodicState } from './periodic'
import { type Convergence, EXACTLY, meanInputs, PERIODIC_TOLERANCE, periodicIntegrated } from './periodicIntegrated'
import { propagate } from './propagate'
import type { Segment } from './segment'
import type { BodyState } from './state'
import { stationaryState } from './stationary'
import type { Trajectory } from './trajectory'
import { methodFor } from './trajectoryOf'

/** A steady state of any model, or in words why there is none. */
export type SteadySolution =
  | {
      readonly kind: 'steady'
      /** At the start of the period, before anything given then. */
      readonly state: BodyState
      readonly course: Trajectory
      /** How the iteration ended; undefined for a linear model, whose steady state needs none. */
      readonly convergence?: Convergence
    }
  | { readonly kind: 'none'; readonly why: string }

/** The steady state of one period's segments, repeated for ever. */
export function periodicSolution(segments: readonly Segment[], store: OperatorStore): SteadySolution {
  return orWhy(() => {
    if (methodFor(segments) === 'exact') {
      const state = periodicState(segments, store)
      return { kind: 'steady', state, course: propagate(segments, state, store) }
    }
    const impossible = noSteadyState(segments)
    if (impossible !== undefined) return { kind: 'none', why: impossible }
    const { state, convergence } = periodicIntegrated(segments, EXACTLY)
    return { kind: 'steady', state, convergence, course: integrate(segments, state, PERIODIC_TOLERANCE) }
  })
}

/** The state that inputs without end lead to, written out over `duration`. */
export function constantSolution(
  model: Model,
  inputs: ReadonlyVector,
  duration: Hours,
  store: OperatorStore
): SteadySolution {
  const segment: Segment = { start: 0, duration, model, boluses: model.compartments.map(() => 0), inputs }
  return orWhy(() => {
    if (isLinear(model)) {
      const state = constantState(model, inputs)
      return { kind: 'steady', state, course: propagate([segment], state, store) }
    }
    const impossible = noSteadyState([segment])
    if (impossible !== undefined) return { kind: 'none', why: impossible }
    const { amounts } = stationaryState(model, inputs)
    const effectSites = model.effectSites.map(
      ({ source }) => amounts[source] / (model.compartments[source].volume ?? Number.NaN)
    )
    const state = { amounts, effectSites }
    return { kind: 'steady', state, course: integrate([segment], state, PERIODIC_TOLERANCE) }
  })
}

/**
 * Why one period's segments, repeated for ever, lead to no steady state: something never leaves, or the mean dose rate is
 * not below the capacity. Undefined where nothing is known against one.
 */
export function noSteadyState(segments: readonly Segment[]): string | undefined {
  const [{ model }] = segments
  const transfers = transfersIn(segments)
  const inputs = meanInputs(segments)
  const stuck = compartmentWithoutExit(
    transfers,
    reachedBy(
      model,
      transfers,
      inputs.map((rate) => rate > 0)
    )
  )
  if (stuck !== undefined) return neverLeaves(model, stuck)
  const capacity = capacityOf(model, transfers, inputs)
  if (capacity === undefined || capacity.doseRate < capacity.rate) return undefined
  const { rate, doseRate, compartments } = capacity
  const all = inputs.every((input, i) => input === 0 || compartments.includes(i))
  const into = all ? '' : ` into ${compartments.map((i) => `"${model.compartments[i].name}"`).join(' and ')}`
  const [dose, limit] = perDay(doseRate, rate)
  const relation = doseRate === rate ? 'at' : 'above'
  return `no steady state: the dose rate ${dose}${into} is ${relation} the capacity ${limit}`
}

/** Two rates in mg/d with as many digits as it takes to tell them apart, four at least. */
function perDay(a: MilligramsPerHour, b: MilligramsPerHour): readonly [string, string] {
  for (let digits = 4; ; digits++) {
    const [one, other] = [a, b].map((rate) => String(Number((24 * rate).toPrecision(digits))))
    if (one !== other || a === b || digits === 15) return [`${one} mg/d`, `${other} mg/d`]
  }
}

/** What solving gives, with a numerical failure in words. */
export function orWhy(solve: () => SteadySolution): SteadySolution {
  try {
    return solve()
  } catch (failure) {
    if (!(failure instanceof NumericalFailure)) throw failure
    if (failure.code === 'no-way-out') return { kind: 'none', why: failure.message }
    return { kind: 'none', why: `the steady state could not be computed: ${failure.message}` }
  }
}
