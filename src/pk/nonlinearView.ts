import { NumericalFailure } from '../numerics/numericalFailure'
import type { Hours, MilligramsPerHour } from '../units/canonical'
import type { Capacity } from './capacity'
import { changeReached, levelChangeReached, type Present, presentAt, stateBefore } from './changeReached'
import { type Course, type CourseRequest, continuedCourse } from './course'
import { doseForPeak } from './doseForPeak'
import { balanceAtLevel, type LevelBalance } from './instantaneousHalfLife'
import { isLinear } from './model'
import { ROUGHLY } from './periodicIntegrated'
import type { Reasons } from './reasons'
import { type ConstantInput, type RepeatingPeriod, repeatingAtEnd } from './steadyPeriod'
import { type SteadyAt, type SteadyPoint, SteadyScan, scaled, withMaximumRates } from './steadyScan'
import type { Target } from './target'
import { levelOf } from './timeShares'
import { isBefore } from './times'
import type { Signal } from './trajectory'

/**
 * What a model that is not linear makes of a regimen's dose, when all its repeating doses grow or shrink together. Levels
 * are total concentrations of `signal`: the first window's, else the observed one.
 */
export interface NonlinearView {
  readonly signal: Signal
  /** Undefined where nothing limits what can leave. */
  readonly capacity: Capacity | undefined
  /** Mean dose rate of the regimen as it is, after product fraction and bioavailability. */
  readonly doseRate: MilligramsPerHour
  readonly current: SteadyPoint | undefined
  /** Ascending; up to 95 % of capacity, or to three times the present dose where there is none. Within about 1e-5. */
  readonly curve: readonly SteadyPoint[]
  /** Rise of the average per rise of the dose rate, at the present dose [mg/L per mg/h]. */
  readonly slope: number | undefined
  /** At 80 % of capacity. */
  readonly at80: SteadyPoint | undefined
  /** Hours from the present until 90 % of the change to the steady state of the present dose is made. */
  readonly reached90OfChange: Hours | undefined
  readonly nextStep: NextStep | undefined
  /** At the window's limits and at the average, peak and minimum of the steady state; levels of the observed compartment. */
  readonly halfLives: readonly HalfLifeAt[]
  /** Under the name of what is undefined. */
  readonly why: Reasons
}

/** The largest next step: the dose whose steady-state peak is at the window's top. */
export interface NextStep extends SteadyPoint {
  /** How much the dose rate rises from the present one. */
  readonly rise: MilligramsPerHour
  /** Hours from the present until 90 % of the change to it is made. */
  readonly reached90: Hours | undefined
  /** The same dose where every maximum rate is 15 % lower; in words where it has no steady state. */
  readonly atLowerMaximum: SteadyPoint | string
  readonly why: Reasons
}

export interface HalfLifeAt extends LevelBalance {
  readonly of: 'low limit' | 'high limit' | 'minimum' | 'average' | 'peak'
}

export interface NonlinearViewRequest {
  readonly course: Course
  readonly request: CourseRequest
  /** The first window target. */
  readonly window?: Target
  /** The present; the end of the study where there is none. */
  readonly now?: Hours
}

/** Shares of capacity, or of three times the present dose, at which the curve has points. */
const SHARES = [0.05, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.75, 0.8, 0.85, 0.9, 0.925, 0.95]
/** Without a capacity the curve goes to this multiple of the present dose. */
const MULTIPLE = 3
const SLOWING_SHARE = 0.8
/** Change of the dose on either side for the slope. */
const SLOPE_STEP = 1e-3
const LOWER_MAXIMUM = 0.85

const NO_CAPACITY = 'nothing limits how much can leave the body'
const NO_TOP = 'no target is a window with a high limit'

/** The view of one regimen; undefined for a linear model, in words where nothing repeats at the end. */
export function nonlinearView(given: NonlinearViewRequest): NonlinearView | string | undefined {
  try {
    return viewOf(given)
  } catch (failure) {
    if (!(failure instanceof NumericalFailure)) throw failure
    return `it could not be computed: ${failure.message}`
  }
}

function viewOf(given: NonlinearViewRequest): NonlinearView | string | undefined {
  const { course, request, window } = given
  const repeating = repeatingAtEnd(course, request)
  if (repeating.kind === 'none') return course.method === 'exact' ? undefined : repeating.why
  if (isLinear(repeating.model)) return undefined
  const signal: Signal = window?.signal ?? { kind: 'observed' }
  const scan = new SteadyScan(repeating, signal)
  const current = scan.at(1)
  const curve = curveOf(scan)
  const slope = typeof current === 'string' ? current : slopeAt(scan)
  const share80 = scan.factorAt(SLOWING_SHARE)
  const at80 = share80 === undefined ? NO_CAPACITY : scan.at(share80)
  const reached90OfChange =
    typeof current === 'string' ? current : reachedFromPresent(given, repeating, current, signal)
  const nextStep = nextStepOf(given, repeating, scan, current, curve, signal)
  const halfLives = halfLivesAt(repeating, current, window, signal)
  return {
    signal,
    capacity: scan.capacity,
    doseRate: scan.doseRate,
    curve: curve.map(pointOf),
    halfLives: typeof halfLives === 'string' ? [] : halfLives,
    current: typeof current === 'string' ? undefined : pointOf(current),
    slope: typeof slope === 'string' ? undefined : slope,
    at80: typeof at80 === 'string' ? undefined : pointOf(at80),
    reached90OfChange: typeof reached90OfChange === 'string' ? undefined : reached90OfChange,
    nextStep: typeof nextStep === 'string' ? undefined : nextStep,
    why: {
      ...(scan.capacity === undefined && { capacity: NO_CAPACITY }),
      ...(typeof current === 'string' && { current }),
      ...(typeof halfLives === 'string' && { halfLives }),
      ...(typeof slope === 'string' && { slope }),
      ...(typeof at80 === 'string' && { at80 }),
      ...(typeof reached90OfChange === 'string' && { reached90OfChange }),
      ...(typeof nextStep === 'string' && { nextStep })
    }
  }
}

function pointOf({ factor, doseRate, average, peak, minimum }: SteadyAt): SteadyPoint {
  return { factor, doseRate, average, peak, minimum }
}

/** Points that have a steady state, ascending, the present dose among them. */
function curveOf(scan: SteadyScan): SteadyAt[] {
  const largest = scan.factorAt(1) ?? MULTIPLE
  const factors = SHARES.map((share) => share * largest)
  if (1 < factors[factors.length - 1] && !factors.includes(1)) factors.push(1)
  return factors
    .sort((a, b) => a - b)
    .flatMap((factor) => {
      const point = scan.at(factor, ROUGHLY)
      return typeof point === 'string' ? [] : [point]
    })
}

function slopeAt(scan: SteadyScan): number | string {
  const below = scan.at(1 - SLOPE_STEP)
  const above = scan.at(1 + SLOPE_STEP)
  if (typeof below === 'string') return below
  if (typeof above === 'string') return above
  return (above.average - below.average) / (above.doseRate - below.doseRate)
}

function nextStepOf(
  given: NonlinearViewRequest,
  repeating: RepeatingPeriod | ConstantInput,
  scan: SteadyScan,
  current: SteadyAt | string,
  curve: readonly SteadyAt[],
  signal: Signal
): NextStep | string {
  const { window } = given
  if (window?.high === undefined) return NO_TOP
  const top = levelOf(window, window.high)
  if (typeof current === 'string') return current
  if (current.peak >= top) return 'the steady state of the present dose is not under the window’s top'
  const found = doseForPeak(scan, curve, top)
  if (typeof found === 'string') return found
  const reached90 = reachedFromPresent(given, repeating, found, signal)
  const lowered = withMaximumRates(repeating, LOWER_MAXIMUM)
  const hasMaximum = repeating.model.transfers.some(({ kind }) => kind === 'saturable')
  const atLower = hasMaximum ? new SteadyScan(lowered, signal).at(found.factor) : 'the model has no maximum rate'
  return {
    ...pointOf(found),
    rise: found.doseRate - scan.doseRate,
    reached90: typeof reached90 === 'string' ? undefined : reached90,
    atLowerMaximum: typeof atLower === 'string' ? atLower : pointOf(atLower),
    why: typeof reached90 === 'string' ? { reached90 } : {}
  }
}

function reachedFromPresent(
  { course, request, now }: NonlinearViewRequest,
  repeating: RepeatingPeriod | ConstantInput,
  goal: SteadyAt,
  signal: Signal
): Hours | string {
  const time = now ?? request.until
  if (repeating.kind === 'constant') {
    const outcome = isBefore(course.end, time) ? continuedCourse(request, time, course) : { ok: true as const, course }
    if (!outcome.ok) return outcome.issues[0].message
    return levelChangeReached(stateBefore(outcome.course.trajectory, time, course.initial), goal, signal)
  }
  const present: Present | string = presentAt(course, request, repeating, time, signal)
  return typeof present === 'string'
    ? present
    : changeReached(present, scaled(repeating.segments, goal.factor), goal, signal)
}

function halfLivesAt(
  { model }: RepeatingPeriod | ConstantInput,
  current: SteadyAt | string,
  window: Target | undefined,
  signal: Signal
): HalfLifeAt[] | string {
  if (signal.kind !== 'observed') return 'the window is not one of the observed concentration'
  const levels: [HalfLifeAt['of'], number][] = []
  if (window?.low !== undefined) levels.push(['low limit', levelOf(window, window.low)])
  if (window?.high !== undefined) levels.push(['high limit', levelOf(window, window.high)])
  if (typeof current !== 'string') {
    levels.push(['minimum', current.minimum], ['average', current.average], ['peak', current.peak])
  }
  const found: HalfLifeAt[] = []
  for (const [of, level] of levels) {
    if (!(level > 0)) continue
    const balance = balanceAtLevel(model, level)
    if (typeof balance === 'string') return balance
    found.push({ of, ...balance })
  }
  return found
}
