import type { MilligramHoursPerLitre } from '../units/canonical'
import { accumulationOf } from './accumulation'
import type { Course, CourseRequest } from './course'
import { areaBetween, extremes, valueAt } from './curve'
import { NO_WINDOW } from './days'
import {
  covers,
  INFUSION_THROUGHOUT,
  type IntervalExposure,
  infusionsOf,
  intervalsOf,
  joined,
  type Span
} from './intervals'
import { levelReached } from './levelReached'
import type { OperatorStore } from './operatorStore'
import { type Reached, reached } from './reached'
import { type NumberOrReason, numbersOf, reasonsOf } from './reasons'
import type { ConstantLevel, SteadyOutcome, SteadyPeriod } from './steadyPeriod'
import type { SteadyStateExposure, SteadyStateValues } from './steadyStateExposure'
import type { Target } from './target'
import { timeShares } from './timeShares'
import { isBefore } from './times'
import type { Signal, Trajectory } from './trajectory'

type Group = Readonly<Record<keyof SteadyStateValues, NumberOrReason>>

const OBSERVED: Signal = { kind: 'observed' }

type SharedRequest = CourseRequest & { readonly store: OperatorStore }

/** The exposure at steady state of what repeats at the end of a regimen; `window` is the first window target. */
export function steadyStateExposure(
  steady: SteadyOutcome,
  course: Course,
  shared: SharedRequest,
  window: Target | undefined
): SteadyStateExposure {
  switch (steady.kind) {
    case 'none':
      return { ...exposureFrom(nothing(steady.why)), lines: [], course: undefined, origin: undefined, intervals: [] }
    case 'constant': {
      const group = constantValues(steady, shared, window)
      return { ...exposureFrom(group), lines: [], course: steady.course, origin: undefined, intervals: [] }
    }
    case 'period': {
      const intervals = steadyIntervals(steady, OBSERVED)
      const group = periodicValues(steady, course, shared, intervals, window)
      const { lines, origin } = steady
      return { ...exposureFrom(group), lines, course: steady.course, origin, intervals }
    }
  }
}

/** The intervals of one period at steady state, all complete; none for a constant level. */
export function steadyIntervals(steady: SteadyOutcome, signal: Signal): IntervalExposure[] {
  if (steady.kind !== 'period') return []
  const { course, administrations, period } = steady
  const infusions = recurringInfusions(steady)
  return intervalsOf({ trajectory: course, signal, administrations, infusions, end: period, recurs: true })
}

function exposureFrom(group: Group): SteadyStateValues & Pick<SteadyStateExposure, 'why'> {
  return { ...numbersOf(group), why: reasonsOf(group) }
}

function periodicValues(
  steady: SteadyPeriod,
  course: Course,
  request: SharedRequest,
  intervals: readonly IntervalExposure[],
  window: Target | undefined
): Group {
  const { period } = steady
  const auc = areaBetween(steady.course, OBSERVED, 0, period)
  const { peak, peakTime, minimum } = extremes(steady.course, OBSERVED, 0, period)
  const average = auc / period
  const throughout = covers(joined(recurringInfusions(steady)), 0, period)
  const troughs = intervals.flatMap(({ trough }) => (trough === undefined ? [] : [trough]))
  const trough = troughs.length > 0 ? Math.min(...troughs) : undefined
  const accumulation = accumulationOf(steady, request.store)
  const aucBefore = areaBeforeChange(steady, course)
  return {
    period,
    auc,
    auc24: (auc * 24) / period,
    peak,
    peakTime,
    trough: trough ?? INFUSION_THROUGHOUT,
    minimum,
    average,
    fluctuation: throughout ? INFUSION_THROUGHOUT : (peak - minimum) / average,
    swing: throughout ? INFUSION_THROUGHOUT : minimum > 0 ? (peak - minimum) / minimum : 'the minimum is 0',
    ...accumulation,
    troughRatio: trough === undefined ? INFUSION_THROUGHOUT : accumulation.troughRatio,
    ...reachedValues(reached(request, steady, { auc, trough, aucBefore }, course), trough, aucBefore),
    reached90ByLevel: 'defined for an infusion without end alone',
    ...shares(steady.course, window, period)
  }
}

function reachedValues(
  found: Reached,
  trough: number | undefined,
  aucBefore: MilligramHoursPerLitre | undefined
): Pick<Group, 'reached90' | 'reached90ByTrough' | 'reached90OfChange'> {
  const never = `not within ${found.periods} periods`
  return {
    reached90: found.byArea ?? never,
    reached90ByTrough: found.byTrough ?? (trough === undefined ? INFUSION_THROUGHOUT : never),
    reached90OfChange:
      found.ofChange ??
      (aucBefore === undefined ? 'no repeated dose of a full period goes before what repeats at the end' : never)
  }
}

/**
 * Area of the period before the first dose of what repeats at the end, where another line that repeated for a while was
 * begun before: a change of dose.
 */
function areaBeforeChange(steady: SteadyPeriod, course: Course): MilligramHoursPerLitre | undefined {
  const { lines, origin, period } = steady
  const changed = course.prescription.lines.some(
    (line, i) => !lines.includes(i) && line.every !== undefined && isBefore(line.at, origin)
  )
  if (!changed || isBefore(origin, period)) return undefined
  return areaBetween(course.trajectory, OBSERVED, Math.max(0, origin - period), origin)
}

function constantValues(steady: ConstantLevel, request: CourseRequest, window: Target | undefined): Group {
  const level = valueAt(steady.course, OBSERVED, 0, 'after')
  const why = 'an infusion without end alone has no period'
  return {
    ...nothing(why),
    auc24: 24 * level,
    peak: level,
    minimum: level,
    average: level,
    reached90ByLevel: levelReached(request, steady) ?? 'the level does not come near the constant one',
    ...shares(steady.course, window, steady.course.end)
  }
}

function shares(
  course: Trajectory,
  window: Target | undefined,
  length: number
): Pick<Group, 'timeInWindow' | 'timeAbove' | 'timeBelow'> {
  if (window !== undefined) return timeShares(course, window, 0, length)
  return { timeInWindow: NO_WINDOW, timeAbove: NO_WINDOW, timeBelow: NO_WINDOW }
}

/** When infusions run in a period: those of the periods before that reach into it as well. */
function recurringInfusions(steady: SteadyPeriod): Span[] {
  const { period, administrations, endless } = steady
  const whole = endless === undefined ? [] : [{ from: 0, to: period }]
  const own = infusionsOf(administrations)
  const before = own.flatMap(({ from, to }) => {
    const spans: Span[] = []
    for (let k = 1; isBefore(k * period, to); k++) spans.push({ from: from - k * period, to: to - k * period })
    return spans
  })
  return [...whole, ...own, ...before]
}

function nothing(why: string): Group {
  return {
    period: why,
    auc: why,
    auc24: why,
    peak: why,
    peakTime: why,
    trough: why,
    minimum: why,
    average: why,
    fluctuation: why,
    swing: why,
    accumulationRatio: why,
    peakRatio: why,
    troughRatio: why,
    effectiveHalfLife: why,
    operationalHalfLife: why,
    reached90: why,
    reached90ByTrough: why,
    reached90OfChange: why,
    reached90ByLevel: why,
    timeInWindow: why,
    timeAbove: why,
    timeBelow: why
  }
}
