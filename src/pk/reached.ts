import { areaToInfinity } from '../numerics/gth'
import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramHoursPerLitre, MilligramsPerLitre } from '../units/canonical'
import { type Course, type CourseRequest, continuedCourse } from './course'
import { areaBetween, valueAt } from './curve'
import { startsOf } from './intervals'
import { linearForm } from './linearRates'
import { offsetIn, pieceIndexAt } from './locate'
import { isLinear, observedVolume } from './model'
import { finalState } from './propagate'
import { continuedLine, isEndless } from './repeating'
import { isSettled } from './settled'
import type { BodyState } from './state'
import type { SteadyPeriod } from './steadyPeriod'
import { isBefore, sameTime } from './times'
import type { Signal } from './trajectory'

/** Searched over this many periods. */
const MOST_PERIODS = 1000
/** Within this of the steady state, or of the change, counts as reached. */
const NEAR = 0.1
/** Doses that a continued course may hold; a hundred thousand would be refused. */
const MOST_DOSES = 90_000

/** Elapsed times from which on a regimen is within 10 % of its steady state; each undefined where it never is. */
export interface Reached {
  readonly byArea: Hours | undefined
  readonly byTrough: Hours | undefined
  /** Within 10 % of the change of the area that a change of dose brings; undefined also where there was none. */
  readonly ofChange: Hours | undefined
  /** Periods that were looked at. */
  readonly periods: number
}

/** What a window is compared with. */
export interface SteadyValues {
  readonly auc: MilligramHoursPerLitre
  /** The lowest of the period; undefined where it has none. */
  readonly trough: MilligramsPerLitre | undefined
  /** Area of the period before the first repeating dose, where a repeated dose went before. */
  readonly aucBefore: MilligramHoursPerLitre | undefined
}

const OBSERVED: Signal = { kind: 'observed' }

/**
 * When 90 % of the steady state is reached, for the regimen as written with what repeats continued: windows of one period
 * from the first repeating dose; the end of the first window from which on every window is within 10 %. Up to 1,000
 * periods are followed; fewer where the areas that all later windows could still differ by are bounded below 10 % by the
 * area to infinity of what the body holds too much or too little, or, in a model that is not linear, where every amount is
 * well within 10 % of its steady state. `given` is the course as written.
 */
export function reached(request: CourseRequest, steady: SteadyPeriod, values: SteadyValues, given: Course): Reached {
  const { period, origin } = steady
  const most = Math.min(MOST_PERIODS, Math.max(1, Math.floor(MOST_DOSES / Math.max(1, steady.administrations.length))))
  const written = Math.ceil((request.until - origin) / period) + 1
  // What was integrated is used again and a linear course is cheap: the one grows slowly, the other fast.
  const growth = given.method === 'integrated' ? 1.25 : 4
  let course = given
  for (let periods = Math.min(most, written + 4); ; periods = Math.min(most, Math.ceil(growth * periods))) {
    const end = Math.max(origin + periods * period, request.until)
    const outcome = continuedCourse(request, end, course)
    if (!outcome.ok) return { byArea: undefined, byTrough: undefined, ofChange: undefined, periods: 0 }
    course = outcome.course
    if (periods === most || staysNear(course, request, steady, values)) {
      return measured(course, request, steady, values, periods)
    }
  }
}

function measured(
  course: Course,
  request: CourseRequest,
  steady: SteadyPeriod,
  values: SteadyValues,
  periods: number
): Reached {
  const { period, origin } = steady
  const windows = Array.from({ length: periods }, (_, k) => ({
    from: origin + k * period,
    to: Math.min(origin + (k + 1) * period, course.end)
  }))
  const areas = windows.map(({ from, to }) => areaBetween(course.trajectory, OBSERVED, from, to))
  const endOf = (first: number | undefined): Hours | undefined => (first === undefined ? undefined : windows[first].to)
  const { auc, trough, aucBefore } = values
  const change = aucBefore === undefined ? 0 : Math.abs(aucBefore - auc)
  return {
    byArea: endOf(firstStaying(areas, auc, NEAR * auc)),
    byTrough:
      trough === undefined
        ? undefined
        : endOf(firstStaying(lowestTroughs(course, request, steady, periods), trough, NEAR * trough)),
    ofChange: change > 0 ? endOf(firstStaying(areas, auc, NEAR * change)) : undefined,
    periods
  }
}

/** First position from which on every value is within `margin` of the goal. */
export function firstStaying(values: readonly number[], goal: number, margin: number): number | undefined {
  let first = values.length
  while (first > 0 && Math.abs(values[first - 1] - goal) <= margin) first -= 1
  return first < values.length ? first : undefined
}

/** Lowest value just before a dose of the repeating lines, in each window; not a number where a window has none. */
function lowestTroughs(course: Course, request: CourseRequest, steady: SteadyPeriod, periods: number): number[] {
  const { period, origin } = steady
  const lowest = new Array<number>(periods).fill(Number.NaN)
  const repeating = course.administrations.filter(({ line }) => steady.lines.includes(line))
  const times = startsOf(repeating).map(({ at }) => at)
  // The dose that would follow at the end of the last window is not in the course.
  const moved = steady.lines.some((line) => movedBy(request, line) !== 0)
  if (!isBefore(origin + periods * period, course.end) && !moved) times.push(course.end)
  for (const time of times) {
    const k = windowEndingAt(time, origin, period)
    if (k < 0 || k >= periods) continue
    const value = valueAt(course.trajectory, OBSERVED, time, 'before')
    if (!(lowest[k] <= value)) lowest[k] = value
  }
  return lowest
}

/** The window (origin + k period, origin + (k + 1) period] that a time lies in; its end belongs to it. */
function windowEndingAt(time: Hours, origin: Hours, period: Hours): number {
  const k = Math.floor((time - origin) / period)
  return isBefore(origin + k * period, time) ? k : k - 1
}

/**
 * Whether every later window is sure to stay within 10 %: all is as at steady state from the end on, except for what the
 * body holds too much or too little then, whose whole future area and whose every later level are small enough.
 */
function staysNear(course: Course, request: CourseRequest, steady: SteadyPeriod, values: SteadyValues): boolean {
  const goal = steadyAmountsAtEnd(request, steady)
  if (goal === undefined || isBefore(course.end, settledBy(course, request))) return false
  if (!endsWithPeriod(course, steady)) return false
  const now: BodyState = finalState(course.trajectory)
  const before = values.aucBefore === undefined ? 0 : values.aucBefore
  if (!isLinear(steady.model)) {
    const change = Math.abs(values.auc - before) / values.auc
    return isSettled(steady.model, now.amounts, goal, NEAR * Math.min(1, change > 0 ? change : 1))
  }
  const excess = Array.from(now.amounts, (amount, i) => Math.abs(amount - goal[i]))
  const volume = observedVolume(steady.model)
  // Sessions only take drug away, so that the model without them bounds the area.
  const area = areaToInfinity(linearForm(steady.model).rates, excess)[steady.model.observed] / volume
  const change = values.aucBefore === undefined ? values.auc : Math.abs(values.aucBefore - values.auc)
  if (!(area <= NEAR * Math.min(values.auc, change > 0 ? change : values.auc))) return false
  const level = excess.reduce((sum, amount) => sum + amount, 0) / volume
  return values.trough === undefined || level <= NEAR * values.trough
}

/** Whether a course ends with a period. */
function endsWithPeriod(course: Course, { origin, period }: SteadyPeriod): boolean {
  const count = Math.round((course.end - origin) / period)
  return sameTime(course.end, origin + count * period)
}

/** When all that was given or begun before the end of the study is over, endless infusions apart. */
function settledBy(course: Course, request: CourseRequest): Hours {
  const { prescription, until } = request
  let settled = until
  for (const administration of course.administrations) {
    if (!isBefore(administration.at, until) || isEndless(administration, prescription.lines, until)) continue
    for (const dose of administration.doses) {
      settled = Math.max(settled, dose.kind === 'bolus' ? dose.start : dose.start + dose.duration)
    }
  }
  for (const { start, duration } of course.sessions) {
    if (isBefore(start, until)) settled = Math.max(settled, start + duration)
  }
  return settled
}

/**
 * Amounts at steady state at the end of a window: before the first dose of a period, or, where a late dose has moved all
 * later ones, as much earlier in it. Undefined where lines have been moved by different times.
 */
function steadyAmountsAtEnd(request: CourseRequest, steady: SteadyPeriod): ReadonlyVector | undefined {
  const [moved = 0, ...others] = steady.lines.map((line) => movedBy(request, line))
  if (others.some((other) => !sameTime(other, moved))) return undefined
  const turns = moved / steady.period
  const earlier = moved - Math.round(turns) * steady.period
  if (Math.abs(turns - Math.round(turns)) < 1e-12) return steady.state.amounts
  const time = earlier > 0 ? steady.period - earlier : -earlier
  const piece = steady.course.pieces[pieceIndexAt(steady.course, time)]
  const amounts = new Float64Array(steady.state.amounts.length)
  piece.amountsInto(offsetIn(piece, time), amounts)
  return amounts
}

/** By how much late doses have moved the later doses of a line, in all. */
function movedBy({ prescription, until }: CourseRequest, line: number): Hours {
  const { exceptions } = continuedLine(prescription.lines[line], until)
  return exceptions.reduce((sum, { shiftsLater, lateBy = 0 }) => (shiftsLater === true ? sum + lateBy : sum), 0)
}
