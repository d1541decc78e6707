import type { MilligramHoursPerLitre } from '../units/canonical'
import { areaBetween, extremes, valueAt } from './curve'
import { effectiveHalfLife, operationalHalfLife } from './halfLives'
import { startsOf } from './intervals'
import { isLinear } from './model'
import { NO_ACCUMULATION, NO_EFFECTIVE_HALF_LIFE } from './nonlinearWords'
import type { OperatorStore } from './operatorStore'
import type { NumberOrReason } from './reasons'
import { carriedPart, firstPeriod, type SteadyPeriod } from './steadyPeriod'
import type { Signal } from './trajectory'

/** How much more there is at steady state than after the first doses, and the half-lives that say the same in time. */
export interface Accumulation {
  readonly accumulationRatio: NumberOrReason
  readonly peakRatio: NumberOrReason
  readonly troughRatio: NumberOrReason
  readonly effectiveHalfLife: NumberOrReason
  readonly operationalHalfLife: NumberOrReason
}

const OBSERVED: Signal = { kind: 'observed' }

/** Accumulation over one period of a steady state: each a number, or why there is none. */
export function accumulationOf(steady: SteadyPeriod, store: OperatorStore): Accumulation {
  if (!isLinear(steady.model)) {
    return {
      ...noAccumulation(NO_ACCUMULATION),
      effectiveHalfLife: NO_EFFECTIVE_HALF_LIFE,
      operationalHalfLife: NO_EFFECTIVE_HALF_LIFE
    }
  }
  if (steady.lines.length === 0) return noAccumulation('no dose line repeats: an infusion runs without end')
  const { period, course } = steady
  const first = firstPeriod(steady, store)
  const firstArea = areaBetween(first, OBSERVED, 0, period)
  if (!(firstArea > 0))
    return noAccumulation('nothing has entered the observed compartment by the end of the first period')
  const area = areaBetween(course, OBSERVED, 0, period)
  const firstTrough = valueAt(first, OBSERVED, period, 'before')
  return {
    accumulationRatio: area / firstArea,
    peakRatio: extremes(course, OBSERVED, 0, period).peak / extremes(first, OBSERVED, 0, period).peak,
    troughRatio:
      firstTrough > 0
        ? valueAt(course, OBSERVED, period, 'before') / firstTrough
        : 'the level at the end of the first period is 0',
    effectiveHalfLife: effective(steady, firstArea, store),
    operationalHalfLife: operational(steady)
  }
}

function noAccumulation(why: string): Accumulation {
  return {
    accumulationRatio: why,
    peakRatio: why,
    troughRatio: why,
    effectiveHalfLife: why,
    operationalHalfLife: why
  }
}

function effective(steady: SteadyPeriod, firstArea: MilligramHoursPerLitre, store: OperatorStore): NumberOrReason {
  const carried = areaBetween(carriedPart(steady, store), OBSERVED, 0, steady.period)
  return (
    severalDoses(steady) ??
    effectiveHalfLife(steady.period, firstArea, carried) ??
    'nothing is carried over to the next dose'
  )
}

function operational(steady: SteadyPeriod): NumberOrReason {
  const several = severalDoses(steady)
  if (several !== undefined) return several
  if (steady.sessions.length > 0) return 'sessions repeat, so that the interval cannot be varied by itself'
  const doses = steady.administrations.flatMap((each) => each.doses)
  return (
    operationalHalfLife(steady.model, doses, steady.period) ?? 'no interval makes the steady-state peak twice the first'
  )
}

/** Why these half-lives are not defined for what repeats, where it is not one dose. */
function severalDoses(steady: SteadyPeriod): string | undefined {
  if (steady.endless !== undefined) return 'an infusion without end runs beside the doses'
  const count = startsOf(steady.administrations).length
  return count === 1 ? undefined : `the period holds ${count} doses; defined for one`
}
