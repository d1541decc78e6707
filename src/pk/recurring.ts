import type { Hours } from '../units/canonical'
import { multipleOf, type Spacing } from '../units/spacing'
import { commonPeriod } from './commonPeriod'
import type { Dose } from './dose'
import { drugFreeState } from './drugFree'
import { isLinear, type Model } from './model'
import type { OperatorStore } from './operatorStore'
import { periodicState } from './periodic'
import { periodicSegments } from './periodicSegments'
import { type BodyState, emptyState, sumOfStates } from './state'
import { periodicSolution } from './steadySolution'
import { isBefore } from './times'

/** The inputs of one dose that has always been given every so often, at times from 0. */
export interface Recurring {
  readonly every: Spacing
  readonly doses: readonly Dose[]
}

export type RecurringOutcome =
  | { readonly kind: 'steady'; readonly state: BodyState }
  | { readonly kind: 'none'; readonly why: string }

/**
 * The state at time 0 of a body to which all these have always been given. In a linear model each has its own periodic state
 * and they add, whatever their spacings; elsewhere one period must hold them all. Throws `NumericalFailure` 'no-way-out'
 * where in a linear model drug that enters can never leave.
 */
export function recurringState(model: Model, recurring: readonly Recurring[], store: OperatorStore): RecurringOutcome {
  if (isLinear(model)) {
    const states = recurring.map(({ every, doses }) =>
      periodicState(periodicSegments({ model, period: multipleOf(every, 1), doses, sessions: [] }), store)
    )
    return { kind: 'steady', state: states.reduce(sumOfStates, emptyState(model)) }
  }
  if (recurring.length === 0) return { kind: 'steady', state: drugFreeState(model) }
  const common = commonPeriod(
    recurring.map(({ every }) => every),
    []
  )
  if (common.kind === 'none') {
    return {
      kind: 'none',
      why: `${common.why}; a model that is not linear has a steady state only for all doses together`
    }
  }
  const period = common.hours
  const doses = recurring.flatMap((each) => repeated(each, period))
  return periodicSolution(periodicSegments({ model, period, doses, sessions: [] }), store)
}

/** What is given within one period. */
function repeated({ every, doses }: Recurring, period: Hours): Dose[] {
  const all: Dose[] = []
  for (let k = 0; k === 0 || isBefore(multipleOf(every, k), period); k++) {
    all.push(...doses.map((dose) => ({ ...dose, start: dose.start + multipleOf(every, k) })))
  }
  return all
}
