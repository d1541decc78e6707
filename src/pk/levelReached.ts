import type { Hours } from '../units/canonical'
import { type CourseRequest, continuedCourse } from './course'
import { crossings, valueAt } from './curve'
import { observedVolume } from './model'
import { finalState } from './propagate'
import type { ConstantLevel } from './steadyPeriod'
import type { Signal } from './trajectory'

/** The course is followed to twice its length this often. */
const DOUBLINGS = 60
const NEAR = 0.1
const OBSERVED: Signal = { kind: 'observed' }

/**
 * Elapsed time from which on the concentration under an endless infusion stays within 10 % of its constant level, the
 * regimen as written and the infusion run on. Followed until what the body holds too much or too little could no longer
 * bring any later level beyond 10 %; undefined where that never comes.
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
    const excess = Array.from(now.amounts, (amount, i) => Math.abs(amount - steady.amounts[i]))
    const level = excess.reduce((sum, amount) => sum + amount, 0) / observedVolume(constant.model)
    if (level <= NEAR * goal) {
      const passes = [1 - NEAR, 1 + NEAR].flatMap((share) => crossings(trajectory, OBSERVED, share * goal, 0, end))
      return Math.max(0, ...passes.map(({ time }) => time))
    }
    end *= 2
  }
  return undefined
}
