import { exp, ln, log1p } from '../numerics/elementary'
import { rootBetween } from '../numerics/root'
import type { Hours, MilligramHoursPerLitre, MilligramsPerLitre } from '../units/canonical'
import { extremes, valueAt } from './curve'
import type { Dose } from './dose'
import type { Model } from './model'
import { OperatorStore } from './operatorStore'
import { periodicState } from './periodic'
import { periodicSegments } from './periodicSegments'
import { propagate } from './propagate'
import { emptyState } from './state'
import { timeline } from './timeline'
import type { Trajectory } from './trajectory'

/** The interval is searched for between the actual one divided and multiplied by two to this power. */
const DOUBLINGS = 60

/**
 * Half-life that a single compartment would need for the same accumulation: tau ln 2 / ln(R / (R - 1)), R the
 * accumulation ratio. R / (R - 1) is 1 + the area of the first period over what of the steady-state area is carried over
 * from earlier doses, and is taken from these two, so that an R near 1 and a very large one keep their digits. Undefined
 * where nothing is carried over. CDISC term C95007.
 */
export function effectiveHalfLife(
  period: Hours,
  first: MilligramHoursPerLitre,
  carriedOver: MilligramHoursPerLitre
): Hours | undefined {
  if (!(carriedOver > 0)) return undefined
  return (period * Math.LN2) / log1p(first / carriedOver)
}

/**
 * Operational half-life: the dosing interval at which the peak at steady state is twice the peak of a single dose
 * [Sahin & Benet 2008, Pharm Res 25:2869-2877], by root search on the interval; infusions longer than it overlap.
 * `doses` are the inputs of one dose; `near` is where the search begins. Undefined where no interval within 2^60 of it
 * does. Throws `NumericalFailure` 'no-way-out' where there is no steady state.
 */
export function operationalHalfLife(model: Model, doses: readonly Dose[], near: Hours): Hours | undefined {
  const single = peakOfSingleDose(model, doses, near)
  if (!(single > 0)) return undefined
  const excess = (lnInterval: number): number => steadyPeak(model, doses, exp(lnInterval)) / single - 2
  const start = ln(near)
  const towards = excess(start) > 0 ? 1 : -1
  let inner = start
  for (let k = 1; k <= DOUBLINGS; k++) {
    const outer = start + towards * k * Math.LN2
    if (excess(outer) * towards <= 0) return exp(rootBetween(excess, Math.min(inner, outer), Math.max(inner, outer)))
    inner = outer
  }
  return undefined
}

function steadyPeak(model: Model, doses: readonly Dose[], period: Hours): MilligramsPerLitre {
  const store = new OperatorStore()
  const segments = periodicSegments({ model, period, doses, sessions: [] })
  return peakOf(propagate(segments, periodicState(segments, store), store), period)
}

/** Highest level after one dose, however late it comes: followed until the level has fallen to half of it. */
function peakOfSingleDose(model: Model, doses: readonly Dose[], near: Hours): MilligramsPerLitre {
  const lastInput = Math.max(...doses.map((dose) => (dose.kind === 'bolus' ? dose.start : dose.start + dose.duration)))
  let until = 2 * Math.max(near, lastInput)
  for (let k = 0; k < DOUBLINGS; k++) {
    const segments = timeline({ doses, models: [{ from: 0, model }], sessions: [], until })
    const trajectory = propagate(segments, emptyState(model))
    const peak = peakOf(trajectory, until)
    if (valueAt(trajectory, { kind: 'observed' }, until, 'before') < 0.5 * peak) return peak
    until *= 2
  }
  return 0
}

function peakOf(trajectory: Trajectory, until: Hours): MilligramsPerLitre {
  return extremes(trajectory, { kind: 'observed' }, 0, until).peak
}
