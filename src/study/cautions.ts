import type { Finding } from '../patient/findings'
import type { Course } from '../pk/course'
import type { DoseOverLimit } from '../pk/doseLimits'
import type { RegimenExposure } from '../pk/exposure'
import { repeatsAtEnd } from '../pk/repeating'
import type { Hours } from '../units/canonical'
import type { Study, StudyRegimen } from './study'
import { targetCautions } from './targetCautions'

export interface CautionedRegimen {
  readonly regimen: StudyRegimen
  readonly course: Course
  readonly exposure: RegimenExposure
  readonly overLimits: readonly DoseOverLimit[]
  readonly until: Hours
}

/**
 * What must be said of a regimen before its numbers are used: doses over a limit, doses during a session, a dose rate that
 * has no steady state.
 */
export function regimenCautions(given: CautionedRegimen): readonly string[] {
  const { regimen, course, exposure, overLimits } = given
  const cautions: string[] = []
  const { average, why } = exposure.steadyState
  if (course.method === 'integrated' && average === undefined && why.average !== undefined) {
    const repeats = regimen.lines.some((line) => repeatsAtEnd(line, given.until))
    if (repeats) cautions.push(`${regimen.name}: ${why.average}`)
  }
  cautions.push(...limitCautions(regimen, overLimits))
  const during = course.administrations.filter(
    (given) =>
      !given.missed &&
      course.sessions.some(
        (session) =>
          given.at < session.start + session.duration &&
          // A bolus at the very start of a session is in it; one at its very end is not.
          (given.duration > 0 ? given.at + given.duration > session.start : given.at >= session.start)
      )
  )
  if (during.length > 0) {
    const which = during.length === 1 ? 'a dose overlaps' : `${during.length} doses overlap`
    cautions.push(`${regimen.name}: ${which} a dialysis session, which removes part of it`)
  }
  if (regimen.start === 'steady-state' && course.sessions.length > 0) {
    cautions.push(`${regimen.name}: the start in steady state is reckoned without dialysis sessions before time 0`)
  }
  return cautions
}

/** Doses over a limit of the drug without a reason: said on every output, a bare table's too. */
export function limitCautions(regimen: StudyRegimen, overLimits: readonly DoseOverLimit[]): readonly string[] {
  return overLimits
    .filter(({ line }) => regimen.reasons[line] === undefined)
    .map(
      ({ number, line, of, source }) =>
        `${regimen.name}: dose ${number} of line ${line + 1} is over the ${of} limit of the drug without a reason given (limit: ${source})`
    )
}

/** All cautions of one study, each once: of the model and patient, of the regimens, of what the arithmetic leaves out. */
export function studyCautions(
  study: Study,
  findings: readonly Finding[],
  regimens: readonly string[]
): readonly string[] {
  const cautions = findings.filter((finding) => finding.severity === 'caution').map((finding) => finding.text)
  if (study.people.length > 1) {
    cautions.push('the patient changes in steps at the times written; between them nothing is interpolated')
  }
  if (study.targets.some((target) => target.unbound === true)) {
    cautions.push(
      `unbound concentrations use a constant free fraction of ${study.drugModel.drug.fractionUnbound}, whatever the level`
    )
  }
  cautions.push(...targetCautions(study))
  return [...new Set([...cautions, ...regimens])]
}
