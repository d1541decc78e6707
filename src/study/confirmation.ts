import { INTEGRATION_WITNESS, integrate } from '../pk/integrate'
import { rowTimes } from '../pk/profileTimes'
import { type Witness, witness } from '../pk/witness'
import type { StudyResult } from './result'

/** How far a second, unrelated method agrees with the first over the concentration table of one regimen. */
export interface Confirmation extends Witness {
  readonly regimen: string
}

/** Every regimen computed again by the implicit integrator and compared at the times of its table. */
export function confirm(result: StudyResult): readonly Confirmation[] {
  return result.regimens.map(({ name, course }) => {
    const again = integrate(course.segments, course.initial, INTEGRATION_WITNESS)
    const times = [...rowTimes(course, result.study.sampling)].map(({ time }) => time)
    return { regimen: name, ...witness(course.trajectory, again, times) }
  })
}

/** The worst of several confirmations; undefined for none. */
export function worstOf(confirmations: readonly Confirmation[]): Confirmation | undefined {
  return confirmations.reduce<Confirmation | undefined>(
    (worst, each) =>
      worst === undefined || each.largestRelativeDifference > worst.largestRelativeDifference ? each : worst,
    undefined
  )
}
