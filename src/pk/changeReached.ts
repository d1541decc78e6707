import type { Hours, MilligramHoursPerLitre } from '../units/canonical'
import { CONTINUED_TOLERANCE } from './continued'
import { type Course, type CourseRequest, continuedCourse } from './course'
import { areaBetween, crossings, valueAt } from './curve'
import { Integrator, integrate } from './integrate'
import { offsetIn, pieceIndexAt } from './locate'
import { finalState } from './propagate'
import { firstStaying } from './reached'
import type { Segment } from './segment'
import { isSettled } from './settled'
import type { BodyState } from './state'
import type { SteadyAt } from './steadyScan'
import { isBefore } from './times'
import type { Signal, Trajectory } from './trajectory'

/** A body at the start of a period, and what it had in the period before. */
export interface Present {
  /** Elapsed time from which the change is counted. */
  readonly time: Hours
  /** The first start of a period at or after it: elapsed time. */
  readonly from: Hours
  /** Then, before anything given. */
  readonly state: BodyState
  /** Over one period before. */
  readonly auc: MilligramHoursPerLitre
}

/** Within this of the change counts as reached. */
const NEAR = 0.1
const MOST_PERIODS = 1000
/** A change of the area by less than this part of it is none. */
const NO_CHANGE = 1e-3

/** The body of a regimen at a time, or at the next start of a period; in words where there is no full period before. */
export function presentAt(
  course: Course,
  request: CourseRequest,
  { origin, period }: { readonly origin: Hours; readonly period: Hours },
  time: Hours,
  signal: Signal
): Present | string {
  const count = Math.max(0, Math.ceil((time - origin) / period - 1e-12))
  const from = origin + count * period
  const before = from - period
  if (isBefore(before, 0) && request.prescription.start !== 'empty') {
    return 'the study holds no full period before the change'
  }
  let { trajectory } = course
  if (isBefore(course.end, from)) {
    const outcome = continuedCourse(request, from, course)
    if (!outcome.ok) return outcome.issues[0].message
    trajectory = outcome.course.trajectory
  }
  const state = stateBefore(trajectory, from, course.initial)
  return { time, from, state, auc: areaBetween(trajectory, signal, Math.max(0, before), from) }
}

/**
 * Hours from the present until 90 % of the change to a steady state is made, its doses given from the next start of a
 * period on: windows of one period, the end of the first from which on every area is within 10 % of the change. In words
 * where there is no change or it is not made within 1,000 periods. Integrated at 1e-5.
 */
export function changeReached(
  present: Present,
  segments: readonly Segment[],
  goal: SteadyAt,
  signal: Signal
): Hours | string {
  const { end } = goal.course
  const auc = goal.average * end
  const change = Math.abs(auc - present.auc)
  if (!(change > NO_CHANGE * auc)) return 'the present state is the steady state'
  const [{ model }] = segments
  const integrator = new Integrator(CONTINUED_TOLERANCE)
  integrator.begin(present.state)
  const areas: number[] = []
  while (areas.length < MOST_PERIODS) {
    const initial = integrator.state
    const pieces = segments.map((segment) => integrator.piece(segment))
    areas.push(areaBetween({ end, initial, pieces }, signal, 0, end))
    if (!isSettled(model, integrator.state.amounts, goal.state.amounts, NEAR * Math.min(1, change / auc))) continue
    const first = firstStaying(areas, auc, NEAR * change)
    return first === undefined
      ? 'the change is too small to be followed'
      : present.from - present.time + (first + 1) * end
  }
  return `not within ${MOST_PERIODS} periods`
}

/** A constant input is followed over a day and twice as long this often. */
const DOUBLINGS = 40

/**
 * The same for a constant input that begins at the present: the last time at which the level is 10 % of the change away
 * from its goal.
 */
export function levelChangeReached(state: BodyState, goal: SteadyAt, signal: Signal): Hours | string {
  const [{ segment }] = goal.course.pieces
  const before = valueAt(goalFrom(state, segment, segment.duration), signal, 0, 'before')
  const change = Math.abs(goal.average - before)
  if (!(change > NO_CHANGE * goal.average)) return 'the present state is the steady state'
  for (let k = 0, duration = segment.duration; k < DOUBLINGS; k++, duration *= 2) {
    const trajectory = goalFrom(state, segment, duration)
    const now = finalState(trajectory)
    const margin = NEAR * Math.min(1, change / goal.average)
    if (!isSettled(segment.model, now.amounts, goal.state.amounts, margin)) continue
    const limits = [goal.average - NEAR * change, goal.average + NEAR * change]
    const passes = limits.flatMap((limit) => crossings(trajectory, signal, limit, 0, duration))
    return Math.max(0, ...passes.map(({ time }) => time))
  }
  return 'the level does not come near the constant one'
}

function goalFrom(state: BodyState, segment: Segment, duration: Hours): Trajectory {
  return integrate([{ ...segment, start: 0, duration }], state)
}

/** The state at a time, before anything given then. */
export function stateBefore(trajectory: Trajectory, time: Hours, initial: BodyState): BodyState {
  if (!isBefore(time, trajectory.end)) return finalState(trajectory)
  const index = pieceIndexAt(trajectory, time)
  const offset = offsetIn(trajectory.pieces[index], time)
  if (offset === 0 && index === 0) return initial
  const pieces = trajectory.pieces.slice(0, offset === 0 ? index : index + 1)
  const last = pieces[pieces.length - 1]
  if (offset === 0) return finalState({ ...trajectory, pieces })
  const amounts = new Float64Array(initial.amounts.length)
  last.amountsInto(offset, amounts)
  const effectSites = Array.from(initial.effectSites, (_, i) =>
    last.concentration({ kind: 'effect-site', index: i }, offset)
  )
  return { amounts, effectSites }
}
