import type { Hours, MilligramsPerLitre } from '../units/canonical'
import { type CourseRequest, continuedCourse } from './course'
import { crossings, valueAt } from './curve'
import { isLinear, observedVolume } from './model'
import { finalState } from './propagate'
import { isSettled } from './settled'
import type { BodyState } from './state'
import type { ConstantLevel } from './steadyPeriod'
import type { Signal } from './trajectory'

/** The course is followed to twice its length this often. */
const DOUBLINGS = 60
const NEAR = 0.1
const OBSERVED: Signal = { kind: 'observed' }

/**
 * Elapsed time from which on the concentration under an endless infusion stays within 10 % of its constant level, the
 * regimen as written and the infusion run on. Followed until what the body holds too much or too little could no longer
 * bring any later level beyond 10 % (in a model that is not linear: until every amount is within 1 %); undefined where that
 * never comes.
 */
export function levelReached(request: CourseRequest, constant: ConstantLevel): Hours | undefined {
  const goal = valueAt(constant.course, OBSERVED, 0, 'after')
  const steady = finalState(constant.course)
  let end = 2 * request.until
  for (let k = 0; k < DOUBLINGS; k++) {
    const outcome = continuedCourse(request, end)
    if (!outcome.ok) return undefined
    const { trajectory } = outcome.course
    const now = finalState(trajectory)
    if (staysNear(constant, now, steady, goal)) {
      const passes = [1 - NEAR, 1 + NEAR].flatMap((share) => crossings(trajectory, OBSERVED, share * goal, 0, end))
      return Math.max(0, ...passes.map(({ time }) => time))
    }
    end *= 2
  }
  return undefined
}

/** Whether no later level can be more than 10 % from the goal. */
function staysNear({ model }: ConstantLevel, now: BodyState, steady: BodyState, goal: MilligramsPerLitre): boolean {
  if (!isLinear(model)) return isSettled(model, now.amounts, steady.amounts, NEAR)
  const excess = Array.from(now.amounts, (amount, i) => Math.abs(amount - steady.amounts[i]))
  return excess.reduce((sum, amount) => sum + amount, 0) / observedVolume(model) <= NEAR * goal
}
