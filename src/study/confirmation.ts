import type { Course } from '../pk/course'
import type { IntegrationTolerance } from '../pk/fluxTolerance'
import { INTEGRATION_WITNESS, integrate, WORKING_TOLERANCE } from '../pk/integrate'
import { michaelisMentenCourse } from '../pk/michaelisMenten'
import { rowTimes } from '../pk/profileTimes'
import type { Trajectory } from '../pk/trajectory'
import { type Witness, witness } from '../pk/witness'
import type { StudyResult } from './result'

/** How far a second, unrelated method agrees with the first over the concentration table of one regimen. */
export interface Confirmation extends Witness {
  readonly regimen: string
  /** Two unrelated methods, or one method at two tolerances. */
  readonly by: 'second method' | 'closed form' | 'finer tolerance'
}

/** What the course of a model that is not linear is compared with: a hundredth of the tolerance that it was computed to. */
const FINER: IntegrationTolerance = {
  relative: WORKING_TOLERANCE.relative / 100,
  floor: WORKING_TOLERANCE.floor / 100
}

/**
 * Every regimen computed again and compared at the times of its table: an exact course by the implicit integrator, an
 * integrated one in closed form where it has one, by the same method at a hundredth of its tolerance elsewhere.
 */
export function confirm(result: StudyResult): readonly Confirmation[] {
  return result.regimens.map(({ name, course }) => {
    const times = [...rowTimes(course, result.study.sampling)].map(({ time }) => time)
    const { by, again } = computedAgain(course)
    return { regimen: name, by, ...witness(course.trajectory, again, times) }
  })
}

function computedAgain({ segments, initial, method }: Course): Pick<Confirmation, 'by'> & { again: Trajectory } {
  if (method === 'exact') return { by: 'second method', again: integrate(segments, initial, INTEGRATION_WITNESS) }
  const closed = michaelisMentenCourse(segments, initial)
  if (closed !== undefined) return { by: 'closed form', again: closed }
  return { by: 'finer tolerance', again: integrate(segments, initial, FINER) }
}

/** The worst of several confirmations; undefined for none. */
export function worstOf(confirmations: readonly Confirmation[]): Confirmation | undefined {
  return confirmations.reduce<Confirmation | undefined>(
    (worst, each) =>
      worst === undefined || each.largestRelativeDifference > worst.largestRelativeDifference ? each : worst,
    undefined
  )
}
