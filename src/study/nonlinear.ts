import { type NonlinearView, nonlinearView } from '../pk/nonlinearView'
import type { StudyResult } from './result'

/** What a model that is not linear makes of each regimen's dose; in words where it cannot be told, undefined for a linear one. */
export function nonlinearViews(result: StudyResult): readonly (NonlinearView | string | undefined)[] {
  const { targets, now } = result.study
  const window = targets.find(({ kind }) => kind === 'window')
  return result.regimens.map(({ course, request }) =>
    nonlinearView({
      course,
      request,
      ...(window !== undefined && { window }),
      ...(now !== undefined && { now })
    })
  )
}
